/**
 * Raises the bound: the volume method (Barahona and Anbil, The volume algorithm, Mathematical Programming 87, 2000), which walks
 * along the averaged excess and so finds, beside the prices, about what the best fractional plan loads where.
 */
import type { Model } from './model.ts'
import { admit, answer, priceCount, type Prices, type Question } from './prices.ts'

export interface Ascent {
  readonly prices: Prices
  readonly bound: number
  /** Averaged excess, as in `Answer.excess`: the fractional plan's. */
  readonly excess: Float64Array
  readonly factor: number
}

export function beginAscent(model: Model, question: Question): Ascent {
  const prices = new Float64Array(priceCount(model, question))
  const first = answer(model, question, prices)
  return { prices, bound: first.bound, excess: first.excess, factor: 1 }
}

/** Whether the choices without any price already fit: then the bound is the answer. */
export const fitsUnpriced = (ascent: Ascent): boolean => ascent.excess.every((excess) => excess <= 1e-9)

export interface AscentStep {
  readonly rounds: number
  /** A cost to aim at: that of the best plan known. */
  readonly target: number
  /** Ends when the bound is this near to the target. */
  readonly enoughFraction: number
}

// Constants of the method as its authors give them, except the averaging, which here falls with the rounds: 0.1 throughout left gaps about twice as wide.
const GREEN = 1.1
const RED = 0.7
const PATIENCE = 12

export function ascend(model: Model, question: Question, start: Ascent, step: AscentStep): Ascent {
  let { prices, bound, factor } = start
  const excess = start.excess.slice()
  let idle = 0
  for (let round = 0; round < step.rounds; round++) {
    if (bound >= step.target - step.enoughFraction * Math.abs(step.target)) break
    const norm = usableNorm(model, excess, prices)
    if (norm < 1e-9) break
    const length = (factor * Math.max(step.target * 1.002 - bound, 1e-6 * Math.abs(step.target) + 1e-9)) / norm
    const next = new Float64Array(prices.length)
    for (let place = 0; place < next.length; place++) next[place] = prices[place]! + length * excess[place]!
    admit(model, next)
    const tried = answer(model, question, next)
    let along = 0
    for (let place = 0; place < excess.length; place++) along += excess[place]! * tried.excess[place]!
    const share = averageShare(excess, tried.excess, prices, round)
    for (let place = 0; place < excess.length; place++) excess[place] = share * tried.excess[place]! + (1 - share) * excess[place]!
    if (tried.bound > bound) {
      bound = tried.bound
      prices = next
      idle = 0
      if (along >= 0) factor = Math.min(2, factor * GREEN)
    } else if (++idle >= PATIENCE) {
      idle = 0
      factor = Math.max(0.005, factor * RED)
    }
  }
  return { prices, bound, excess, factor }
}

/** The share of the new answer that makes the averaged excess smallest, kept between a tenth of its cap and its cap. */
function averageShare(average: Float64Array, fresh: Float64Array, prices: Prices, round: number): number {
  const most = round < 30 ? 0.3 : round < 100 ? 0.1 : 0.05
  let top = 0
  let bottom = 0
  for (let place = 0; place < average.length; place++) {
    if (average[place]! <= 0 && fresh[place]! <= 0 && prices[place] === 0) continue
    const difference = average[place]! - fresh[place]!
    top += average[place]! * difference
    bottom += difference * difference
  }
  if (bottom < 1e-12) return most
  return Math.min(most, Math.max(most / 10, top / bottom))
}

/** The squared length of what is left of the excess once prices that would leave their bounds are held. */
function usableNorm(model: Model, excess: Float64Array, prices: Prices): number {
  let norm = 0
  const limits = model.roomW.length
  for (let place = 0; place < limits; place++) {
    const over = excess[place]!
    if (over > 0 || prices[place]! > 0) norm += over * over
  }
  if (excess.length === limits) return norm
  for (const { firstWindow, windowCount, priceMinorPerW } of model.terms) {
    const own = prices.subarray(limits + firstWindow, limits + firstWindow + windowCount)
    const over = excess.subarray(limits + firstWindow, limits + firstWindow + windowCount)
    let sum = 0
    for (const price of own) sum += price
    // A charge that is handed out in full only moves between its windows: what all of them have in common moves nothing.
    let common = 0
    for (let pass = 0; pass < 4 && sum > 0.999 * priceMinorPerW; pass++) {
      let total = 0
      let count = 0
      for (let place = 0; place < own.length; place++)
        if (own[place]! > 0 || (pass > 0 && over[place]! > common)) {
          total += over[place]!
          count++
        }
      common = count === 0 ? 0 : Math.max(0, total / count)
    }
    for (let place = 0; place < own.length; place++) {
      const rest = over[place]! - common
      if (rest > 0 || own[place]! > 0) norm += rest * rest
    }
  }
  return norm
}
