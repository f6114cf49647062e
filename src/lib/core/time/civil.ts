/**
 * The only place where instants and civil time meet: conversions in a named IANA zone, exact over clock changes.
 * RFC 5545 3.3.5 decides what a wall-clock time means: a repeated one is its first occurrence, a missing one is read with the offset before the gap.
 */
import { MIN_PER_DAY, MS_PER_MIN } from '../units.ts'
import type { CivilMoment, Day, MinuteInterval, MsInterval, Weekday, Zone } from './types.ts'
import { clockChangesIn, offsetMsAt, offsetSegments } from './zone.ts'

export { clockChangesIn, offsetMin } from './zone.ts'

const MS_PER_DAY = MIN_PER_DAY * MS_PER_MIN

/** Days since 1970-01-01 of a civil date. */
export const dayNumber = (day: Day): number =>
  Date.UTC(Number(day.slice(0, 4)), Number(day.slice(5, 7)) - 1, Number(day.slice(8, 10))) / MS_PER_DAY
export function dayOfNumber(number: number): Day {
  const date = new Date(number * MS_PER_DAY)
  const month = date.getUTCMonth() + 1
  const dayOfMonth = date.getUTCDate()
  // A third of the time of toISOString, which a year of price bands calls thousands of times.
  return `${String(date.getUTCFullYear()).padStart(4, '0')}-${month < 10 ? '0' : ''}${month}-${dayOfMonth < 10 ? '0' : ''}${dayOfMonth}`
}
export const addDays = (day: Day, count: number): Day => dayOfNumber(dayNumber(day) + count)
export const daysBetween = (from: Day, to: Day): number => dayNumber(to) - dayNumber(from)
/** 1970-01-01 was a Thursday. */
export const weekdayOf = (day: Day): Weekday => ((((dayNumber(day) + 3) % 7) + 7) % 7) as Weekday
/** 1 on 1 January. */
export const dayOfYear = (day: Day): number => dayNumber(day) - dayNumber(`${day.slice(0, 4)}-01-01`) + 1
export const monthOf = (day: Day): string => day.slice(0, 7)
export const addMonths = (month: string, count: number): string => {
  const index = Number(month.slice(0, 4)) * 12 + Number(month.slice(5, 7)) - 1 + count
  return `${String(Math.floor(index / 12)).padStart(4, '0')}-${String((index % 12) + 1).padStart(2, '0')}`
}
/** The days of a month, first to last. */
export function daysOfMonth(month: string): readonly Day[] {
  const first = `${month}-01`
  const count = daysBetween(first, `${addMonths(month, 1)}-01`)
  return Array.from({ length: count }, (_, index) => addDays(first, index))
}

/** Instant of a wall-clock minute of a local day; `minuteOfDay` may pass 1,440 (the days after, by wall clock). */
export function instantOf(day: Day, minuteOfDay: number, zone: Zone): number {
  const wallMs = dayNumber(day) * MS_PER_DAY + minuteOfDay * MS_PER_MIN
  // The larger offset gives the earlier instant: the first occurrence of a repeated time.
  const beforeMs = offsetMsAt(wallMs - MS_PER_DAY, zone)
  const afterMs = offsetMsAt(wallMs + MS_PER_DAY, zone)
  const earlierMs = wallMs - Math.max(beforeMs, afterMs)
  if (offsetMsAt(earlierMs, zone) === wallMs - earlierMs) return earlierMs
  const laterMs = wallMs - Math.min(beforeMs, afterMs)
  return offsetMsAt(laterMs, zone) === wallMs - laterMs ? laterMs : wallMs - beforeMs
}

export function civilOf(instantMs: number, zone: Zone): CivilMoment {
  const wallMs = instantMs + offsetMsAt(instantMs, zone)
  const number = Math.floor(wallMs / MS_PER_DAY)
  const day = dayOfNumber(number)
  return { day, minuteOfDay: (wallMs - number * MS_PER_DAY) / MS_PER_MIN, weekday: weekdayOf(day) }
}

/** `[first instant of the day, first instant of the next)`; where 00:00 does not exist the day starts later. */
export const dayBounds = (day: Day, zone: Zone): MsInterval => ({
  startsAtMs: firstInstantOf(day, zone),
  endsAtMs: firstInstantOf(addDays(day, 1), zone),
})

function firstInstantOf(day: Day, zone: Zone): number {
  const atMs = instantOf(day, 0, zone)
  if (civilOf(atMs, zone).minuteOfDay === 0) return atMs
  // 00:00 is missing: the day begins where the clocks jump over it.
  return clockChangesIn({ startsAtMs: atMs - MS_PER_DAY, endsAtMs: atMs + 1 }, zone).at(-1)?.atMs ?? atMs
}

/** Elapsed minutes from the day's first instant to a wall-clock minute of it. */
export const elapsedOf = (day: Day, minuteOfDay: number, zone: Zone): number =>
  (instantOf(day, minuteOfDay, zone) - dayBounds(day, zone).startsAtMs) / MS_PER_MIN

export const minutesInDay = (day: Day, zone: Zone): number => {
  const { startsAtMs, endsAtMs } = dayBounds(day, zone)
  return (endsAtMs - startsAtMs) / MS_PER_MIN
}

export const monthBounds = (month: string, zone: Zone): MsInterval => ({
  startsAtMs: firstInstantOf(`${month}-01`, zone),
  endsAtMs: firstInstantOf(`${addMonths(month, 1)}-01`, zone),
})

/** Slots of a local day in elapsed time; the last is shorter where the day does not divide. */
export function slotsOfDay(day: Day, zone: Zone, slotMin: number): readonly MsInterval[] {
  const { startsAtMs, endsAtMs } = dayBounds(day, zone)
  const slots: MsInterval[] = []
  for (let atMs = startsAtMs; atMs < endsAtMs; atMs += slotMin * MS_PER_MIN)
    slots.push({ startsAtMs: atMs, endsAtMs: Math.min(endsAtMs, atMs + slotMin * MS_PER_MIN) })
  return slots
}

export function intersect(one: MsInterval, other: MsInterval): MsInterval | null {
  const startsAtMs = Math.max(one.startsAtMs, other.startsAtMs)
  const endsAtMs = Math.min(one.endsAtMs, other.endsAtMs)
  return startsAtMs < endsAtMs ? { startsAtMs, endsAtMs } : null
}

/**
 * The instants at which the wall clock shows a time in `[startMin, endMin)` of a local day: both passes of a repeated hour, nothing
 * of a missing one. `endMin` may pass 1,440 (the morning after). Two intervals where the window's edge falls in a repeated hour.
 */
export function wallWindow(day: Day, window: MinuteInterval, zone: Zone): readonly MsInterval[] {
  const midnightMs = dayNumber(day) * MS_PER_DAY
  const wall = { startsAtMs: midnightMs + window.startMin * MS_PER_MIN, endsAtMs: midnightMs + window.endMin * MS_PER_MIN }
  const found: MsInterval[] = []
  // Every zone is within a day of UTC.
  for (const segment of offsetSegments({ startsAtMs: wall.startsAtMs - MS_PER_DAY, endsAtMs: wall.endsAtMs + MS_PER_DAY }, zone)) {
    const piece = intersect(segment, { startsAtMs: wall.startsAtMs - segment.offsetMs, endsAtMs: wall.endsAtMs - segment.offsetMs })
    const last = found.at(-1)
    if (piece && last?.endsAtMs === piece.startsAtMs) found[found.length - 1] = { ...last, endsAtMs: piece.endsAtMs }
    else if (piece) found.push(piece)
  }
  return found
}
