/** Which periods of a job are due at an instant in a property's zone. Exact over clock changes: a missing wall-clock time moves, a repeated one counts once. */
import { addDays, addMonths, civilOf, clockChangesIn, instantOf, monthOf } from '#lib/core/time/civil.ts'
import type { Mode } from './job.ts'

export interface Place {
  readonly zone: string
  readonly createdAtMs: number
}
export type Periods = (place: Place, nowMs: number, mode: Mode) => readonly string[]

/** The local day whose `minuteOfDay` came last: after downtime one night is made up, older ones are superseded by it. */
export const latestDay =
  (minuteOfDay: number): Periods =>
  ({ zone }, nowMs, mode) => {
    const { day } = civilOf(nowMs, zone)
    return [mode === 'due' && nowMs < instantOf(day, minuteOfDay, zone) ? addDays(day, -1) : day]
  }

/** Today, once its `minuteOfDay` has come; a day that has passed is of no use any more. */
export const todayFrom =
  (minuteOfDay: number): Periods =>
  ({ zone }, nowMs, mode) => {
    const { day } = civilOf(nowMs, zone)
    return mode === 'due' && nowMs < instantOf(day, minuteOfDay, zone) ? [] : [day]
  }

/** A year back is as far as a missed month is made up. */
const MOST_MONTHS = 12

/** Past months not older than the property, each from its successor's first day at `minuteOfDay`; missed ones come first. */
export const pastMonths =
  (minuteOfDay: number): Periods =>
  ({ zone, createdAtMs }, nowMs, mode) => {
    const current = monthOf(civilOf(nowMs, zone).day)
    const first = monthOf(civilOf(createdAtMs, zone).day)
    const months: string[] = []
    for (let back = MOST_MONTHS; back >= 1; back--) {
      const month = addMonths(current, -back)
      const dueAtMs = instantOf(`${addMonths(month, 1)}-01`, minuteOfDay, zone)
      if (month >= first && (mode !== 'due' || nowMs >= dueAtMs)) months.push(month)
    }
    return mode === 'due' ? months : months.slice(-1)
  }

/** Every zone that still changes its clocks does so within a year. */
const CHANGE_WITHIN_MS = 366 * 86_400_000

/** The next clock change, by the local day of its night, from `daysBefore` days before that day at `minuteOfDay`; none where clocks are not changed. */
export const beforeClockChange =
  (daysBefore: number, minuteOfDay: number): Periods =>
  ({ zone }, nowMs, mode) => {
    const [change] = clockChangesIn({ startsAtMs: nowMs, endsAtMs: nowMs + CHANGE_WITHIN_MS }, zone)
    if (!change) return []
    const day = civilOf(change.atMs - 1, zone).day
    return mode === 'due' && nowMs < instantOf(addDays(day, -daysBefore), minuteOfDay, zone) ? [] : [day]
  }
