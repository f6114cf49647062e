/** Who can be served: everybody if there is a way, otherwise as many as the search finds, and how many no plan can serve. */
import { advance, openBalance } from './balance.ts'
import { alike, cheapestChoice, unitBlocks, type Block } from './blocks.ts'
import { copyLoads, fits, noLoads, place, takeOff, type Loads } from './loads.ts'
import type { Model } from './model.ts'
import { loadPrice, sumPrices, type Question } from './prices.ts'
import { shuffle } from './random.ts'
import { beginSearch, forgetPenalties, reinsert, repair, type Search } from './search.ts'

export interface Service {
  readonly isIn: Uint8Array
  readonly blocks: readonly Block[]
  readonly loads: Loads
  readonly unservedAtLeast: number
  /** Needs that no plan at all can serve, or whose pin cannot be kept. */
  readonly excluded: ReadonlyMap<number, 'no-allowed-start' | 'pin-not-allowed' | 'pin-over-limit' | 'too-large-alone'>
}

const STEPS = 40_000_000

export function chooseServed(model: Model, random: () => number, effort: number): Service {
  const excluded = excludedNeeds(model)
  const isIn = Uint8Array.from(model.runsOfNeed, (_, need) => (excluded.has(need) ? 0 : 1))
  const blocks = unitBlocks(model, (need) => isIn[need] === 1)
  const search = beginSearch({ model, blocks, isIn, loads: noLoads(model), random, mostSteps: STEPS * effort })
  const impossible = [...excluded.values()].filter((reason) => reason === 'no-allowed-start' || reason === 'too-large-alone').length
  if (everyBlockPlaced(search) && repair(search, 40)) return { isIn, blocks, loads: search.loads, unservedAtLeast: impossible, excluded }

  const question: Question = { blocks: alike(model, blocks), costShare: 0, skipCost: 1 }
  const balance = openBalance({ model, blocks, question, loads: noLoads(model), random })
  for (let phase = 0; phase < 25 * effort; phase++) advance(balance)
  serveMore(search, serveCheapestFirst(search, balance.best.prices))
  const bound = Math.max(0, Math.ceil(balance.best.bound - 1e-6))
  const served = unitBlocks(model, (need) => isIn[need] === 1)
  return { isIn, blocks: served, loads: search.loads, unservedAtLeast: impossible + bound, excluded }
}

function excludedNeeds(model: Model): Map<number, 'no-allowed-start' | 'pin-not-allowed' | 'pin-over-limit' | 'too-large-alone'> {
  const excluded: ReturnType<typeof excludedNeeds> = new Map()
  const empty = noLoads(model)
  const pins = noLoads(model)
  model.runsOfNeed.forEach((runs, need) => {
    const pinned = runs.some((run) => model.runs[run]!.pinned)
    const block = runs.every((run) => model.runs[run]!.starts.length > 0) ? unitBlocks(model, (other) => other === need)[0] : undefined
    const way = (loads: Loads | null) =>
      block !== undefined &&
      cheapestChoice(model, block, (run, at) => (loads && !fits(model, loads, model.runs[run]!, model.runs[run]!.starts[at]!) ? Infinity : 0), Infinity).chosen.every(
        (candidate) => candidate >= 0,
      )
    if (!way(null)) excluded.set(need, pinned ? 'pin-not-allowed' : 'no-allowed-start')
    else if (!way(empty)) excluded.set(need, 'too-large-alone')
  })
  return keepPins(model, pins, excluded)
}

/** Pinned runs come first, in their order; one that does not fit beside those before it is out. */
function keepPins(model: Model, pins: Loads, excluded: ReturnType<typeof excludedNeeds>): typeof excluded {
  model.runsOfNeed.forEach((runs, need) => {
    const pinned = runs.map((run) => model.runs[run]!).filter((run) => run.pinned)
    if (pinned.length === 0 || excluded.has(need)) return
    const placed: typeof pinned = []
    for (const run of pinned) {
      if (!fits(model, pins, run, run.starts[0]!)) break
      place(model, pins, run, 0)
      placed.push(run)
    }
    if (placed.length === pinned.length && !overlapsInUnit(model, pins, need)) return
    for (const run of placed) takeOff(model, pins, run)
    excluded.set(need, placed.length === pinned.length ? 'pin-not-allowed' : 'pin-over-limit')
  })
  return excluded
}

/** Whether the placed runs of the need's unit overlap or stand in another order than theirs. */
function overlapsInUnit(model: Model, loads: Loads, need: number): boolean {
  let over = 0
  for (const other of model.needsOfUnit[model.unitOfNeed[need]!]!)
    for (const index of model.runsOfNeed[other]!) {
      const candidate = loads.chosen[index]!
      if (candidate < 0) continue
      const run = model.runs[index]!
      if (run.starts[candidate]! < over) return true
      over = run.starts[candidate]! + run.worst
    }
  return false
}

function everyBlockPlaced(search: Search): boolean {
  const bySize = [...search.blocks].sort((one, other) => watts(search.model, other) - watts(search.model, one))
  return bySize.every((block) => reinsert(search, block, { sums: null, mayPass: true }))
}

const watts = (model: Model, block: Block): number => block.needs.flat().reduce((sum, run) => sum + model.runs[run]!.powerW * model.runs[run]!.worst, 0)

/** Those first that ask least of what is scarce; pinned ones before all. */
function serveCheapestFirst(search: Search, prices: Float64Array): number[] {
  const { model, isIn } = search
  const sums = sumPrices(model, prices)
  const asked = model.runsOfNeed.map((runs, need) => ({
    need,
    pinned: runs.some((run) => model.runs[run]!.pinned),
    price: runs.reduce((sum, run) => sum + [...model.runs[run]!.starts].reduce((least, slot) => Math.min(least, loadPrice(model, sums, run, slot)), Infinity), 0),
    size: runs.reduce((sum, run) => sum + model.runs[run]!.powerW * model.runs[run]!.worst, 0),
  }))
  asked.sort((one, other) => Number(other.pinned) - Number(one.pinned) || one.price - other.price || one.size - other.size)
  const wanted = isIn.slice()
  isIn.fill(0)
  search.loads = noLoads(model)
  const blockOf = blocksByNeed(search)
  for (const { need } of asked) {
    if (wanted[need] === 0) continue
    isIn[need] = 1
    if (!reinsert(search, blockOf.get(need)!, { sums, mayPass: false })) isIn[need] = 0
  }
  return [...wanted.keys()].filter((need) => wanted[need] === 1 && isIn[need] === 0)
}

function blocksByNeed(search: Search): Map<number, Block> {
  const blockOf = new Map<number, Block>()
  for (const block of search.blocks) for (const need of block.needs) blockOf.set(search.model.runs[need[0]!]!.need, block)
  return blockOf
}

/** Forces one more in and repairs; keeps it where that ends well. */
function serveMore(search: Search, left: number[]): void {
  const blockOf = blocksByNeed(search)
  for (let again = 0; again < 2; again++)
    for (const need of shuffle([...left], search.random)) {
      if (search.steps >= search.mostSteps) return
      const before = copyLoads(search.loads)
      search.isIn[need] = 1
      forgetPenalties(search)
      if (reinsert(search, blockOf.get(need)!, { sums: null, mayPass: true }) && repair(search, 12)) {
        left.splice(left.indexOf(need), 1)
        continue
      }
      search.isIn[need] = 0
      search.loads = before
    }
}
