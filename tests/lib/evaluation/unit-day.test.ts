/** Wall-clock weeks on real clock-change days; the instants are those of the tz database for 2026. */
import { describe, expect, it } from 'vitest'
import { dayContext } from '#lib/evaluation/day-context.ts'
import { clockOffsetMin, needsOf } from '#lib/evaluation/unit-day.ts'
import { at, shower, week } from '#lib/demo/weeks.ts'

const climate = { kind: 'months', inletC: Array.from({ length: 12 }, () => 10) } as const
const london = { zone: 'Europe/London', climate, tariff: null, supplyVoltageV: 230 }
const angeles = { zone: 'America/Los_Angeles', climate, tariff: null, supplyVoltageV: 208 }
const everyDay = week({ weekdays: [shower(at(7))], weekend: [shower(at(7))] })
const readyBy = (site: typeof london, day: string) => needsOf(everyDay, { site, context: dayContext(site, day) })[0]?.readyByMin

describe('needsOf', () => {
  it('counts elapsed minutes from midnight on an ordinary day', () => {
    expect(readyBy(london, '2026-12-02')).toBe(420)
  })
  it('has an hour less before 07:00 on the day the clocks go forward', () => {
    expect(readyBy(london, '2026-03-29')).toBe(360)
    expect(readyBy(angeles, '2026-03-08')).toBe(360)
  })
  it('has an hour more before 07:00 on the day the clocks go back', () => {
    expect(readyBy(london, '2026-10-25')).toBe(480)
    expect(readyBy(angeles, '2026-11-01')).toBe(480)
  })
  it('takes the showers of the weekday in order of time', () => {
    const tuesday = week({ weekdays: [shower(at(20)), shower(at(6))], weekend: [] })
    expect(needsOf(tuesday, { site: london, context: dayContext(london, '2026-12-01') }).map((need) => need.readyByMin)).toEqual([
      360, 1_200,
    ])
    expect(needsOf(tuesday, { site: london, context: dayContext(london, '2026-12-05') })).toEqual([])
  })
})

describe('dayContext', () => {
  it('knows the length of the day and the minute of its clock change', () => {
    expect(dayContext(london, '2026-03-29')).toMatchObject({ dayMin: 1_380, clockChange: { atMin: 60, shiftMin: 60 } })
    expect(dayContext(angeles, '2026-11-01')).toMatchObject({ dayMin: 1_500, clockChange: { atMin: 120, shiftMin: -60 } })
    expect(dayContext(london, '2026-12-02')).toMatchObject({ dayMin: 1_440, clockChange: null })
  })
})

describe('clockOffsetMin', () => {
  const context = dayContext(london, '2026-12-02')
  it('is an hour fast in winter for a switch set in summer', () => {
    expect(clockOffsetMin({ recordedAtMs: Date.UTC(2026, 6, 1) }, { site: london, context })).toBe(60)
  })
  it('is nothing for a switch set since the last change', () => {
    expect(clockOffsetMin({ recordedAtMs: Date.UTC(2026, 10, 1) }, { site: london, context })).toBe(0)
  })
})
