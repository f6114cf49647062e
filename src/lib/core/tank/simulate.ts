/**
 * A stratified tank through power windows and draws, event by event and exact between events: nothing is stepped that has a
 * closed form. Every joule is booked where it moves, so energy in − delivered − lost = change of storage to rounding.
 *
 * Draws are plug flow in slugs of a minute of flow (a whole node at most): a slug leaves the top, the column moves up by it, and
 * what stays of each node mixes with what moves in. That is the mixing of the published 12-node models, which step by the
 * minute (OCHRE, HPWHsim), whatever else happens meanwhile.
 */
import type { MinuteInterval } from '../time/types.ts'
import { giveBack, type Motion, takeMotion } from './advance.ts'
import { mixInversions } from './column.ts'
import { SERVED_MARGIN_K } from './defaults.ts'
import { heatUntil, type Heating } from './heat.ts'
import type { TankModel } from './model.ts'

export const S_PER_MIN = 60
const SLUG_MIN = 1
/** Two moments this close are the same, min. */
const SAME_MIN = 1e-9

export interface TankState {
  readonly nodesC: readonly number[]
  /** Whether each thermostat is calling for heat; it remembers while the power is off. */
  readonly upperCalls: boolean
  readonly lowerCalls: boolean
}

/** A draw at the tap, its flow held; tempered to `useTemperatureC` while the tank can, straight from the tank if `null`. */
export interface MixedDraw extends MinuteInterval {
  readonly flowLPerMin: number
  readonly useTemperatureC: number | null
}

export interface Programme extends MinuteInterval {
  readonly on: readonly MinuteInterval[]
  /** In order of time, none overlapping. */
  readonly draws: readonly MixedDraw[]
  /** Told the state at the start, the end and every `sampleEveryMin` between; does not change what happens. */
  readonly sample?: (minute: number, state: TankState) => void
  readonly sampleEveryMin?: number
}

export interface Simulation {
  readonly end: TankState
  readonly energyInJ: number
  /** Heat that left with drawn water, above the inlet temperature. */
  readonly energyDeliveredJ: number
  readonly energyLostJ: number
  /** Minutes of each draw that were warm enough. */
  readonly servedMin: readonly number[]
  /** When an element was really on, in order, merged. */
  readonly heating: readonly (MinuteInterval & { readonly powerW: number })[]
}

export const uniformState = (temperatureC: number, nodes: number): TankState => ({
  nodesC: Array.from({ length: nodes }, () => temperatureC),
  upperCalls: true,
  lowerCalls: true,
})

export function simulate(tank: TankModel, start: TankState, programme: Programme): Simulation {
  const { startMin, endMin, draws, sample } = programme
  const motion = takeMotion(tank, start.nodesC)
  const run: Heating = {
    tank,
    motion,
    minute: startMin,
    edges: edgesOf(programme),
    nextEdge: 0,
    upperCalls: start.upperCalls,
    lowerCalls: start.lowerCalls,
    energyInJ: 0,
    heating: [],
    sample: sample ? (minute) => sample(minute, stateOf(run)) : null,
    sampleEveryMin: programme.sampleEveryMin ?? Infinity,
    nextSampleMin: startMin + (programme.sampleEveryMin ?? Infinity),
  }
  run.sample?.(startMin)
  const servedMin: number[] = draws.map(() => 0)
  let deliveredK = 0
  for (let index = 0; index < draws.length; index++) {
    const draw = draws[index]!
    if (draw.endMin <= run.minute || draw.startMin >= endMin) continue
    heatUntil(run, draw.startMin)
    const untilMin = Math.min(draw.endMin, endMin)
    while (untilMin - run.minute > SAME_MIN) {
      const outletC = motion.column.thetaK[0]! + tank.ambientC
      const flow = hotFlowLPerMin(draw, outletC, tank.inletC)
      const slugMin = Math.min(SLUG_MIN, untilMin - run.minute, tank.nodeVolumeL / flow)
      deliveredK += drawOff(motion, (flow * slugMin) / tank.nodeVolumeL, tank.inletC)
      if (Math.max(outletC, tank.inletC) >= (draw.useTemperatureC ?? 0) - SERVED_MARGIN_K) servedMin[index] = servedMin[index]! + slugMin
      heatUntil(run, run.minute + slugMin)
    }
  }
  heatUntil(run, endMin)
  const end = stateOf(run)
  giveBack(motion)
  return {
    end,
    energyInJ: run.energyInJ,
    energyDeliveredJ: deliveredK * tank.nodeHeatJPerK,
    energyLostJ: motion.lostK * tank.nodeHeatJPerK,
    servedMin,
    heating: run.heating,
  }
}

/**
 * Hot share of a mixed flow (OCHRE, LBNL): (use − cold) / (hot − cold); all of it once the tank is no hotter than the use, and
 * none where the mains are warm enough by themselves.
 */
export const hotFraction = ({ useC, hotC, coldC }: { readonly useC: number; readonly hotC: number; readonly coldC: number }): number =>
  coldC >= useC ? 0 : hotC <= useC ? 1 : (useC - coldC) / (hotC - coldC)

const hotFlowLPerMin = ({ flowLPerMin, useTemperatureC }: MixedDraw, outletC: number, inletC: number): number =>
  useTemperatureC === null ? flowLPerMin : flowLPerMin * hotFraction({ useC: useTemperatureC, hotC: outletC, coldC: inletC })

/** Moves the column up by a share of a node, cold in at the bottom; returns the heat that left, as K of one node above the inlet. */
function drawOff({ column }: Motion, fraction: number, inletC: number): number {
  const { thetaK, n } = column
  const inletK = inletC - column.ambientC
  const leftK = fraction * (thetaK[0]! - inletK)
  for (let node = 0; node < n - 1; node++) thetaK[node] = thetaK[node]! + fraction * (thetaK[node + 1]! - thetaK[node]!)
  thetaK[n - 1] = thetaK[n - 1]! + fraction * (inletK - thetaK[n - 1]!)
  if (thetaK[n - 1]! > thetaK[n - 2]!) mixInversions(thetaK, n)
  return leftK
}

function stateOf({ motion, upperCalls, lowerCalls }: Heating): TankState {
  const { thetaK, ambientC, n } = motion.column
  const nodesC: number[] = []
  for (let node = 0; node < n; node++) nodesC.push(thetaK[node]! + ambientC)
  return { nodesC, upperCalls, lowerCalls }
}

/** Moments at which the power changes, on and off by turns, overlapping windows joined. */
function edgesOf({ on, startMin }: Programme): readonly number[] {
  const edges: number[] = []
  for (const { startMin: from, endMin: to } of on.length > 1 ? [...on].sort((one, other) => one.startMin - other.startMin) : on) {
    if (to <= from || to <= startMin) continue
    const last = edges.at(-1)
    if (last !== undefined && from <= last) edges[edges.length - 1] = Math.max(last, to)
    else edges.push(from, to)
  }
  return edges
}
