/** The day as a curve: outlet, coldest node and charge at regular minutes from midnight, read off the expected cycles. */
import { MIN_PER_DAY } from '../units.ts'
import type { Cycle } from './cycle.ts'
import type { MinuteInterval } from '../time/types.ts'
import { simulate, type TankState } from './simulate.ts'
import type { Readiness } from './types.ts'

const SAMPLE_MIN = 15
const SAMPLES = MIN_PER_DAY / SAMPLE_MIN

/** A cycle's states at quarter hours of its own day, from before midnight on. */
export interface Sampled {
  readonly cycle: Cycle
  readonly states: readonly { readonly slot: number; readonly state: TankState }[]
}

export function sampled(cycle: Cycle, state: TankState, on: readonly MinuteInterval[]): Sampled {
  const states: { readonly slot: number; readonly state: TankState }[] = []
  // Samples fall on quarter hours of the day, whatever minute the cycle begins at: each stands for the quarter hour it is in.
  const sample = (minute: number, at: TankState) => states.push({ slot: Math.floor(minute / SAMPLE_MIN), state: at })
  simulate(cycle.tank, state, { ...cycle, on, sample, sampleEveryMin: SAMPLE_MIN })
  return { cycle, states }
}

/**
 * The curve of one day of a sequence that repeats itself: its own cycle from midnight on, then what the cycles after it hold of
 * its evening (a day that repeats alone finds its evening in its own cycle, a day earlier).
 */
export function traceOf(cycles: readonly Sampled[], day: number): Readiness['trace'] {
  const found: (TankState | undefined)[] = Array.from({ length: SAMPLES })
  let laterBy = 0
  for (let later = 0; later <= Math.min(2, cycles.length); later++) {
    const { states, cycle } = cycles[(day + later) % cycles.length] as Sampled
    for (const { slot, state } of states) if (inDay(slot + laterBy)) found[slot + laterBy] ??= state
    laterBy += cycle.lengthMin / SAMPLE_MIN
  }
  const { tank } = (cycles[day] as Sampled).cycle
  const { inletC, setPointC } = tank
  const filled = fill(found)
  // Mains as warm as the set point leave nothing to charge.
  const chargeOf = (state: TankState) => (setPointC > inletC ? (mean(state) - inletC) / (setPointC - inletC) : 1)
  const mean = (state: TankState) => state.nodesC.reduce((sum, temperatureC) => sum + temperatureC, 0) / state.nodesC.length
  const round = (value: number) => Math.round(value * 10) / 10
  return {
    sampleMin: SAMPLE_MIN,
    outletC: filled.map((state) => round(state.nodesC[0] ?? 0)),
    coldestC: filled.map((state) => round(state.nodesC.at(-1) ?? 0)),
    chargeFraction: filled.map((state) => Math.round(Math.min(1, Math.max(0, chargeOf(state))) * 100) / 100),
  }
}

const inDay = (slot: number): boolean => slot >= 0 && slot < SAMPLES

/** A quarter hour that fell between two cycles takes its neighbour's state. */
function fill(found: readonly (TankState | undefined)[]): readonly TankState[] {
  const first = found.find((state) => state !== undefined)
  let last = first as TankState
  return found.map((state) => (last = state ?? last))
}
