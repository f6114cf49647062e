/**
 * Good prices and a nearly right plan at once: block by block, each takes the start that is cheapest at prices which rise with the
 * load that the others have just now (an augmented Lagrangian, one block at a time). From phase to phase the prices learn and
 * rise less steeply, so that they settle. A block is small against the whole, so a few dozen rounds come within a thousandth
 * of the best prices, where the volume method, which moves all blocks at once, was still a hundredth away after a thousand.
 */
import { cheapestChoice, type Block } from './blocks.ts'
import { copyLoads, place, takeOff, type Loads } from './loads.ts'
import type { MaxTerm, Model } from './model.ts'
import { admit, answer, loadPrice, priceCount, type Prices, type PriceSums, type Question } from './prices.ts'
import { shuffle } from './random.ts'

export interface Balance {
  readonly model: Model
  /** One block a unit and stretch of time; the question's are the same, alike ones counted once. */
  readonly blocks: readonly Block[]
  readonly question: Question
  readonly random: () => number
  /** As the last round left them; limits may be passed. */
  readonly loads: Loads
  readonly prices: Prices
  readonly smooth: Prices
  readonly sums: PriceSums
  /** How much a price rises with a watt of load. */
  limitSlope: number
  readonly windowSlope: Float64Array
  /** The maximum that each charge's windows are priced against. */
  readonly levelW: Float64Array
  phase: number
  best: { readonly prices: Prices; readonly bound: number }
}

/** Of each phase's three rounds, and how much less steep prices are after it: measured over the test family, wide around these. */
const ROUNDS = 3
const FALL = 0.8
const SMOOTHING = 0.25

export interface OpenBalance {
  readonly model: Model
  readonly blocks: readonly Block[]
  readonly question: Question
  /** Where the blocks stand to begin with; left as it is. */
  readonly loads: Loads
  readonly random: () => number
}

export function openBalance({ model, blocks, question, loads, random }: OpenBalance): Balance {
  const prices = new Float64Array(priceCount(model, question))
  const { slots } = model
  return {
    model,
    blocks,
    question,
    random,
    loads: copyLoads(loads),
    prices,
    smooth: prices.slice(),
    ...slopes(model, blocks, question),
    levelW: Float64Array.from(model.terms, ({ floorW }) => floorW),
    sums: {
      limit: Array.from({ length: model.limitCount }, () => new Float64Array(slots + 1)),
      expected: new Float64Array(slots + 1),
      expectedAt: new Float64Array(slots + 1),
      worst: new Float64Array(slots + 1),
    },
    phase: 0,
    best: firstPrices(model, question),
  }
}

/** Three rounds over all blocks; then the prices learn, and are tried as a bound. */
export function advance(balance: Balance): void {
  const { model, question, random, smooth, prices } = balance
  const order = [...balance.blocks]
  const every = Math.max(1, Math.ceil(order.length / 40))
  for (let round = 0; round < ROUNDS; round++) {
    shuffle(order, random)
    order.forEach((block, count) => {
      if (count % every === 0) setLevels(balance)
      settleBlock(balance, block)
    })
    setLevels(balance)
    const now = livePrices(balance)
    const share = Math.max(SMOOTHING, 1 / (balance.phase * ROUNDS + round + 1))
    for (let at = 0; at < now.length; at++) smooth[at] = (1 - share) * smooth[at]! + share * now[at]!
  }
  prices.set(smooth)
  balance.phase++
  const { bound } = answer(model, question, smooth)
  if (bound > balance.best.bound) balance.best = { prices: smooth.slice(), bound }
  if (balance.phase < 2) return
  balance.limitSlope *= FALL
  for (let term = 0; term < balance.windowSlope.length; term++) balance.windowSlope[term] = balance.windowSlope[term]! * FALL
}

/** No price at all, or every charge spread evenly over its windows: the mean load is a bound of its own. */
function firstPrices(model: Model, question: Question): Balance['best'] {
  const none = new Float64Array(priceCount(model, question))
  const even = none.slice()
  if (question.costShare === 1)
    for (const { firstWindow, windowCount, priceMinorPerW } of model.terms)
      even.fill(priceMinorPerW / windowCount, model.roomW.length + firstWindow, model.roomW.length + firstWindow + windowCount)
  admit(model, even)
  const bounds = [none, even].map((prices) => ({ prices, bound: answer(model, question, prices).bound }))
  return bounds[0]!.bound >= bounds[1]!.bound ? bounds[0]! : bounds[1]!
}

function slopes(model: Model, blocks: readonly Block[], question: Question): Pick<Balance, 'limitSlope' | 'windowSlope'> {
  const runs = blocks.flatMap((block) => block.runs)
  const count = Math.max(1, runs.length)
  const meanW = runs.reduce((sum, run) => sum + run.powerW, 0) / count
  const worth = ({ costs, byCost }: Model['runs'][number]) =>
    question.costShare === 1 ? costs[byCost.at(-1)!]! - costs[byCost[0]!]! : question.skipCost
  const perWattSlot = runs.reduce((sum, run) => sum + worth(run) / Math.max(1, run.powerW * run.worst), 0) / count
  // A price moves by about its own size over a heater's load or a fiftieth of the mean load, whichever is more.
  const width = Math.max(meanW, runs.reduce((sum, run) => sum + run.powerW * run.worst, 0) / model.slots / 50, 1)
  return {
    limitSlope: (0.5 * perWattSlot) / width,
    windowSlope: Float64Array.from(model.terms, ({ priceMinorPerW, windowCount }) => priceMinorPerW / (0.2 * windowCount) / width),
  }
}

/** The level at which the prices of a charge's windows add up to the charge; its floor when even there they are less. */
function level(term: MaxTerm, price: (window: number) => number, slope: number): number {
  // Newton on a convex falling function, from below: every step stays below the root or on it.
  let at = term.floorW
  for (let step = 0; step < 30; step++) {
    let sum = 0
    let count = 0
    for (let window = term.firstWindow; window < term.firstWindow + term.windowCount; window++) {
      const value = price(window) - slope * at
      if (value <= 0) continue
      sum += value
      count++
    }
    if (sum <= term.priceMinorPerW * (1 + 1e-9)) return at
    at += (sum - term.priceMinorPerW) / (count * slope)
  }
  return at
}

function setLevels({ model, question, loads, prices, windowSlope, levelW }: Balance): void {
  if (question.costShare === 0) return
  const limits = model.roomW.length
  model.terms.forEach((term, place) => {
    const slope = windowSlope[place]!
    levelW[place] = level(term, (window) => prices[limits + window]! + slope * loads.windowW[window]!, slope)
  })
}

function settleBlock(balance: Balance, block: Block): void {
  const { model, loads, sums, question } = balance
  const { runs } = block
  for (const run of runs) takeOff(model, loads, run)
  priceBlock(balance, block, runs[0]!.powerW)
  const reducedCost = (run: number, candidate: number) => {
    const { costs, starts } = model.runs[run]!
    return question.costShare * costs[candidate]! + loadPrice(model, sums, run, starts[candidate]!)
  }
  const { chosen } = cheapestChoice(model, block, reducedCost, question.skipCost)
  runs.forEach((run, at) => {
    if (chosen[at]! >= 0) place(model, loads, run, chosen[at]!)
  })
}

/** Sums the prices of the slots that the block can reach; half of its own load counts as being there. */
function priceBlock(
  { model, loads, prices, limitSlope, windowSlope, levelW, sums, question }: Balance,
  block: Block,
  powerW: number,
): void {
  const { slots, limitCount, reachableW, roomW } = model
  const { from } = block
  const to = Math.min(slots, from + block.span)
  for (let limit = 0; limit < limitCount; limit++) {
    const before = sums.limit[limit]!
    before[from] = 0
    for (let slot = from; slot < to; slot++) {
      const row = limit * slots + slot
      const over = roomW[row]! - loads.leftW[row]! + powerW / 2 - reachableW[row]!
      before[slot + 1] = before[slot]! + Math.max(0, prices[row]! + limitSlope * over)
    }
  }
  sums.expectedAt.fill(0, from, to + 1)
  const worstAt = sums.worst
  worstAt.fill(0, from, to + 1)
  const terms = question.costShare === 1 ? model.terms : []
  terms.forEach(({ windowOfSlot, worstCase }, place) => {
    const at = worstCase ? worstAt : sums.expectedAt
    for (let slot = from; slot < to; slot++) {
      const window = windowOfSlot[slot]!
      if (window < 0) continue
      const price = prices[roomW.length + window]! + windowSlope[place]! * (loads.windowW[window]! + powerW / 2 - levelW[place]!)
      if (price > 0) at[slot] = at[slot]! + price * model.windowShare[window]!
    }
  })
  sums.expected[from] = 0
  let worst = 0
  for (let slot = from; slot < to; slot++) {
    sums.expected[slot + 1] = sums.expected[slot]! + sums.expectedAt[slot]!
    const here = worstAt[slot]!
    worstAt[slot] = worst
    worst += here
  }
  worstAt[to] = worst
}

/** What load costs just now. */
function livePrices({ model, loads, prices, limitSlope, windowSlope, levelW }: Balance): Prices {
  const live = prices.slice()
  const limits = model.roomW.length
  for (let row = 0; row < limits; row++)
    live[row] = prices[row]! + limitSlope * (model.roomW[row]! - loads.leftW[row]! - model.reachableW[row]!)
  for (let window = 0; limits + window < live.length; window++) {
    const term = model.windowTerm[window]!
    live[limits + window] = prices[limits + window]! + windowSlope[term]! * (loads.windowW[window]! - levelW[term]!)
  }
  admit(model, live)
  return live
}
