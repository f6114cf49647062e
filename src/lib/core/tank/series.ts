/**
 * The closed form of the blocks' motion: the power series of the matrix exponential, summed until the law's norm says that the
 * next term is under 2e-6 K, with the roots of its polynomials. τ runs from 0 to 1 over the step.
 */
import type { Column } from './column.ts'

const MOST_TERMS = 24
const SMALL_K = 2e-6
const INVERSE = Float64Array.from({ length: MOST_TERMS + 3 }, (_, k) => 1 / k)

export interface Series {
  /** Highest power in use. */
  order: number
  /** Coefficient of τ^k of block b at `k * n + b`, K. */
  readonly terms: Float64Array
  /** Temperature of each block at τ = 1. */
  readonly endK: Float64Array
  /** Scratch: the polynomial whose root is sought. */
  readonly polynomial: Float64Array
  /** Heat lost in the whole step, as K of one node. */
  lostK: number
  /** Coefficient of τ^k of the heat lost, as K of one node per step. */
  readonly lostTerms: Float64Array
}

export const seriesFor = (n: number): Series => ({
  order: 0,
  lostK: 0,
  terms: new Float64Array((MOST_TERMS + 1) * n),
  endK: new Float64Array(n),
  polynomial: new Float64Array(MOST_TERMS + 1),
  lostTerms: new Float64Array(MOST_TERMS + 1),
})

/** Fills the series for a step from the blocks that were found. The loss is that of the terms that made the last one, so that heat balances exactly. */
export function expand(series: Series, column: Column, stepS: number): void {
  const { n, conductionPerS: g } = column
  const { count, share, meanK, rateKPerS, lossPerS } = column.blocks
  const { terms, endK, lostTerms } = series
  let leak = 0
  let largest = 0
  for (let b = 0; b < count; b++) {
    const mean = meanK[b]!
    const first = rateKPerS[b]! * stepS
    terms[b] = mean
    terms[n + b] = first
    endK[b] = mean + first
    leak += lossPerS[b]! * mean
    const size = Math.abs(first)
    if (size > largest) largest = size
  }
  lostTerms[0] = leak * stepS
  let lost = leak
  let order = 1
  const reach = column.normPerS * stepS
  for (let from = n; largest * reach * INVERSE[order + 1]! > SMALL_K && order < MOST_TERMS; from += n) {
    const factor = stepS * INVERSE[order + 1]!
    largest = 0
    leak = 0
    let own = terms[from]!
    let fromAbove = 0
    for (let b = 0; b < count; b++) {
      const below = b < count - 1 ? terms[from + b + 1]! : own
      const toBelow = g * (own - below)
      const away = lossPerS[b]! * own
      const next = (fromAbove - toBelow - away) * factor * share[b]!
      terms[from + n + b] = next
      endK[b] = endK[b]! + next
      leak += away
      const size = Math.abs(next)
      if (size > largest) largest = size
      own = below
      fromAbove = toBelow
    }
    lostTerms[order] = leak * stepS
    lost += leak * INVERSE[order + 1]!
    order++
  }
  series.order = order
  series.lostK = lost * stepS
}

/** Temperature of a block at τ, K above ambient. */
export function blockAt(series: Series, n: number, block: number, tau: number): number {
  const { order, terms } = series
  let value = terms[order * n + block]!
  for (let k = order - 1; k >= 0; k--) value = value * tau + terms[k * n + block]!
  return value
}

/** Heat lost to the room up to τ, as K of one node. */
export function lostUntil({ order, lostTerms, lostK }: Series, tau: number): number {
  if (tau === 1) return lostK
  let value = lostTerms[order - 1]! / order
  for (let k = order - 2; k >= 0; k--) value = value * tau + lostTerms[k]! / (k + 1)
  return value * tau
}

const MOST_TRIES = 60
/** Well under what counts as the same water. */
const SAME_AS_ZERO_K = 1e-8

/** A question to the series: block b, less another block, less a limit, times a sign: not positive at τ = 0. */
export interface Crossing {
  readonly block: number
  /** −1: none. */
  readonly minusBlock: number
  readonly minusK: number
  readonly sign: 1 | -1
}

/** The τ at which a crossing happens that is positive at τ = 1. */
export function crossingAt(series: Series, n: number, crossing: Crossing): number {
  difference(series, n, crossing)
  return rootOf(series, 1)
}

/** Slope of a block's temperature at τ = 1, K per step. */
export function endSlope({ order, terms }: Series, n: number, block: number): number {
  let slope = 0
  for (let k = order; k > 0; k--) slope += k * terms[k * n + block]!
  return slope
}

/** The τ of a crossing that is undone before τ = 1, the slope being positive at 0 and negative at 1; 2 when it turns before it crosses. */
export function passedAt(series: Series, n: number, crossing: Crossing): number {
  const { order, polynomial } = series
  difference(series, n, crossing)
  for (let k = 0; k < order; k++) polynomial[k] = -(k + 1) * polynomial[k + 1]!
  polynomial[order] = 0
  const turn = rootOf(series, 1)
  difference(series, n, crossing)
  let value = 0
  for (let k = order; k >= 0; k--) value = value * turn + polynomial[k]!
  return value > 0 ? rootOf(series, turn) : 2
}

function difference({ order, terms, polynomial }: Series, n: number, { block, minusBlock, minusK, sign }: Crossing): void {
  for (let k = 0, from = 0; k <= order; k++, from += n)
    polynomial[k] = sign * (terms[from + block]! - (minusBlock < 0 ? 0 : terms[from + minusBlock]!) - (k === 0 ? minusK : 0))
}

/** The root in (0, high) of the polynomial, negative at 0 and positive at `high`: Newton's method from the chord, kept inside the bracket. */
export function rootOf({ order, polynomial }: Series, end: number): number {
  const at0 = polynomial[0]!
  if (at0 >= 0) return 0
  let low = 0
  let high = end
  let at1 = 0
  for (let k = order; k >= 0; k--) at1 = at1 * end + polynomial[k]!
  let tau = (end * at0) / (at0 - at1)
  for (let tries = 0; tries < MOST_TRIES; tries++) {
    let value = polynomial[order]!
    let slope = 0
    for (let k = order - 1; k >= 0; k--) {
      slope = slope * tau + value
      value = value * tau + polynomial[k]!
    }
    if (Math.abs(value) < SAME_AS_ZERO_K) return tau
    if (value < 0) low = tau
    else high = tau
    tau -= value / slope
    if (!(tau > low && tau < high)) tau = (low + high) / 2
  }
  return tau
}
