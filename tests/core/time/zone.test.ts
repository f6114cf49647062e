/** Offsets and clock changes against the tz database read by other implementations, over every zone the platform knows. */
import { tzOffset } from '@date-fns/tz'
import { describe, expect, it } from 'vitest'
import { addDays, civilOf, dayBounds, instantOf, wallWindow } from '#lib/core/time/civil.ts'
import { clockChangesIn, offsetMin, offsetSegments } from '#lib/core/time/zone.ts'
import byDay from '../../fixtures/time/changes-by-day.json' with { type: 'json' }
import windows from '../../fixtures/time/windows.json' with { type: 'json' }

const DAY_MS = 86_400_000
const minuteOf = (clock: string): number => Number(clock.slice(0, 2)) * 60 + Number(clock.slice(3, 5))

describe('clockChangesIn', () => {
  it.each(byDay.changes)('finds the change of $day in $zone at $atUtc', ({ zone, day, atUtc, shiftMin }) => {
    const around = { startsAtMs: Date.parse(`${day}T00:00:00Z`) - DAY_MS, endsAtMs: Date.parse(`${day}T00:00:00Z`) + 2 * DAY_MS }
    expect(clockChangesIn(around, zone)).toEqual([{ atMs: Date.parse(atUtc), shiftMin }])
  })
  it.each(byDay.steady)('finds none on $day in $zone', ({ zone, day }) => {
    expect(clockChangesIn(dayBounds(day, zone), zone)).toEqual([])
  })
  it('includes a change at the start of its range and leaves one at its end to the next', () => {
    const atMs = Date.UTC(2026, 2, 29, 1)
    expect(clockChangesIn({ startsAtMs: atMs, endsAtMs: atMs + 1 }, 'Europe/London')).toHaveLength(1)
    expect(clockChangesIn({ startsAtMs: atMs - 1, endsAtMs: atMs }, 'Europe/London')).toEqual([])
  })
})

describe('offsetMin', () => {
  const zones = Intl.supportedValuesOf('timeZone')
  it(`agrees with @date-fns/tz on every fourth day of 2000 to 2035 in all ${zones.length} zones, so no pair of changes is missed`, () => {
    expect(zones.length).toBeGreaterThan(400)
    const wrong: string[] = []
    zones.forEach((zone, index) => {
      for (let atMs = Date.UTC(2000, 0, 1 + (index % 4)); atMs < Date.UTC(2036, 0, 1); atMs += 4 * DAY_MS)
        if (offsetMin(atMs, zone) !== tzOffset(zone, new Date(atMs))) wrong.push(`${zone} ${new Date(atMs).toISOString()}`)
    })
    expect(wrong).toEqual([])
  })
  it('reads a local mean time with seconds (New York before 18 November 1883 was 4 h 56 min 2 s behind)', () => {
    // IANA tz database, file northamerica, zone America/New_York.
    expect(offsetMin(Date.UTC(1880, 0, 1), 'America/New_York')).toBeCloseTo(-(4 * 60 + 56 + 2 / 60), 9)
  })
})

describe('offsetSegments', () => {
  it.each(['Europe/London', 'Australia/Lord_Howe', 'Africa/Casablanca', 'UTC'])(
    'tile a range of three years in %s without gap or overlap',
    (zone) => {
      const range = { startsAtMs: Date.UTC(2025, 5, 1), endsAtMs: Date.UTC(2028, 5, 1) }
      const segments = offsetSegments(range, zone)
      expect(segments[0]?.startsAtMs).toBe(range.startsAtMs)
      expect(segments.at(-1)?.endsAtMs).toBe(range.endsAtMs)
      segments.slice(1).forEach((segment, index) => {
        expect(segment.startsAtMs).toBe(segments[index]?.endsAtMs)
        expect(segment.offsetMs).not.toBe(segments[index]?.offsetMs)
      })
    },
  )
})

describe('wallWindow', () => {
  const lengthMin = (zone: string, day: string, startMin: number, endMin: number) =>
    wallWindow(day, { startMin, endMin }, zone).reduce((sum, piece) => sum + (piece.endsAtMs - piece.startsAtMs) / 60_000, 0)
  it.each(windows.windows)(
    '$from to $to on $day in $zone lasts $wallClockMin min by the wall clock',
    ({ zone, day, from, to, wallClockMin }) => {
      const endMin = minuteOf(to) + (to < from ? 1_440 : 0)
      expect(lengthMin(zone, day, minuteOf(from), endMin)).toBe(wallClockMin)
    },
  )
  it('holds exactly the instants whose wall clock is inside it', () => {
    for (const { zone, day } of windows.windows) {
      const pieces = wallWindow(day, { startMin: 90, endMin: 180 }, zone)
      for (let atMs = dayBounds(day, zone).startsAtMs - DAY_MS / 2; atMs < dayBounds(day, zone).endsAtMs + DAY_MS / 2; atMs += 300_000) {
        const civil = civilOf(atMs, zone)
        const inside = civil.day === day && civil.minuteOfDay >= 90 && civil.minuteOfDay < 180
        expect(pieces.some((piece) => piece.startsAtMs <= atMs && atMs < piece.endsAtMs)).toBe(inside)
      }
    }
  })
})

describe('instantOf', () => {
  it.each(windows.windows)('puts $elapsedMin min between $from and $to on $day in $zone', ({ zone, day, from, to, elapsedMin }) => {
    const toDay = to < from ? addDays(day, 1) : day
    expect((instantOf(toDay, minuteOf(to), zone) - instantOf(day, minuteOf(from), zone)) / 60_000).toBe(elapsedMin)
  })
})

describe('dayBounds', () => {
  it('begins a day at the jump when midnight is skipped from the evening before (Toronto, 30 March 1919, 23:30 to 00:30)', () => {
    // IANA tz database, file northamerica, rule Toronto 1919.
    const { startsAtMs } = dayBounds('1919-03-31', 'America/Toronto')
    expect(new Date(startsAtMs).toISOString()).toBe('1919-03-31T04:30:00.000Z')
  })
})

describe('the reference cases', () => {
  it('are all in the fixtures: 34 days of 22 zones with their changes or none, and 14 windows', () => {
    const days = [...byDay.changes, ...byDay.steady]
    // Apia's 30 December 2011 has no instant of its own; its change stands with the day after.
    expect(days).toHaveLength(34)
    expect(new Set(days.map((one) => one.zone)).size).toBe(22)
    expect(windows.windows).toHaveLength(14)
  })
})
