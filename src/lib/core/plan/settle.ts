/**
 * The cheapest starts for needs that are known to fit together, and the bound that no such starts beat. Prices from the
 * ascent say where load is dear; starts are laid out by them, repaired, and polished at the charges' true maxima.
 */
import { ascend, beginAscent, fitsUnpriced, type Ascent } from './ascend.ts'
import { alike, type Block } from './blocks.ts'
import { copyLoads, noLoads, totalCost, type Loads } from './loads.ts'
import type { Model } from './model.ts'
import { sumPrices, type Question } from './prices.ts'
import { beginSearch, forgetPenalties, peaks, reinsert, repair, sweep, type Search } from './search.ts'
import { shuffle } from './random.ts'

export interface Settling {
  readonly model: Model
  readonly isIn: Uint8Array
  readonly blocks: readonly Block[]
  /** Starts that keep every limit. */
  readonly loads: Loads
  readonly random: () => number
  readonly targetGapFraction: number
  readonly effort: number
}

export interface Settled {
  readonly loads: Loads
  readonly cost: number
  readonly bound: number
}

/** Slots looked at by the search for each unit of effort: about a third of a second. */
const STEPS = 60_000_000
const ASCENT_ROUNDS = [30, 40, 60, 80, 100, 150, 200, 250]
const KEEP = { sums: null, mayPass: false } as const

export function settle(settling: Settling): Settled {
  const { model, blocks, isIn, random, targetGapFraction, effort } = settling
  const question: Question = { blocks: alike(model, blocks), costShare: 1, skipCost: Infinity }
  let ascent = beginAscent(model, question)
  const search = beginSearch({ model, blocks, isIn, loads: noLoads(model), random, mostSteps: STEPS * effort })
  if (fitsUnpriced(ascent)) {
    for (const block of blocks) reinsert(search, block, KEEP)
    return { loads: search.loads, cost: totalCost(model, search.loads), bound: ascent.bound }
  }
  search.loads = copyLoads(settling.loads)
  let best = improved(search)
  const near = () => best.cost - ascent.bound <= targetGapFraction * Math.abs(best.cost)
  for (const rounds of ASCENT_ROUNDS) {
    ascent = ascend(model, question, ascent, { rounds: Math.ceil(rounds * effort), target: best.cost, enoughFraction: targetGapFraction / 2 })
    if (near()) break
    best = cheaper(best, layOut(search, ascent))
    if (near()) break
    best = cheaper(best, polish(search, best))
    if (near() || search.steps >= search.mostSteps) break
  }
  return { ...best, bound: Math.min(ascent.bound, best.cost) }
}

interface Found {
  readonly loads: Loads
  readonly cost: number
}

const cheaper = (one: Found, other: Found | null): Found => (other && other.cost < one.cost ? other : one)

/** Keeps what is kept and lets every block look for a cheaper place, until a round gains nothing. */
function improved(search: Search): Found {
  const { model } = search
  let cost = totalCost(model, search.loads)
  for (let round = 0; round < 6; round++) {
    search.targetW.set(peaks(model, search.loads.windowW))
    sweep(search, KEEP)
    const now = totalCost(model, search.loads)
    if (now > cost - 1e-9 * Math.abs(cost)) break
    cost = now
  }
  return { loads: copyLoads(search.loads), cost: totalCost(model, search.loads) }
}

/** Lays everything out anew by the prices, at the lowest maxima that can be reached from what the fractional plan has. */
function layOut(search: Search, ascent: Ascent): Found | null {
  const { model } = search
  const sums = sumPrices(model, ascent.prices)
  const estimate = Float64Array.from(model.terms, ({ floorW, firstWindow, windowCount }) => {
    let over = 0
    for (let window = firstWindow; window < firstWindow + windowCount; window++) over = Math.max(over, ascent.excess[model.roomW.length + window]!)
    return floorW + over
  })
  let best: Found | null = null
  let low = 1
  let high = Infinity
  let factor = 1.01
  const order = bySize(search)
  for (let attempt = 0; attempt < 6 && search.steps < search.mostSteps; attempt++) {
    model.terms.forEach(({ floorW }, term) => (search.targetW[term] = floorW + (estimate[term]! - floorW) * factor))
    forgetPenalties(search)
    search.loads = noLoads(model)
    for (const block of order) reinsert(search, block, { sums, mayPass: true })
    if (repair(search, 25)) {
      best = cheaper(improved(search), best)
      high = factor
    } else low = factor
    if (model.terms.length === 0) break
    if (high - low < 0.003) break
    factor = high < Infinity ? (low + high) / 2 : 1 + (factor - 1) * 2.5
  }
  return best
}

/** Long and strong ones first: they are the hardest to fit later. */
function bySize({ model, blocks, random }: Search): Block[] {
  const size = (block: Block) => block.needs.flat().reduce((sum, run) => sum + model.runs[run]!.powerW * model.runs[run]!.worst, 0)
  const sized = shuffle([...blocks], random).map((block) => ({ block, size: size(block) }))
  return sized.sort((one, other) => other.size - one.size).map(({ block }) => block)
}

/** Shaves each maximum a little, or lets it rise a little, as long as that pays. */
function polish(search: Search, from: Found): Found {
  const { model } = search
  let best = from
  for (let term = 0; term < model.terms.length; term++)
    for (const share of [-0.08, -0.03, -0.01, 0.03, -0.003, 0.01]) {
      for (let again = 0; again < 4 && search.steps < search.mostSteps; again++) {
        search.loads = copyLoads(best.loads)
        const now = peaks(model, search.loads.windowW)
        search.targetW.set(now)
        const { floorW } = model.terms[term]!
        search.targetW[term] = floorW + (now[term]! - floorW) * (1 + share)
        forgetPenalties(search)
        if (share < 0 && !repair(search, 15)) break
        if (share > 0) sweep(search, KEEP)
        const found = improved(search)
        if (found.cost >= best.cost - 1e-9 * Math.abs(best.cost)) break
        best = found
      }
    }
  return best
}
