/**
 * The water column between events: node temperatures above ambient, and the blocks of nodes that move as one.
 *
 * Between events every node obeys C dθ/dt = −UA θ + conduction + heat, and water never stays warmer below than above: nodes that
 * would turn over are mixed at once. A block is a run of equally warm nodes held together by that mixing; its rate is the mean
 * of its nodes' rates, which is the projection of the linear law onto ordered columns, so the motion of the blocks is linear.
 */
import type { TankModel } from './model.ts'

export interface Column {
  readonly n: number
  readonly thetaK: Float64Array
  /** Loss of each node and conduction between neighbours, per second: W/K over J/K of one node. */
  readonly lossPerS: Float64Array
  conductionPerS: number
  /** 1 / count, by count of nodes. */
  readonly shareOf: Float64Array
  /** Norm of the law, per second: no term of the power series is more than this times the step over its order of the term before. */
  normPerS: number
  /** Longest step whose power series converges fast, s. */
  longestStepS: number
  ambientC: number
  readonly blocks: Blocks
}

/** Scratch arrays, one entry a block; refilled by `findBlocks`, so that a step allocates nothing. */
export interface Blocks {
  count: number
  readonly first: Int32Array
  readonly nodes: Int32Array
  readonly meanK: Float64Array
  /** Rate of the block's temperature, K/s. */
  readonly rateKPerS: Float64Array
  /** Loss of the block per second: the sum of its nodes'. */
  readonly lossPerS: Float64Array
  /** 1 / nodes. */
  readonly share: Float64Array
}

/** Norm of the law times a step; 1.5 needs about 12 terms for 1e-8 K. */
const SERIES_REACH = 1.5

export function emptyColumn(n: number): Column {
  const shareOf = new Float64Array(n + 1)
  for (let count = 1; count <= n; count++) shareOf[count] = 1 / count
  return {
    n,
    shareOf,
    thetaK: new Float64Array(n),
    lossPerS: new Float64Array(n + 1),
    conductionPerS: 0,
    normPerS: 0,
    longestStepS: 0,
    ambientC: 0,
    blocks: {
      count: 0,
      first: new Int32Array(n + 1),
      nodes: new Int32Array(n),
      share: new Float64Array(n),
      meanK: new Float64Array(n),
      rateKPerS: new Float64Array(n),
      lossPerS: new Float64Array(n),
    },
  }
}

export function fillColumn(column: Column, tank: TankModel, nodesC: readonly number[]): void {
  const { n, thetaK, lossPerS } = column
  const perNode = 1 / tank.nodeHeatJPerK
  let largest = 0
  for (let node = 0; node < n; node++) {
    thetaK[node] = nodesC[node]! - tank.ambientC
    lossPerS[node] = tank.lossWPerK[node]! * perNode
    largest = Math.max(largest, lossPerS[node]!)
  }
  column.conductionPerS = tank.conductionWPerK * perNode
  column.normPerS = 4 * column.conductionPerS + largest
  column.longestStepS = SERIES_REACH / column.normPerS
  column.ambientC = tank.ambientC
  mixInversions(thetaK, n)
}

/** Temperatures this close are the same water: far above the root finder's tolerance, far below anything measured. */
export const SAME_K = 1e-6
/** Rates this close are the same; a tie is not mixed, since it costs nothing to follow both. */
const SAME_K_PER_S = 1e-15

/** Groups the column into blocks for the coming step, heat going into one node (−1: none). */
export function findBlocks(column: Column, heatNode: number, heatKPerS: number): void {
  const { n, thetaK, lossPerS, conductionPerS: g, shareOf, blocks } = column
  const { first, nodes, share, meanK, rateKPerS } = blocks
  const blockLossPerS = blocks.lossPerS
  let top = -1
  // The block being grown, in plain variables; a whole pool costs no more stores than a single node.
  let start = 0
  let count = 0
  let mean = 0
  let rate = 0
  let loss = 0
  let own = thetaK[0]!
  let fromAbove = 0
  // One turn more than there are nodes, to store the last block.
  for (let node = 0; node <= n; node++) {
    const below = node < n - 1 ? thetaK[node + 1]! : own
    const toBelow = g * (own - below)
    const ownLoss = lossPerS[node]!
    const ownRate = fromAbove - toBelow - ownLoss * own + (node === heatNode ? heatKPerS : 0)
    if (node < n && node > 0 && mean - own < SAME_K && rate < ownRate - SAME_K_PER_S) {
      // Equally warm, and the water below would become the warmer: it joins.
      count++
      const part = shareOf[count]!
      mean += (own - mean) * part
      rate += (ownRate - rate) * part
      loss += ownLoss
      // The grown block may now push into the one above it (pool adjacent violators).
      while (top >= 0 && meanK[top]! - mean < SAME_K && rateKPerS[top]! < rate - SAME_K_PER_S) {
        const above = nodes[top]!
        const weight = count * shareOf[above + count]!
        mean = meanK[top]! + (mean - meanK[top]!) * weight
        rate = rateKPerS[top]! + (rate - rateKPerS[top]!) * weight
        loss += blockLossPerS[top]!
        count += above
        start = first[top]!
        top--
      }
    } else {
      if (node > 0) {
        top++
        first[top] = start
        nodes[top] = count
        share[top] = shareOf[count]!
        meanK[top] = mean
        rateKPerS[top] = rate
        blockLossPerS[top] = loss
      }
      start = node
      count = 1
      mean = own
      rate = ownRate
      loss = ownLoss
    }
    own = below
    fromAbove = toBelow
  }
  blocks.count = top + 1
  first[top + 1] = n
}

export function blockOf({ count, first }: Blocks, node: number): number {
  let block = count - 1
  while (first[block]! > node) block--
  return block
}

/** Warmer water below colder mixes at once: pools adjacent nodes until temperature never rises downwards. */
export function mixInversions(t: Float64Array, n: number): void {
  for (let node = 1; node < n; node++) {
    if (t[node]! <= t[node - 1]!) continue
    let first = node
    let sum = t[node]!
    while (first > 0 && sum / (node - first + 1) > t[first - 1]!) {
      first--
      sum += t[first]!
    }
    const mean = sum / (node - first + 1)
    for (let mixed = first; mixed <= node; mixed++) t[mixed] = mean
  }
}
