/** Who can be served: everybody if there is a way, otherwise as many as the search finds, and how many no plan can serve. */
import { anneal } from './anneal.ts'
import { advance, openBalance } from './balance.ts'
import { alike, unitBlocks, type Block } from './blocks.ts'
import { excludedNeeds, type Excluded } from './excluded.ts'
import { copyLoads, fits, noLoads, overlapsInUnit, place, takeOff, type Loads } from './loads.ts'
import type { Model, ModelRun } from './model.ts'
import { loadPrice, sumPrices, type PriceSums, type Question } from './prices.ts'
import { shuffle } from './random.ts'
import { beginSearch, forgetPenalties, reinsert, repair, type Search } from './search.ts'

export interface Service {
  readonly isIn: Uint8Array
  readonly blocks: readonly Block[]
  readonly loads: Loads
  readonly unservedAtLeast: number
  readonly excluded: Excluded
}

/** Slots looked at for each unit of effort: about a sixth of a second. */
const STEPS = 20_000_000
const STEPS_OF_A_PAIR = 20_000
const PHASES = 24
/** Up to so many blocks are shuffled one by one. */
const FEW = 150
const PASS = { sums: null, mayPass: true } as const

export function chooseServed(model: Model, random: () => number, effort: number): Service {
  const excluded = excludedNeeds(model)
  const isIn = Uint8Array.from(model.runsOfNeed, (_, need) => (excluded.has(need) ? 0 : 1))
  const blocks = unitBlocks(model, (need) => isIn[need] === 1)
  const search = beginSearch({
    model,
    blocks,
    isIn,
    loads: noLoads(model),
    random,
    mostSteps: effort * Math.min(STEPS, STEPS_OF_A_PAIR * model.runs.length ** 2),
  })
  // A pin that clashes with other pins could be served by a plan that drops those: it does not count here.
  const impossible = [...excluded.values()].filter((reason) => reason === 'no-allowed-start' || reason === 'too-large-alone').length
  const everybody = (): Service => ({ isIn, blocks, loads: search.loads, unservedAtLeast: impossible, excluded })
  const bySize = [...blocks].sort((one, other) => sizeOf(other.runs) - sizeOf(one.runs))
  if (bySize.every((block) => reinsert(search, block, PASS)) && repair(search, 20)) return everybody()

  const question: Question = { blocks: alike(model, blocks), costShare: 0, skipCost: 1 }
  const balance = openBalance({ model, blocks, question, loads: noLoads(model), random })
  for (let phase = 0; phase < PHASES * effort; phase++) {
    advance(balance)
    if (balance.best.bound > 1e-6 || phase % 4 !== 3) continue
    // Nothing is proven yet against serving everybody: put in who was left out, and try.
    search.loads = copyLoads(balance.loads)
    forgetPenalties(search)
    if (blocks.every((block) => isPlaced(search, block) || reinsert(search, block, PASS)) && repair(search, 60)) return everybody()
  }
  const leftAtLeast = Math.max(0, Math.ceil(balance.best.bound - 1e-6))
  serveMany(search, balance.loads, sumPrices(model, balance.best.prices), leftAtLeast)
  return {
    isIn,
    blocks: unitBlocks(model, (need) => isIn[need] === 1),
    loads: search.loads,
    unservedAtLeast: impossible + leftAtLeast,
    excluded,
  }
}

const sizeOf = (runs: readonly ModelRun[]): number => runs.reduce((sum, { powerW, worst }) => sum + powerW * worst, 0)

const isPlaced = ({ loads }: Search, block: Block): boolean => block.runs.every(({ index }) => loads.chosen[index]! >= 0)

/** Two ways to fill up, the better of them filled further. */
function serveMany(search: Search, balanced: Loads, sums: PriceSums, leftAtLeast: number): void {
  const { model, isIn } = search
  const wanted = [...isIn.keys()].filter((need) => isIn[need] === 1)
  const isPinned = (need: number) => model.runsOfNeed[need]!.some((run) => model.runs[run]!.pinned)
  const cheapest = (run: number) =>
    model.runs[run]!.starts.reduce((least, slot) => Math.min(least, loadPrice(model, sums, run, slot)), Infinity)
  const asked = wanted.map((need) => {
    const runs = model.runsOfNeed[need]!
    const price = runs.reduce((sum, run) => sum + cheapest(run), 0)
    return {
      need,
      price,
      pinned: Number(isPinned(need)),
      in: Number(runs.every((run) => balanced.chosen[run]! >= 0)),
      size: sizeOf(runs.map((run) => model.runs[run]!)),
    }
  })
  asked.sort((one, other) => other.pinned - one.pinned || one.price - other.price || one.size - other.size)
  const first = fill(
    search,
    asked.map(({ need }) => need),
    null,
    sums,
  )
  const firstIn = isIn.slice()
  const firstLoads = search.loads
  asked.sort((one, other) => other.pinned - one.pinned || other.in - one.in || one.price - other.price || one.size - other.size)
  const second = fill(
    search,
    asked.map(({ need }) => need),
    balanced,
    sums,
  )
  if (first.length < second.length) {
    isIn.set(firstIn)
    search.loads = firstLoads
  }
  serveMore(search, first.length < second.length ? first : second, leftAtLeast)
}

/** Serves one need after the other, where a balanced plan has it if that fits, else at the price of what is scarce; returns who is left. */
function fill(search: Search, order: readonly number[], balanced: Loads | null, sums: PriceSums): number[] {
  const { model, isIn } = search
  for (const need of order) isIn[need] = 0
  search.loads = noLoads(model)
  const blockOf = blocksByNeed(search)
  return order.filter((need) => {
    isIn[need] = 1
    if (balanced && placeAsIn(search, need, balanced)) return false
    if (reinsert(search, blockOf.get(need)!, { sums, mayPass: false })) return false
    isIn[need] = 0
    return true
  })
}

function placeAsIn({ model, loads }: Search, need: number, balanced: Loads): boolean {
  const runs = model.runsOfNeed[need]!.map((run) => model.runs[run]!)
  const free = runs.every((run) => {
    const candidate = balanced.chosen[run.index]!
    return candidate >= 0 && fits(model, loads, run, run.starts[candidate]!)
  })
  if (!free) return false
  for (const run of runs) place(model, loads, run, balanced.chosen[run.index]!)
  // A neighbour of the unit may stand elsewhere than in the balanced plan.
  if (!overlapsInUnit(model, loads, need)) return true
  for (const run of runs) takeOff(model, loads, run)
  return false
}

function blocksByNeed(search: Search): Map<number, Block> {
  const blockOf = new Map<number, Block>()
  for (const block of search.blocks) for (const need of block.needs) blockOf.set(search.model.runs[need[0]!]!.need, block)
  return blockOf
}

/** Forces one more in and repairs; keeps it where that ends well. Stops where no more can be served. */
function serveMore(search: Search, left: number[], leftAtLeast: number): void {
  const blockOf = blocksByNeed(search)
  for (let again = 0; again < 2; again++)
    for (const need of shuffle([...left], search.random)) {
      if (search.steps >= search.mostSteps || left.length <= leftAtLeast) return
      const before = copyLoads(search.loads)
      search.isIn[need] = 1
      forgetPenalties(search)
      if (reinsert(search, blockOf.get(need)!, PASS) && (repair(search, 12) || shuffled(search))) {
        left.splice(left.indexOf(need), 1)
        continue
      }
      search.isIn[need] = 0
      search.loads = before
    }
}

/** For few blocks: shuffles what does not fit until it does, or gives up. */
function shuffled(search: Search): boolean {
  if (search.blocks.length > FEW) return false
  const { scale, model, blocks } = search
  // A heater over its limit for half an hour of slots is what the first moves may do.
  const warmMinor = (scale * sizeOf(blocks.flatMap(({ runs }) => runs))) / Math.max(1, model.runs.length) / 2
  for (let again = 0; again < 3; again++) {
    search.limitPenalty.fill(scale)
    anneal(search, { moves: 300 * blocks.length, warmMinor })
    forgetPenalties(search)
    if (repair(search, 30)) return true
  }
  return false
}
