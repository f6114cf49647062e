/** The day as a curve: outlet, coldest node and charge at regular minutes from midnight, read off the settled cycle. */
import type { MinuteInterval } from '../time/types.ts'
import { MIN_PER_DAY } from '../units.ts'
import { type Cycle, drawsOf } from './cycle.ts'
import { simulate, type TankState } from './simulate.ts'
import type { Readiness } from './types.ts'

const SAMPLE_MIN = 15
const SAMPLES = MIN_PER_DAY / SAMPLE_MIN

export function traceOf(cycle: Cycle, start: TankState, on: readonly MinuteInterval[]): Readiness['trace'] {
  const states: TankState[] = []
  // The cycle covers one day's length; a minute before midnight stands for the same minute of the evening to come.
  const place = (minute: number, state: TankState) => {
    const slot = Math.floor((((minute % MIN_PER_DAY) + MIN_PER_DAY) % MIN_PER_DAY) / SAMPLE_MIN)
    states[slot] ??= state
  }
  simulate(cycle.tank, start, { startMin: cycle.startMin, endMin: cycle.endMin, on, draws: cycle.needs.flatMap(drawsOf), sample: place })
  const { inletC, setPointC } = cycle.tank
  const filled = Array.from({ length: SAMPLES }, (_, slot) => states[slot] ?? states[slot - 1] ?? start)
  const mean = (state: TankState) => state.nodesC.reduce((sum, temperatureC) => sum + temperatureC, 0) / state.nodesC.length
  const round = (value: number) => Math.round(value * 10) / 10
  return {
    sampleMin: SAMPLE_MIN,
    outletC: filled.map((state) => round(state.nodesC[0] ?? 0)),
    coldestC: filled.map((state) => round(state.nodesC.at(-1) ?? 0)),
    chargeFraction: filled.map((state) => Math.round(Math.min(1, Math.max(0, (mean(state) - inletC) / (setPointC - inletC))) * 100) / 100),
  }
}
