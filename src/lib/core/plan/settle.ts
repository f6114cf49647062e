/**
 * The cheapest starts for needs that are known to fit together, and the bound that no such starts beat. Starts and
 * prices are balanced; what that leaves over a limit is repaired, and the best is polished at the charges' true maxima.
 */
import { anneal } from './anneal.ts'
import { advance, openBalance } from './balance.ts'
import { alike, type Block } from './blocks.ts'
import { copyLoads, noLoads, totalCost, type Loads } from './loads.ts'
import type { Model, ModelRun } from './model.ts'
import { answer, priceCount, type Question } from './prices.ts'
import { beginSearch, forgetPenalties, peaks, reinsert, repair, sweep, type Search } from './search.ts'

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

/** Slots looked at by the search for each unit of effort: about a quarter of a second. */
const STEPS = 45_000_000
/** In a small building each pair of runs has so many to settle which of them goes first. */
const STEPS_OF_A_PAIR = 40_000
const PHASES = 32
/** Up to so many blocks are shuffled one by one; more of them even out by themselves. */
const FEW = 150
const EPOCHS = 400
const EPOCHS_OF_A_RUN = 12
/** A little dearer is good enough to go on from, for so many epochs. */
const WANDER = 0.004
const RETURN = 12
/** Enough when three trials in turn have each closed the gap by less than this share of the cost. */
const STILL = 1e-5
const SHAVES = [0.07, 0.25, 0.7, 0.15, 0.35]
const WARMS = [0.3, 1, 0.1]
const KEEP = { sums: null, mayPass: false } as const

export function settle(settling: Settling): Settled {
  const { model, blocks, isIn, random, targetGapFraction, effort } = settling
  const question: Question = { blocks: alike(model, blocks), costShare: 1, skipCost: Infinity }
  const search = beginSearch({
    model,
    blocks,
    isIn,
    loads: noLoads(model),
    random,
    mostSteps: effort * Math.min(STEPS, STEPS_OF_A_PAIR * model.runs.length ** 2),
  })
  const unpriced = answer(model, question, new Float64Array(priceCount(model, question)))
  if (unpriced.excess.every((excess) => excess <= 1e-9)) {
    for (const block of blocks) reinsert(search, block, KEEP)
    return { loads: search.loads, cost: totalCost(model, search.loads), bound: unpriced.bound }
  }
  const balance = openBalance({ model, blocks, question, loads: settling.loads, random })
  search.loads = copyLoads(settling.loads)
  let best = improved(search)
  const near = () => best.cost - balance.best.bound <= targetGapFraction * Math.abs(best.cost)
  let still = 0
  let before = Infinity
  for (let phase = 0; phase < PHASES * effort && search.steps < search.mostSteps && !near(); phase++) {
    advance(balance)
    if (phase < 5 || phase % 3 !== 2) continue
    best = cheaper(best, finished(search, balance.loads))
    const gap = best.cost - balance.best.bound
    still = before - gap < STILL * Math.abs(best.cost) ? still + 1 : 0
    before = gap
    if (still === 3) break
  }
  if (!near()) best = polish(search, best)
  let here = best
  for (
    let epoch = 0;
    epoch < effort * Math.min(EPOCHS, EPOCHS_OF_A_RUN * model.runs.length) &&
    blocks.length <= FEW &&
    search.steps < search.mostSteps &&
    !near();
    epoch++
  ) {
    const found = annealed(search, epoch % RETURN === 0 ? best : here, epoch, effort)
    if (found && found.cost < here.cost + WANDER * Math.abs(here.cost)) here = found
    best = cheaper(best, found)
  }
  return { ...best, bound: Math.min(balance.best.bound, best.cost) }
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

/** Repairs starts that pass limits, without raising any maximum, and lets them improve; `null` when they cannot be repaired. */
function finished(search: Search, loads: Loads): Found | null {
  search.loads = copyLoads(loads)
  search.targetW.set(peaks(search.model, loads.windowW))
  forgetPenalties(search)
  return repair(search, 60) ? improved(search) : null
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

/** Shuffles starts at a target some part of a run's load below their maxima, warm or lukewarm by turns. */
function annealed(search: Search, from: Found, epoch: number, effort: number): Found | null {
  const { model } = search
  const runs = search.blocks.flatMap((block) => block.runs)
  const mean = (of: (run: ModelRun) => number) => runs.reduce((sum, run) => sum + of(run), 0) / runs.length
  search.loads = copyLoads(from.loads)
  const lumpW = SHAVES[epoch % SHAVES.length]! * mean(({ powerW }) => powerW)
  peaks(model, search.loads.windowW).forEach((peak, term) => {
    const { floorW, priceMinorPerW, firstWindow, windowCount } = model.terms[term]!
    search.targetW[term] = Math.max(floorW, peak - lumpW)
    // A run above the target touches several windows: together they pay about the charge.
    const touched = Math.max(1, mean(({ worst }) => worst) * model.windowShare[firstWindow]!)
    search.windowPenalty.fill((1.2 * priceMinorPerW) / touched, firstWindow, firstWindow + windowCount)
  })
  search.limitPenalty.fill(4 * search.scale)
  const moves = Math.ceil(300 * Math.max(1, effort) * search.blocks.length)
  anneal(search, { moves, warmMinor: WARMS[epoch % WARMS.length]! * warmth(search) })
  return finished(search, search.loads)
}

/** What one block's worst start costs more than its best, with the charges it may raise; on the average. */
function warmth({ model, blocks }: Search): number {
  const runs = blocks.flatMap((block) => block.runs)
  const spread = runs.reduce((sum, { costs, byCost }) => sum + costs[byCost.at(-1)!]! - costs[byCost[0]!]!, 0)
  const charges = runs.reduce((sum, { powerW }) => sum + model.terms.reduce((price, term) => price + term.priceMinorPerW, 0) * powerW, 0)
  return (0.1 * spread + 0.4 * charges) / Math.max(1, runs.length)
}
