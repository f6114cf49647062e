/** Which days a view shows, and where its neighbours begin. Weeks begin on Monday. */
import { addDays, addMonths, weekdayOf } from '#lib/core/time/civil.ts'
import type { CalendarPlace } from './schemas.ts'

export interface DayRange {
  readonly from: string
  /** Exclusive. */
  readonly to: string
}

export function rangeOf({ view, day }: Pick<CalendarPlace, 'view' | 'day'>): DayRange {
  if (view === 'day') return { from: day, to: addDays(day, 1) }
  if (view === 'week') {
    const monday = mondayOf(day)
    return { from: monday, to: addDays(monday, 7) }
  }
  const first = `${day.slice(0, 7)}-01`
  const last = addDays(`${addMonths(day.slice(0, 7), 1)}-01`, -1)
  return { from: mondayOf(first), to: addDays(mondayOf(last), 7) }
}

const mondayOf = (day: string): string => addDays(day, -weekdayOf(day))

/** A day in the view before (-1) or after (1). */
export function neighbour({ view, day }: Pick<CalendarPlace, 'view' | 'day'>, step: -1 | 1): string {
  if (view === 'day') return addDays(day, step)
  if (view === 'week') return addDays(day, 7 * step)
  return `${addMonths(day.slice(0, 7), step)}-01`
}
