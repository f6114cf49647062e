/** What a unit asks of its timer, from an evaluation: the minutes of the run, when it has to be over, and how much longer it may be. Shared with the browser. */
import type { RunNeed } from '#lib/core/controller/advice.ts'
import { weekdayOf } from '#lib/core/time/civil.ts'
import type { Day } from '#lib/core/time/types.ts'
import type { ClockChange } from '#lib/strip/clock.ts'

/** Longer than two and a half times what is needed is more than the spread of good parts explains, and counts in the building's load (common practice, no source). */
const LIMIT_FACTOR = 2.5

export interface NeededRun {
  readonly requiredMin: number
  /** Elapsed minutes of the local day; `null` = not known. */
  readonly readyByMin: number | null
  readonly day: Day
  readonly clockChange: ClockChange | null
}

export function runNeed({ requiredMin, readyByMin, day, clockChange }: NeededRun): RunNeed {
  const shiftMin = clockChange && readyByMin !== null && readyByMin >= clockChange.atMin ? clockChange.shiftMin : 0
  return {
    minMin: requiredMin,
    limitMin: requiredMin * LIMIT_FACTOR,
    readyBy: readyByMin === null ? null : { weekday: weekdayOf(day), minuteOfDay: readyByMin + shiftMin },
  }
}

/** For a timer that may never stop and of which nothing is asked: the run it was meant for. */
export const meantRun = (nominalMin: number): RunNeed => ({ minMin: nominalMin, limitMin: nominalMin * LIMIT_FACTOR, readyBy: null })
