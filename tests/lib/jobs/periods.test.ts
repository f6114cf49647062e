/** Due periods, on the days where clocks change: IANA time zone database 2025b, Europe/London 2026-03-29 and 2026-10-25, America/New_York 2026-03-08. */
import { describe, expect, it } from 'vitest'
import { beforeClockChange, latestDay, pastMonths, todayFrom } from '#lib/jobs/periods.ts'

const LONDON = { zone: 'Europe/London', createdAtMs: Date.UTC(2026, 0, 15) }
const NEW_YORK = { zone: 'America/New_York', createdAtMs: Date.UTC(2026, 0, 15) }
const at = (text: string): number => Date.parse(text)

describe('latestDay', () => {
  const night = latestDay(90)

  it('turns over at the wall-clock time of the place and not before', () => {
    expect(night(LONDON, at('2026-02-03T01:29:59Z'), 'due')).toEqual(['2026-02-02'])
    expect(night(LONDON, at('2026-02-03T01:30:00Z'), 'due')).toEqual(['2026-02-03'])
    expect(night(NEW_YORK, at('2026-02-03T06:29:59Z'), 'due')).toEqual(['2026-02-02'])
    expect(night(NEW_YORK, at('2026-02-03T06:30:00Z'), 'due')).toEqual(['2026-02-03'])
  })

  it('runs the night whose 01:30 does not exist, at the moment its offset before the gap names', () => {
    // Clocks go from 01:00 to 02:00; 01:30 read with the offset before is 01:30 UTC.
    expect(night(LONDON, at('2026-03-29T01:29:59Z'), 'due')).toEqual(['2026-03-28'])
    expect(night(LONDON, at('2026-03-29T01:30:00Z'), 'due')).toEqual(['2026-03-29'])
  })

  it('names the night whose 01:30 comes twice once', () => {
    expect(night(LONDON, at('2026-10-25T00:29:59Z'), 'due')).toEqual(['2026-10-24'])
    expect(night(LONDON, at('2026-10-25T00:30:00Z'), 'due')).toEqual(['2026-10-25'])
    expect(night(LONDON, at('2026-10-25T01:30:00Z'), 'due')).toEqual(['2026-10-25'])
  })

  it('names today when asked to run now', () => {
    expect(night(LONDON, at('2026-02-03T00:10:00Z'), 'now')).toEqual(['2026-02-03'])
  })
})

describe('todayFrom', () => {
  const evening = todayFrom(17 * 60)

  it('is due from the hour to the end of the local day and not made up afterwards', () => {
    expect(evening(NEW_YORK, at('2026-03-08T20:59:59Z'), 'due')).toEqual([])
    expect(evening(NEW_YORK, at('2026-03-08T21:00:00Z'), 'due')).toEqual(['2026-03-08'])
    expect(evening(NEW_YORK, at('2026-03-09T03:59:59Z'), 'due')).toEqual(['2026-03-08'])
    expect(evening(NEW_YORK, at('2026-03-09T04:00:00Z'), 'due')).toEqual([])
  })
})

describe('pastMonths', () => {
  const digest = pastMonths(7 * 60)

  it('is due on the 1st at the hour of the place', () => {
    expect(digest(LONDON, at('2026-03-01T06:59:59Z'), 'due')).toEqual(['2026-01'])
    expect(digest(LONDON, at('2026-03-01T07:00:00Z'), 'due')).toEqual(['2026-01', '2026-02'])
    expect(digest(NEW_YORK, at('2026-03-01T07:00:00Z'), 'due')).toEqual(['2026-01'])
    expect(digest(NEW_YORK, at('2026-03-01T12:00:00Z'), 'due')).toEqual(['2026-01', '2026-02'])
  })

  it('makes up every missed month since the property was there, at most a year', () => {
    expect(digest(LONDON, at('2026-01-20T12:00:00Z'), 'due')).toEqual([])
    expect(digest(LONDON, at('2026-06-02T12:00:00Z'), 'due')).toEqual(['2026-01', '2026-02', '2026-03', '2026-04', '2026-05'])
    expect(digest(LONDON, at('2028-06-02T12:00:00Z'), 'due')).toHaveLength(12)
  })

  it('names the month that ended last when asked to run now', () => {
    expect(digest(LONDON, at('2026-03-01T00:10:00Z'), 'now')).toEqual(['2026-02'])
  })
})

describe('beforeClockChange', () => {
  const tenDays = beforeClockChange(10, 9 * 60)

  it('is due from the hour ten local days before the day of the change until the clocks have changed', () => {
    expect(tenDays(LONDON, at('2026-10-15T07:59:59Z'), 'due')).toEqual([])
    expect(tenDays(LONDON, at('2026-10-15T08:00:00Z'), 'due')).toEqual(['2026-10-25'])
    expect(tenDays(LONDON, at('2026-10-25T00:59:59Z'), 'due')).toEqual(['2026-10-25'])
    expect(tenDays(LONDON, at('2026-10-25T01:00:01Z'), 'due')).toEqual([])
    expect(tenDays(NEW_YORK, at('2026-02-26T13:59:59Z'), 'due')).toEqual([])
    expect(tenDays(NEW_YORK, at('2026-02-26T14:00:00Z'), 'due')).toEqual(['2026-03-08'])
  })

  it('names the next change when asked to run now, and none where clocks are not changed', () => {
    expect(tenDays(LONDON, at('2026-06-01T12:00:00Z'), 'now')).toEqual(['2026-10-25'])
    expect(tenDays({ ...LONDON, zone: 'Asia/Tokyo' }, at('2026-06-01T12:00:00Z'), 'now')).toEqual([])
  })
})
