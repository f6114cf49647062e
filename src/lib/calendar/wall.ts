/**
 * The calendar library draws JavaScript dates by the browser's own clock. These turn an instant into the date that shows the
 * property's wall-clock time there, and back, whatever zone the browser is in. Words never come from such dates.
 */
import { civilOf, instantOf } from '#lib/core/time/civil.ts'
import type { Day, Zone } from '#lib/core/time/types.ts'

const MS_PER_MIN = 60_000

/** Where the browser's own clock skips that hour, on one night a year, the date stands an hour later; the words stay right. */
export function wallDate(instantMs: number, zone: Zone): Date {
  const { day, minuteOfDay } = civilOf(instantMs, zone)
  return dateOfDay(day, minuteOfDay)
}

export function dateOfDay(day: Day, minuteOfDay = 0): Date {
  const [year = 1970, month = 1, date = 1] = day.split('-').map(Number)
  return new Date(year, month - 1, date, 0, 0, 0, minuteOfDay * MS_PER_MIN)
}

/** The civil day that a date shows in the browser. */
export function dayOfDate(date: Date): Day {
  const two = (value: number) => String(value).padStart(2, '0')
  return `${date.getFullYear()}-${two(date.getMonth() + 1)}-${two(date.getDate())}`
}

export const instantOfWall = (date: Date, zone: Zone): number => instantOf(dayOfDate(date), date.getHours() * 60 + date.getMinutes(), zone)
