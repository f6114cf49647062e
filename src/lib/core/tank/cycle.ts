/**
 * One day of a tank as a cycle: it begins right after the last need before it and ends with today's last, so that every run of
 * today lies inside it.
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
  readonly draws: readonly MixedDraw[]
  readonly start: UnitDay['start']
  /** Of its day, midnight to midnight. */
  readonly lengthMin: number
}

/** The draws of a need, one a shower. */
export const drawsOf = (need: ShowerNeed): readonly MixedDraw[] =>
  Array.from({ length: need.count }, (_, index) => {
    const startMin = need.readyByMin + index * (need.minutesEach + need.gapMin)
    return { startMin, endMin: startMin + need.minutesEach, flowLPerMin: need.flowLPerMin, useTemperatureC: need.useTemperatureC }
  })

export const needEndMin = (need: ShowerNeed): number => need.readyByMin + need.count * need.minutesEach + (need.count - 1) * need.gapMin
export const minutesWanted = (need: ShowerNeed): number => need.count * need.minutesEach

const lengthOf = ({ lengthMin = MIN_PER_DAY }: UnitDay): number => lengthMin

/** Minute at which a day's cycle ends: with its last need, or at midnight. */
const cycleEndMin = (day: UnitDay): number => (day.needs.length === 0 ? lengthOf(day) : Math.max(...day.needs.map(needEndMin)))

/** Minute of the day after at which that cycle ended. */
export const leftOverMin = (before: UnitDay): number => cycleEndMin(before) - lengthOf(before)

/** A day whose cycle begins at a minute of its own count, at or before midnight. */
export function cycleOf(day: UnitDay, startMin: number): Cycle {
  const needs = [...day.needs].sort((one, other) => one.readyByMin - other.readyByMin)
  const tank = tankModel(day.tank, { supplyVoltageV: day.supplyVoltageV, inletC: day.inletC })
  return {
    tank,
    needs,
    draws: needs.flatMap(drawsOf),
    startMin,
    endMin: cycleEndMin(day),
    start: day.start,
    lengthMin: lengthOf(day),
  }
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
  simulate(cycle.tank, state, { startMin: cycle.startMin, endMin: cycle.endMin, on, draws: cycle.draws })

/** Minutes served of each need in a simulation of the whole cycle. */
export function servedByNeed(cycle: Cycle, simulation: Simulation): readonly number[] {
  let draw = 0
  return cycle.needs.map((need) => {
    let served = 0
    for (let shower = 0; shower < need.count; shower++) served += simulation.servedMin[draw++] ?? 0
    return served
  })
}

/** Served to the second counts as served. */
export const servesAll = (need: ShowerNeed, servedMin: number): boolean => servedMin >= minutesWanted(need) - 1 / 60

/** Largest difference of two states' nodes. */
export const changeK = (one: TankState, other: TankState): number =>
  one.nodesC.reduce((most, temperatureC, node) => Math.max(most, Math.abs(temperatureC - (other.nodesC[node] ?? 0))), 0)
