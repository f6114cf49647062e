/**
 * How far a zone's wall clock is ahead of UTC, and when that changes. Offsets come from the platform's tz database and are kept
 * per zone and stretch of about a year, so that a look-up costs a comparison or two. Changes are exact to the second.
 */
import { MS_PER_MIN } from '../units.ts'
import type { MsInterval, Zone } from './types.ts'

export interface ClockChange {
  readonly atMs: number
  /** Minutes the wall clock jumps: +60 = forward an hour. */
  readonly shiftMin: number
}
/** A stretch of constant offset, `[startsAtMs, endsAtMs)`; it may be cut at the edges of the stretch asked for. */
export interface OffsetSegment extends MsInterval {
  readonly offsetMs: number
}

const STRETCH_MS = 2 ** 35
/**
 * Two changes within a week of each other that cancel out would be missed. The closest pair since 1970 in the tz database is
 * about four weeks apart (Ramadan suspensions in Morocco, Egypt and Palestine).
 */
const SAMPLE_MS = 7 * 86_400_000
const SECOND_MS = 1_000

interface Stretch {
  readonly changesAtMs: readonly number[]
  /** One more than changes: before the first, between, after the last. */
  readonly offsetsMs: readonly number[]
}
interface ZoneTable {
  readonly format: Intl.DateTimeFormat
  readonly stretches: Map<number, Stretch>
}

// Memo of a pure function of zone and instant: no caller can tell it from a fresh computation, except by its speed.
const tables = new Map<Zone, ZoneTable>()

function tableOf(zone: Zone): ZoneTable {
  let table = tables.get(zone)
  if (!table) {
    table = { format: new Intl.DateTimeFormat('en-US', { timeZone: zone, timeZoneName: 'longOffset' }), stretches: new Map() }
    tables.set(zone, table)
  }
  return table
}

/** Reads `GMT`, `GMT+05:30` or, for local mean times of the past, `GMT-04:56:02`. */
function readOffsetMs(format: Intl.DateTimeFormat, instantMs: number): number {
  const match = /GMT(?:([+-])(\d\d):(\d\d)(?::(\d\d))?)?$/.exec(format.format(instantMs))
  if (!match?.[1]) return 0
  const seconds = Number(match[2]) * 3_600 + Number(match[3]) * 60 + Number(match[4] ?? 0)
  return (match[1] === '-' ? -seconds : seconds) * SECOND_MS
}

/** First whole second in `(fromMs, toMs]` at which the offset is no longer that of `fromMs`. */
function changeBetween(format: Intl.DateTimeFormat, fromMs: number, toMs: number): number {
  const before = readOffsetMs(format, fromMs)
  let low = Math.floor(fromMs / SECOND_MS)
  let high = Math.ceil(toMs / SECOND_MS)
  while (high - low > 1) {
    const middle = Math.floor((low + high) / 2)
    if (readOffsetMs(format, middle * SECOND_MS) === before) low = middle
    else high = middle
  }
  return high * SECOND_MS
}

function stretchOf(zone: Zone, index: number): Stretch {
  const { format, stretches } = tableOf(zone)
  const known = stretches.get(index)
  if (known) return known
  const changesAtMs: number[] = []
  const startsAtMs = index * STRETCH_MS
  const endsAtMs = startsAtMs + STRETCH_MS
  const offsetsMs = [readOffsetMs(format, startsAtMs)]
  for (let atMs = startsAtMs; atMs < endsAtMs;) {
    const nextMs = Math.min(atMs + SAMPLE_MS, endsAtMs)
    const offsetMs = readOffsetMs(format, nextMs)
    if (offsetMs === offsetsMs.at(-1)) {
      atMs = nextMs
      continue
    }
    const changeAtMs = changeBetween(format, atMs, nextMs)
    // A change on the very edge belongs to the next stretch, which starts with it.
    if (changeAtMs >= endsAtMs) break
    changesAtMs.push(changeAtMs)
    offsetsMs.push(readOffsetMs(format, changeAtMs))
    atMs = changeAtMs
  }
  const stretch = { changesAtMs, offsetsMs }
  stretches.set(index, stretch)
  return stretch
}

/** Milliseconds by which the zone's wall clock is ahead of UTC at an instant. */
export function offsetMsAt(instantMs: number, zone: Zone): number {
  const { changesAtMs, offsetsMs } = stretchOf(zone, Math.floor(instantMs / STRETCH_MS))
  let after = 0
  for (const changeAtMs of changesAtMs) if (changeAtMs <= instantMs) after++
  return offsetsMs[after] ?? 0
}

export const offsetMin = (instantMs: number, zone: Zone): number => offsetMsAt(instantMs, zone) / MS_PER_MIN

/** Stretches of constant offset that make up a range, in order. */
export function offsetSegments(range: MsInterval, zone: Zone): readonly OffsetSegment[] {
  const segments: OffsetSegment[] = []
  let startsAtMs = range.startsAtMs
  for (const { atMs } of clockChangesIn(range, zone)) {
    if (atMs > startsAtMs) segments.push({ startsAtMs, endsAtMs: atMs, offsetMs: offsetMsAt(startsAtMs, zone) })
    startsAtMs = atMs
  }
  if (startsAtMs < range.endsAtMs) segments.push({ startsAtMs, endsAtMs: range.endsAtMs, offsetMs: offsetMsAt(startsAtMs, zone) })
  return segments
}

/** Instants in a range at which the zone's clocks are changed, in order. */
export function clockChangesIn(range: MsInterval, zone: Zone): readonly ClockChange[] {
  const changes: ClockChange[] = []
  for (let index = Math.floor(range.startsAtMs / STRETCH_MS); index * STRETCH_MS < range.endsAtMs; index++) {
    const { changesAtMs, offsetsMs } = stretchOf(zone, index)
    // The edge between two stretches may itself be a change.
    const edgeMs = index * STRETCH_MS
    const ends = stretchOf(zone, index - 1).offsetsMs.at(-1) ?? 0
    const shifts = [edgeMs, ...changesAtMs].map((atMs, i) => ({
      atMs,
      shiftMin: ((offsetsMs[i] ?? 0) - (i === 0 ? ends : (offsetsMs[i - 1] ?? 0))) / MS_PER_MIN,
    }))
    changes.push(...shifts.filter(({ atMs, shiftMin }) => shiftMin !== 0 && atMs >= range.startsAtMs && atMs < range.endsAtMs))
  }
  return changes
}
