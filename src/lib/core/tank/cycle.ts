/**
 * One day of a tank as a cycle: it begins right after yesterday's last need and ends with today's last, so that every run of
 * today lies inside it; repeated until it repeats itself it is the periodic state.
 */
import type { MinuteInterval } from '../time/types.ts'
import { MIN_PER_DAY } from '../units.ts'
import { NODES } from './defaults.ts'
import { type TankModel, tankModel } from './model.ts'
import { type MixedDraw, type Simulation, simulate, type TankState, uniformState } from './simulate.ts'
import type { ShowerNeed, UnitDay } from './types.ts'

export interface Cycle extends MinuteInterval {
  readonly tank: TankModel
  readonly needs: readonly ShowerNeed[]
  readonly start: UnitDay['start']
}

/** The draws of a need, one a shower. */
export const drawsOf = (need: ShowerNeed): readonly MixedDraw[] =>
  Array.from({ length: need.count }, (_, index) => {
    const startMin = need.readyByMin + index * (need.minutesEach + need.gapMin)
    return { startMin, endMin: startMin + need.minutesEach, flowLPerMin: need.flowLPerMin, useTemperatureC: need.useTemperatureC }
  })

export const needEndMin = (need: ShowerNeed): number => need.readyByMin + need.count * need.minutesEach + (need.count - 1) * need.gapMin
export const minutesWanted = (need: ShowerNeed): number => need.count * need.minutesEach

export function cycleOf(day: UnitDay): Cycle {
  const needs = [...day.needs].sort((one, other) => one.readyByMin - other.readyByMin)
  const last = needs.at(-1)
  const endMin = last ? needEndMin(last) : MIN_PER_DAY
  const tank = tankModel(day.tank, { supplyVoltageV: day.supplyVoltageV, inletC: day.inletC })
  return { tank, needs, startMin: endMin - MIN_PER_DAY, endMin, start: day.start }
}

export const firstState = ({ start, tank }: Cycle): TankState =>
  start.kind === 'nodes'
    ? { nodesC: start.nodesC, upperCalls: true, lowerCalls: true }
    : uniformState(start.kind === 'cold' ? tank.inletC : tank.setPointC, NODES)

/** Where each need's preparation may begin: after the need before it. */
export const earliestMin = (cycle: Cycle, index: number): number => {
  const before = cycle.needs[index - 1]
  return before ? needEndMin(before) : cycle.startMin
}

export const run = (cycle: Cycle, state: TankState, on: readonly MinuteInterval[]): Simulation =>
  simulate(cycle.tank, state, { startMin: cycle.startMin, endMin: cycle.endMin, on, draws: cycle.needs.flatMap(drawsOf) })

/** Runs that last beyond the cycle's end are still on when it begins again: their tail, a day earlier. */
export const withTail = (cycle: Cycle, on: readonly MinuteInterval[]): readonly MinuteInterval[] => [
  ...on
    .filter((interval) => interval.endMin > cycle.endMin)
    .map((interval) => ({ startMin: cycle.startMin, endMin: interval.endMin - MIN_PER_DAY })),
  ...on,
]

/** Minutes served of each need in a simulation of the whole cycle. */
export function servedByNeed(cycle: Cycle, simulation: Simulation): readonly number[] {
  let draw = 0
  return cycle.needs.map((need) => {
    let served = 0
    for (let shower = 0; shower < need.count; shower++) served += simulation.servedMin[draw++] ?? 0
    return served
  })
}

const PERIODIC_TOLERANCE_K = 0.05
/** A day's draw renews most of a tank, so a week forgets its start; tanks hardly used need a few days more. */
const PERIODIC_LIMIT_DAYS = 14

/** State at the cycle's start once the day has been repeated until it repeats itself; the given start for a day that is told it. */
export function settledState(cycle: Cycle, on: readonly MinuteInterval[]): TankState {
  let state = firstState(cycle)
  if (cycle.start.kind !== 'periodic') return state
  for (let day = 0; day < PERIODIC_LIMIT_DAYS; day++) {
    const next = run(cycle, state, on).end
    const change = Math.max(...next.nodesC.map((temperatureC, node) => Math.abs(temperatureC - (state.nodesC[node] ?? 0))))
    state = next
    if (change < PERIODIC_TOLERANCE_K) break
  }
  return state
}
