/** Civil time against the tz database through an independent implementation, on the days on which calendars break. */
import { TZDate } from '@date-fns/tz'
import { describe, expect, it } from 'vitest'
import {
  addDays,
  addMonths,
  civilOf,
  clockChangesIn,
  dayBounds,
  dayOfYear,
  daysOfMonth,
  elapsedOf,
  instantOf,
  minutesInDay,
  monthBounds,
  slotsOfDay,
  weekdayOf,
} from '#lib/core/time/civil.ts'
import changes from '../../fixtures/time/clock-changes.json' with { type: 'json' }

const minuteOf = (local: string): number => Number(local.slice(11, 13)) * 60 + Number(local.slice(14, 16))

describe('dayBounds and minutesInDay', () => {
  it.each(changes.cases)('counts the minutes of $day in $zone as the tz database does', ({ zone, day, minutes, first }) => {
    if (minutes > 0) expect(dayBounds(day, zone).startsAtMs).toBe(Date.parse(first))
    expect(minutesInDay(day, zone)).toBe(minutes)
  })
  it('covers days of 22 to 25 hours and none, so that the fixture tests something', () => {
    expect(new Set(changes.cases.map((one) => one.minutes))).toEqual(new Set([0, 1320, 1380, 1410, 1440, 1470, 1500]))
  })
})

describe('instantOf', () => {
  const walls = changes.cases.flatMap(({ zone, day, minutes, wall }) =>
    minutes === 0 ? [] : wall.map((one) => ({ zone, day: one.local.slice(0, 10), ...one, shownDay: day })),
  )
  it.each(walls)('reads $local in $zone ($kind) as RFC 5545 3.3.5 does', ({ zone, day, local, rfc }) => {
    expect(new Date(instantOf(day, minuteOf(local), zone)).toISOString()).toBe(new Date(rfc).toISOString())
  })
  it('meets repeated, missing and ordinary times', () => {
    expect(new Set(walls.map((wall) => wall.kind)).size).toBe(3)
    expect(walls).toHaveLength(64)
    expect(changes.cases).toHaveLength(35)
  })
})

describe('civilOf', () => {
  it.each(['Europe/London', 'America/Los_Angeles', 'Australia/Lord_Howe', 'Asia/Kathmandu'])(
    'agrees with @date-fns/tz through a whole year in %s',
    (zone) => {
      for (let instantMs = Date.UTC(2026, 0, 1); instantMs < Date.UTC(2027, 0, 1); instantMs += 47 * 60_000 * 13) {
        const judge = new TZDate(instantMs, zone)
        const civil = civilOf(instantMs, zone)
        expect(civil.minuteOfDay).toBe(judge.getHours() * 60 + judge.getMinutes())
        expect(Number(civil.day.slice(8))).toBe(judge.getDate())
        expect(civil.weekday).toBe((judge.getDay() + 6) % 7)
      }
    },
  )
})

describe('calendar arithmetic', () => {
  it('knows leap days, month ends and weekdays (2028 is a leap year; 1 December 2026 is a Tuesday)', () => {
    expect(addDays('2028-02-28', 1)).toBe('2028-02-29')
    expect(addDays('2026-12-31', 1)).toBe('2027-01-01')
    expect(daysOfMonth('2028-02')).toHaveLength(29)
    expect(addMonths('2026-12', 1)).toBe('2027-01')
    expect(addMonths('2026-01', -1)).toBe('2025-12')
    expect(dayOfYear('2028-12-31')).toBe(366)
    expect(weekdayOf('2026-12-01')).toBe(1)
  })
  it('measures a month over a clock change in real hours', () => {
    const { startsAtMs, endsAtMs } = monthBounds('2026-03', 'America/New_York')
    expect((endsAtMs - startsAtMs) / 3_600_000).toBe(743)
  })
})

describe('elapsedOf', () => {
  it('is an hour behind the wall clock after the spring change and ahead after the autumn change', () => {
    expect(elapsedOf('2026-03-29', 7 * 60, 'Europe/London')).toBe(6 * 60)
    expect(elapsedOf('2026-10-25', 7 * 60, 'Europe/London')).toBe(8 * 60)
  })
})

describe('slotsOfDay', () => {
  it.each([
    ['2026-03-29', 'Europe/London', 92],
    ['2026-10-25', 'Europe/London', 100],
    ['2026-06-01', 'Europe/London', 96],
    ['2026-10-04', 'Australia/Lord_Howe', 94],
    ['2026-04-05', 'Australia/Lord_Howe', 98],
    ['2011-12-30', 'Pacific/Apia', 0],
  ])('tiles %s in %s with %i quarter hours', (day, zone, count) => {
    const slots = slotsOfDay(day, zone, 15)
    expect(slots).toHaveLength(count)
    expect(slots.reduce((sum, slot) => sum + (slot.endsAtMs - slot.startsAtMs), 0)).toBe(minutesInDay(day, zone) * 60_000)
  })
})

describe('clockChangesIn', () => {
  it('names both changes of 2026 in London: forward at 01:00 UTC on 29 March, back at 01:00 UTC on 25 October', () => {
    expect(clockChangesIn({ startsAtMs: Date.UTC(2026, 0, 1), endsAtMs: Date.UTC(2027, 0, 1) }, 'Europe/London')).toEqual([
      { atMs: Date.UTC(2026, 2, 29, 1), shiftMin: 60 },
      { atMs: Date.UTC(2026, 9, 25, 1), shiftMin: -60 },
    ])
  })
})
