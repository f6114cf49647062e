/**
 * The only place where instants and civil time meet: conversions in a named IANA zone, exact over clock changes.
 * RFC 5545 3.3.5 decides what a wall-clock time means: a repeated one is its first occurrence, a missing one is read with the offset before the gap.
 */
import { MIN_PER_DAY, MS_PER_MIN } from '../units.ts'
import type { CivilMoment, Day, MsInterval, Weekday, Zone } from './types.ts'

const MS_PER_DAY = MIN_PER_DAY * MS_PER_MIN

/** Days since 1970-01-01 of a civil date. */
export const dayNumber = (day: Day): number => Math.round(Date.parse(`${day}T00:00:00Z`) / MS_PER_DAY)
export const dayOfNumber = (number: number): Day => new Date(number * MS_PER_DAY).toISOString().slice(0, 10)
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

// Memo of a pure function: an offset depends on the zone and instant alone.
const formats = new Map<Zone, Intl.DateTimeFormat>()
function formatOf(zone: Zone): Intl.DateTimeFormat {
  let format = formats.get(zone)
  if (!format) {
    format = new Intl.DateTimeFormat('en-US', {
      timeZone: zone,
      hourCycle: 'h23',
      year: 'numeric',
      month: 'numeric',
      day: 'numeric',
      hour: 'numeric',
      minute: 'numeric',
      second: 'numeric',
      era: 'short',
    })
    formats.set(zone, format)
  }
  return format
}

const offsetMemo = new Map<string, number>()
const MEMO_SLOT_MS = 15 * MS_PER_MIN
const MEMO_LIMIT = 200_000

/**
 * Minutes by which the zone's wall clock is ahead of UTC at an instant. Zones of today change on quarter hours, so the
 * offset is constant within one.
 */
export function offsetMin(instantMs: number, zone: Zone): number {
  const slot = Math.floor(instantMs / MEMO_SLOT_MS)
  const key = `${zone}|${slot}`
  const known = offsetMemo.get(key)
  if (known !== undefined) return known
  const parts = Object.fromEntries(
    formatOf(zone)
      .formatToParts(slot * MEMO_SLOT_MS)
      .map((part) => [part.type, part.value]),
  )
  const wallMs = Date.UTC(
    Number(parts.year),
    Number(parts.month) - 1,
    Number(parts.day),
    Number(parts.hour),
    Number(parts.minute),
    Number(parts.second),
  )
  const offset = Math.round((wallMs - slot * MEMO_SLOT_MS) / MS_PER_MIN)
  if (offsetMemo.size > MEMO_LIMIT) offsetMemo.clear()
  offsetMemo.set(key, offset)
  return offset
}

/** Instant of a wall-clock minute of a local day; `minuteOfDay` may pass 1,440 (the days after, by wall clock). */
export function instantOf(day: Day, minuteOfDay: number, zone: Zone): number {
  const wallMs = dayNumber(day) * MS_PER_DAY + minuteOfDay * MS_PER_MIN
  // The larger offset gives the earlier instant: the first occurrence of a repeated time.
  const before = offsetMin(wallMs - MS_PER_DAY, zone)
  const after = offsetMin(wallMs + MS_PER_DAY, zone)
  for (const offset of [Math.max(before, after), Math.min(before, after)]) {
    const instantMs = wallMs - offset * MS_PER_MIN
    if (offsetMin(instantMs, zone) === offset) return instantMs
  }
  return wallMs - before * MS_PER_MIN
}

export function civilOf(instantMs: number, zone: Zone): CivilMoment {
  const wallMs = instantMs + offsetMin(instantMs, zone) * MS_PER_MIN
  const number = Math.floor(wallMs / MS_PER_DAY)
  const day = dayOfNumber(number)
  return { day, minuteOfDay: (wallMs - number * MS_PER_DAY) / MS_PER_MIN, weekday: weekdayOf(day) }
}

/** `[first instant of the day, first instant of the next)`; where 00:00 does not exist the day starts later. */
export const dayBounds = (day: Day, zone: Zone): MsInterval => ({
  startsAtMs: firstInstantOf(day, zone),
  endsAtMs: firstInstantOf(addDays(day, 1), zone),
})

const firstInstantOf = (day: Day, zone: Zone): number => instantOf(day, 0, zone)

/** Instant of a minute counted in elapsed time from the day's first instant. */
export const instantAtElapsed = (day: Day, elapsedMin: number, zone: Zone): number =>
  dayBounds(day, zone).startsAtMs + elapsedMin * MS_PER_MIN

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

/** Days of a range that differ from 24 hours, with the shift in minutes (+60 = the clocks went forward). */
export function clockChangesIn(fromDay: Day, toDay: Day, zone: Zone): readonly { readonly day: Day; readonly shiftMin: number }[] {
  const changes: { day: Day; shiftMin: number }[] = []
  for (let day = fromDay; day < toDay; day = addDays(day, 1)) {
    const shiftMin = MIN_PER_DAY - minutesInDay(day, zone)
    if (shiftMin !== 0) changes.push({ day, shiftMin })
  }
  return changes
}
