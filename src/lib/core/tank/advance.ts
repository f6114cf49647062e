/**
 * Moves a column through one step of constant power, exactly, up to the first thing that happens in it: the end of the time
 * given, a thermostat's limit, blocks that meet, or a block that parts.
 */
import { blockOf, type Column, emptyColumn, fillColumn, findBlocks, mixInversions } from './column.ts'
import type { TankModel } from './model.ts'
import { blockAt, crossingAt, expand, lostUntil, type Series, seriesFor } from './series.ts'

/** Limits that end a step: a node rising to one, or up to two falling to one. −1: no node is watched. */
export interface Watch {
  risingNode: number
  risingToK: number
  readonly fallingNode: Int32Array
  readonly fallingToK: Float64Array
}

export interface Motion {
  readonly column: Column
  readonly series: Series
  readonly watch: Watch
  /** Heated node (−1: none) and its rate if it were alone, K/s. */
  heatNode: number
  heatKPerS: number
  /** Heat lost so far, as K of one node. */
  lostK: number
}

const emptyMotion = (n: number): Motion => ({
  column: emptyColumn(n),
  series: seriesFor(n),
  watch: { risingNode: -1, risingToK: 0, fallingNode: new Int32Array(2).fill(-1), fallingToK: new Float64Array(2) },
  heatNode: -1,
  heatKPerS: 0,
  lostK: 0,
})

/** Motions given back, to be filled anew: making one costs a tenth of a day's simulation. Nothing in them outlives a simulation. */
const spare: Motion[] = []

export function takeMotion(tank: TankModel, nodesC: readonly number[]): Motion {
  const last = spare.pop()
  const motion = last?.column.n === nodesC.length ? last : emptyMotion(nodesC.length)
  fillColumn(motion.column, tank, nodesC)
  motion.heatNode = -1
  motion.heatKPerS = 0
  motion.lostK = 0
  return motion
}

export const giveBack = (motion: Motion): void => {
  spare.push(motion)
}

/**
 * Blocks that meet sooner than this are mixed at its end instead of where they meet: the energy is the same, and the excess of
 * at most 2 K for seconds conducts away less than shifts a node by 1e-4 K. It also keeps touching blocks from stalling a step.
 */
const LEAST_STEP_S = 60
const LEAST_STEP_K = 2
/** A linear forecast of the next event is stretched by this, so that the event falls inside the step. */
const FORECAST = 1.25
/** Steps below this look for no parting: blocks are found anew at its end, less than 1e-4 K late. */
const PARTING_FROM_S = 300
const VIOLATION_K = 1e-7

/** Moves by at most `durationS`; returns the seconds moved. */
export function advance(motion: Motion, durationS: number): number {
  const { column, series } = motion
  findBlocks(column, motion.heatNode, motion.heatKPerS)
  const leastS = motion.heatNode < 0 ? LEAST_STEP_S : Math.min(LEAST_STEP_S, LEAST_STEP_K / motion.heatKPerS)
  const stepS = forecast(motion, Math.min(durationS, column.longestStepS), leastS)
  expand(series, column, stepS)
  const meets = firstMeeting(column, series, leastS / stepS)
  const parts = stepS > PARTING_FROM_S ? firstParting(motion) : 2
  const tau = Math.min(1, Math.max(Math.min(meets, parts), leastS / stepS), firstLimit(motion))
  settle(motion, tau)
  if (tau > meets || meets === 0) mixInversions(column.thetaK, column.n)
  return tau * stepS
}

/** The step to try: what is left, or a little more than the time to the first event if rates stayed as they are. */
function forecast({ column, watch }: Motion, mostS: number, leastS: number): number {
  const { count, meanK, rateKPerS } = column.blocks
  let stepS = mostS
  for (let b = 1; b < count; b++) {
    const closing = rateKPerS[b]! - rateKPerS[b - 1]!
    const stretchedK = (meanK[b - 1]! - meanK[b]!) * FORECAST
    if (stretchedK < (stepS - leastS) * closing) stepS = Math.max(0, stretchedK / closing) + leastS
  }
  if (watch.risingNode >= 0) {
    const b = blockOf(column.blocks, watch.risingNode)
    if (rateKPerS[b]! > 0) stepS = Math.min(stepS, ((watch.risingToK - meanK[b]!) / rateKPerS[b]!) * FORECAST + leastS)
  }
  return Math.min(stepS, mostS)
}

/** τ at which two blocks first meet, not told apart below the least; 0 when they meet in a step no longer than it, above 1 when none do. */
function firstMeeting(column: Column, series: Series, least: number): number {
  const { count } = column.blocks
  const { endK } = series
  let first = 2
  for (let b = 1; b < count; b++) {
    if (endK[b]! - endK[b - 1]! <= VIOLATION_K) continue
    if (least >= 1) return 0
    first = Math.min(first, crossingAt(series, column.n, { block: b, minusBlock: b - 1, minusK: 0, sign: 1 }))
  }
  return first
}

/** τ of the first thermostat's limit; above 1 when none is reached. */
function firstLimit(motion: Motion): number {
  const { risingNode, risingToK, fallingNode, fallingToK } = motion.watch
  let first = 2
  if (risingNode >= 0) first = limitAt(motion, { node: risingNode, limitK: risingToK, sign: 1 })
  for (let one = 0; one < 2; one++) {
    const node = fallingNode[one]!
    if (node >= 0) first = Math.min(first, limitAt(motion, { node, limitK: fallingToK[one]!, sign: -1 }))
  }
  return first
}

interface Limit {
  readonly node: number
  readonly limitK: number
  readonly sign: 1 | -1
}

function limitAt({ column, series }: Motion, { node, limitK, sign }: Limit): number {
  const block = blockOf(column.blocks, node)
  if (sign * (series.endK[block]! - limitK) <= VIOLATION_K) return 2
  return crossingAt(series, column.n, { block, minusBlock: -1, minusK: limitK, sign })
}

/**
 * τ at which a block first parts: the mixing that holds it together would have to push its upper part down. The hold changes
 * smoothly and passes zero slowly, so one linear interpolation between the ends of the step finds it.
 */
function firstParting({ column, series, heatNode, heatKPerS }: Motion): number {
  const { lossPerS, conductionPerS: g } = column
  const { count, first, nodes, nodeRateKPerS, rateKPerS } = column.blocks
  const { endK } = series
  let tau = 2
  for (let b = 0; b < count; b++) {
    if (nodes[b]! < 2) continue
    const ownK = endK[b]!
    const from = first[b]!
    const last = first[b + 1]! - 1
    const fromAbove = b > 0 ? g * (endK[b - 1]! - ownK) : 0
    const toBelow = b < count - 1 ? g * (ownK - endK[b + 1]!) : 0
    const heat = heatNode >= from && heatNode <= last ? heatKPerS : 0
    const mean = (fromAbove - toBelow + heat - column.blocks.lossPerS[b]! * ownK) / nodes[b]!
    let hold0 = 0
    let hold1 = -fromAbove
    for (let node = from; node < last; node++) {
      hold0 += rateKPerS[b]! - nodeRateKPerS[node]!
      hold1 += mean + lossPerS[node]! * ownK - (node === heatNode ? heat : 0)
      if (hold1 < 0) tau = Math.min(tau, Math.max(0, hold0 / (hold0 - hold1)))
    }
  }
  return tau
}

/** Takes the column to τ and books the loss. */
function settle(motion: Motion, tau: number): void {
  const { column, series } = motion
  const { n, thetaK, blocks } = column
  for (let b = 0; b < blocks.count; b++) {
    const value = tau === 1 ? series.endK[b]! : blockAt(series, n, b, tau)
    for (let node = blocks.first[b]!; node < blocks.first[b + 1]!; node++) thetaK[node] = value
  }
  motion.lostK += lostUntil(series, tau)
}
