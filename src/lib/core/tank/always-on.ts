/** The baseline: the same tank and the same draws with the power always on, each day from what the days before it leave. */
import type { MinuteInterval } from '../time/types.ts'
import { kwhFromJ } from '../units.ts'
import { chainOf, settle } from './chain.ts'
import type { UnitDay } from './types.ts'

export interface AlwaysOn {
  readonly energyInKwh: number
  readonly energyDeliveredKwh: number
  readonly heating: readonly (MinuteInterval & { readonly powerW: number })[]
}

export function alwaysOn(days: readonly UnitDay[]): readonly AlwaysOn[] {
  const course = settle(chainOf(days), (cycle) => [{ startMin: cycle.startMin, endMin: cycle.endMin }])
  return course.simulations.map((simulation) => ({
    energyInKwh: kwhFromJ(simulation.energyInJ),
    energyDeliveredKwh: kwhFromJ(simulation.energyDeliveredJ),
    heating: simulation.heating,
  }))
}
