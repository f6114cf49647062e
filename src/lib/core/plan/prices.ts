/**
 * Lagrange prices and the bound they prove. With a price on every watt of every limit and window, each block chooses alone; the
 * sum of the cheapest choices, less what the room is worth, is no more than any plan costs, whatever the prices are, as
 * long as none is negative and those of one charge add up to no more than the charge.
 */
import { cheapestChoice, type Block } from './blocks.ts'
import type { Model } from './model.ts'
import { sumsBefore } from './run-terms.ts'

/** What is asked of the blocks: the least cost of serving all of them, or the fewest that must be left out. */
export interface Question {
  readonly blocks: readonly Block[]
  /** 1 counts the runs' own cost, 0 only who is served. */
  readonly costShare: 0 | 1
  readonly skipCost: number
}

export interface Answer {
  readonly bound: number
  /** Load less room of each limit and slot, then load and base less floor of each window: where prices should go. */
  readonly excess: Float64Array
}

/** Prices in minor units per watt and slot: limits first, then windows, as in `Answer.excess`. */
export type Prices = Float64Array

export const priceCount = (model: Model, question: Question): number =>
  model.roomW.length + (question.costShare === 1 ? model.windowBaseW.length : 0)

/** Sums of the prices before each slot, so that a start is priced in a few steps. */
export interface PriceSums {
  readonly limit: readonly Float64Array[]
  readonly expected: Float64Array
  readonly expectedAt: Float64Array
  readonly worst: Float64Array
}

export function sumPrices(model: Model, prices: Prices): PriceSums {
  const { slots, limitCount, roomW } = model
  const limit = Array.from({ length: limitCount }, (_, place) => sumsBefore(prices.subarray(place * slots, (place + 1) * slots)))
  const expectedAt = new Float64Array(slots + 1)
  const worstAt = new Float64Array(slots)
  if (prices.length > roomW.length)
    for (const { windowOfSlot, worstCase } of model.terms) {
      const at = worstCase ? worstAt : expectedAt
      for (let slot = 0; slot < slots; slot++) {
        const window = windowOfSlot[slot]!
        if (window >= 0) at[slot] = at[slot]! + prices[roomW.length + window]! * model.windowShare[window]!
      }
    }
  return { limit, expected: sumsBefore(expectedAt), expectedAt, worst: sumsBefore(worstAt) }
}

/** What a start pays for the load it brings. */
export function loadPrice(model: Model, sums: PriceSums, runIndex: number, slot: number): number {
  const run = model.runs[runIndex]!
  const end = slot + run.worst
  const full = slot + run.full
  let price =
    run.powerW * (sums.expected[full]! - sums.expected[slot]! + run.part * sums.expectedAt[full]! + sums.worst[end]! - sums.worst[slot]!)
  for (let limit = 0; limit < run.limitW.length; limit++) {
    const before = sums.limit[limit]!
    price += run.limitW[limit]! * (before[end]! - before[slot]!)
  }
  return price
}

export function answer(model: Model, question: Question, prices: Prices): Answer {
  const { slots, limitCount, roomW, reachableW } = model
  const sums = sumPrices(model, prices)
  const limitStep = new Float64Array(limitCount * (slots + 1))
  const expectedStep = new Float64Array(slots + 2)
  const worstStep = new Float64Array(slots + 1)
  const { costShare } = question
  const reducedCost = (run: number, candidate: number) => {
    const { costs, starts } = model.runs[run]!
    return costShare * costs[candidate]! + loadPrice(model, sums, run, starts[candidate]!)
  }
  let bound = 0
  for (const block of question.blocks) {
    const { value, chosen } = cheapestChoice(model, block, reducedCost, question.skipCost)
    bound += block.count * value
    let place = 0
    for (const need of block.needs)
      for (const index of need) {
        const candidate = chosen[place++]!
        if (candidate < 0) continue
        const run = model.runs[index]!
        const slot = run.starts[candidate]!
        const end = slot + run.worst
        for (let limit = 0; limit < limitCount; limit++) {
          const watts = block.count * run.limitW[limit]!
          limitStep[limit * (slots + 1) + slot] = limitStep[limit * (slots + 1) + slot]! + watts
          limitStep[limit * (slots + 1) + end] = limitStep[limit * (slots + 1) + end]! - watts
        }
        if (costShare === 0) continue
        const watts = block.count * run.powerW
        const full = slot + run.full
        expectedStep[slot] = expectedStep[slot]! + watts
        expectedStep[full] = expectedStep[full]! - watts * (1 - run.part)
        expectedStep[full + 1] = expectedStep[full + 1]! - watts * run.part
        worstStep[slot] = worstStep[slot]! + watts
        worstStep[end] = worstStep[end]! - watts
      }
  }
  const excess = new Float64Array(prices.length)
  for (let limit = 0; limit < limitCount; limit++) {
    let load = 0
    for (let slot = 0; slot < slots; slot++) {
      load += limitStep[limit * (slots + 1) + slot]!
      const row = limit * slots + slot
      excess[row] = load - reachableW[row]!
      bound -= prices[row]! * reachableW[row]!
    }
  }
  if (costShare === 1) {
    for (const term of model.terms) {
      const step = term.worstCase ? worstStep : expectedStep
      let load = 0
      for (let slot = 0; slot < slots; slot++) {
        load += step[slot]!
        const window = term.windowOfSlot[slot]!
        if (window >= 0) excess[roomW.length + window] = excess[roomW.length + window]! + load * model.windowShare[window]!
      }
    }
    for (let window = 0; window < model.windowBaseW.length; window++) {
      const over = model.windowBaseW[window]! - model.terms[model.windowTerm[window]!]!.floorW
      excess[roomW.length + window] = excess[roomW.length + window]! + over
      bound += prices[roomW.length + window]! * over
    }
  }
  return { bound, excess }
}

/** The nearest prices that prove something: none negative, those of one charge together no more than the charge. */
export function admit(model: Model, prices: Prices): void {
  for (let place = 0; place < prices.length; place++) if (prices[place]! < 0) prices[place] = 0
  if (prices.length === model.roomW.length) return
  for (const { firstWindow, windowCount, priceMinorPerW } of model.terms) {
    const first = model.roomW.length + firstWindow
    const own = prices.subarray(first, first + windowCount)
    let sum = 0
    for (const price of own) sum += price
    if (sum <= priceMinorPerW) continue
    // Projection on the simplex: lower all by the same, those that would go below nothing stay at nothing.
    const falling = Float64Array.from(own).sort().reverse()
    let above = 0
    let cut = 0
    for (let count = 0; count < falling.length; count++) {
      above += falling[count]!
      const next = (above - priceMinorPerW) / (count + 1)
      if (next >= falling[count]!) break
      cut = next
    }
    for (let place = 0; place < own.length; place++) own[place] = Math.max(0, own[place]! - cut)
  }
}
