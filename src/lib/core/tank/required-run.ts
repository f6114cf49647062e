/** The shortest daily run that serves a need once the tank has settled to it. */
import type { MinuteInterval } from '../time/types.ts'
import { type Cycle, earliestMin, minutesWanted, run, servedByNeed, settledState } from './cycle.ts'
import { LONGEST_RUN_MIN } from './defaults.ts'

/** One run a need, ending as the need begins, none before the need before it is over. */
export const runsBefore = (cycle: Cycle, durationMin: number): readonly MinuteInterval[] =>
  cycle.needs.map((need, index) => ({
    startMin: Math.max(earliestMin(cycle, index), need.readyByMin - durationMin),
    endMin: need.readyByMin,
  }))

const RESOLUTION_MIN = 1

/** `null` when even the longest run does not serve it. */
export function requiredRunMin(cycle: Cycle, index: number): number | null {
  const need = cycle.needs[index]
  if (!need) return null
  const serves = (durationMin: number): boolean => {
    const on = runsBefore(cycle, durationMin)
    const served = servedByNeed(cycle, run(cycle, settledState(cycle, on), on))[index] ?? 0
    return served >= minutesWanted(need) - 1e-6
  }
  let high = 30
  while (!serves(high)) {
    if (high >= LONGEST_RUN_MIN) return null
    high = Math.min(LONGEST_RUN_MIN, high * 2)
  }
  let low = high === 30 ? 0 : high / 2
  while (high - low > RESOLUTION_MIN) {
    const middle = (low + high) / 2
    if (serves(middle)) high = middle
    else low = middle
  }
  return Math.ceil(high)
}
