/** The baseline: the same tank and the same draws with the power always on, in its periodic state. */
import type { MinuteInterval } from '../time/types.ts'
import { kwhFromJ } from '../units.ts'
import { cycleOf, run, settledState } from './cycle.ts'
import type { UnitDay } from './types.ts'

export interface AlwaysOn {
  readonly energyInKwh: number
  readonly energyDeliveredKwh: number
  readonly heating: readonly (MinuteInterval & { readonly powerW: number })[]
}

export function alwaysOn(day: Omit<UnitDay, 'runs'>): AlwaysOn {
  const cycle = cycleOf({ ...day, runs: { kind: 'clocked', onIntervals: [], uncertaintyMin: 0 } })
  const on = [{ startMin: cycle.startMin, endMin: cycle.endMin }]
  const simulation = run(cycle, settledState(cycle, on), on)
  return {
    energyInKwh: kwhFromJ(simulation.energyInJ),
    energyDeliveredKwh: kwhFromJ(simulation.energyDeliveredJ),
    heating: simulation.heating,
  }
}
