/** The calendar shows the property's time in any browser's zone, and refuses ranges and people it should. */
import type { Kysely } from 'kysely'
import { afterEach, beforeAll, describe, expect, it } from 'vitest'
import type { Database } from '#db/schema.ts'
import { loadCalendar, loadCalendarPage } from '#lib/calendar/load-calendar.server.ts'
import { readPlace, writePlace } from '#lib/calendar/schemas.ts'
import { dayEvents, peakEvents, runEvents } from '#lib/calendar/view.ts'
import { dayOfDate, instantOfWall, wallDate } from '#lib/calendar/wall.ts'
import { DEMO_BUILDINGS, type DemoBuilding } from '#lib/demo/buildings.ts'
import { evaluateProperty } from '#lib/evaluation/evaluate-property.server.ts'
import { makeBuilding } from '../../support/building.ts'
import { freshDatabase } from '../../support/database.ts'
import { makeLandlord, makePerson, NOW_MS, scopeFor } from '../../support/factories.ts'

/** Zones, and minutes by which UTC is ahead of them in December (tz database). */
const BROWSERS = { UTC: 0, 'America/Los_Angeles': 480, 'Asia/Kolkata': -330, 'Pacific/Auckland': -780 }
const ownZone = process.env.TZ
afterEach(() => {
  if (ownZone === undefined) delete process.env.TZ
  else process.env.TZ = ownZone
})
const inEachBrowser = (check: () => void) => {
  for (const [zone, aheadMin] of Object.entries(BROWSERS)) {
    process.env.TZ = zone
    expect(new Date(Date.UTC(2026, 11, 2)).getTimezoneOffset()).toBe(aheadMin)
    check()
  }
}

describe('wallDate', () => {
  it('shows the property’s wall clock in every browser zone', () => {
    // 2 December 2026, 14:10 UTC is 06:10 in Los Angeles and 14:10 in London (tz database).
    const instantMs = Date.UTC(2026, 11, 2, 14, 10)
    inEachBrowser(() => {
      expect([wallDate(instantMs, 'America/Los_Angeles').getHours(), wallDate(instantMs, 'America/Los_Angeles').getMinutes()]).toEqual([
        6, 10,
      ])
      expect(wallDate(instantMs, 'Europe/London').getHours()).toBe(14)
      expect(dayOfDate(wallDate(Date.UTC(2026, 11, 2, 3), 'America/Los_Angeles'))).toBe('2026-12-01')
    })
  })
  it('comes back to the instant', () => {
    const instantMs = Date.UTC(2026, 11, 2, 14, 10)
    inEachBrowser(() => expect(instantOfWall(wallDate(instantMs, 'Europe/London'), 'Europe/London')).toBe(instantMs))
  })
})

describe('readPlace', () => {
  const start = { view: 'week', day: '2026-12-01', floor: null, state: 'all' } as const
  it('reads what writePlace wrote', () => {
    const place = { view: 'day', day: '2026-12-05', floor: 3, state: 'short' } as const
    expect(readPlace(new URLSearchParams(writePlace(place)), start)).toEqual(place)
    expect(readPlace(new URLSearchParams(writePlace({ ...place, floor: null })), { ...start, floor: 1 })).toEqual({ ...place, floor: null })
  })
  it('falls back where the address says nothing that can be', () => {
    expect(readPlace(new URLSearchParams('view=year&day=tomorrow&floor=top&state=hot'), start)).toEqual(start)
  })
})

describe('loadCalendar', () => {
  const building = DEMO_BUILDINGS[1] as DemoBuilding
  let connection: Kysely<Database>
  let db: Awaited<ReturnType<typeof makeLandlord>>
  const asked = { propertySlug: building.slug, input: { from: '2026-12-01', to: '2026-12-08' } }
  beforeAll(async () => {
    connection = await freshDatabase()
    db = await makeLandlord(connection)
    const made = await makeBuilding(db, building)
    await evaluateProperty(db, { propertyId: made.propertyId, nowMs: NOW_MS })
  })
  it('gives each local day its peaks, its load and its runs', async () => {
    const data = await loadCalendar(db, asked)
    expect(data.days.map((day) => day.day)).toHaveLength(7)
    // The rate is on-peak 07–10 and 17–20 on weekdays only; 5 December 2026 is a Saturday.
    expect(data.days[1]?.peaks).toEqual([
      { startMin: 420, endMin: 600 },
      { startMin: 1_020, endMin: 1_200 },
    ])
    expect(data.days[4]?.peaks).toEqual([])
    expect(data.days[1]?.slots).toHaveLength(96)
    expect(data.runs.every((run) => run.windowStartsAtMs <= run.startsAtMs && run.endsAtMs <= run.windowEndsAtMs)).toBe(true)
  })
  it('places bars by the property’s clock in every browser zone', async () => {
    const data = await loadCalendar(db, asked)
    const place = { view: 'week', day: '2026-12-02', floor: null, state: 'all' } as const
    inEachBrowser(() => {
      const clock = runEvents(data, place).find((event) => event.run?.code === '1D' && event.run.day === '2026-12-02')
      // On at 05:00 by a clock that is 55 minutes fast: 04:05.
      expect([clock?.start.getHours(), clock?.start.getMinutes()]).toEqual([4, 5])
      expect(clock?.title).toContain('1D, 04:05 to 06:35')
      const peak = peakEvents(data).find((event) => event.id === 'peak 2026-12-02 420')
      expect([peak?.start.getHours(), peak?.end.getHours()]).toEqual([7, 10])
    })
  })
  it('narrows runs by floor and by state, and never the load', async () => {
    const all = await loadCalendar(db, asked)
    const fifth = await loadCalendar(db, { ...asked, input: { ...asked.input, floor: '5' } })
    expect(new Set(fifth.runs.map((run) => run.floor))).toEqual(new Set([5]))
    expect(fifth.days[1]?.slots).toEqual(all.days[1]?.slots)
    const short = runEvents(all, { view: 'week', day: '2026-12-02', floor: null, state: 'short' })
    expect(new Set(short.map((event) => event.run?.code))).toEqual(new Set(['2A', '5C']))
  })
  it('says a day of a month in one line', async () => {
    const data = await loadCalendar(db, asked)
    const line = dayEvents(data, { view: 'month', day: '2026-12-02', floor: 5, state: 'all' }).find(
      (event) => event.id === 'day 2026-12-02',
    )
    expect(line?.title).toBe('4 runs, 1 short')
  })
  it('refuses a range that is backwards or longer than six weeks, by field', async () => {
    for (const input of [
      { from: '2026-12-08', to: '2026-12-01' },
      { from: '2026-01-01', to: '2026-12-01' },
      { from: 'x', to: '2026-12-01' },
    ]) {
      await expect(loadCalendar(db, { ...asked, input })).rejects.toMatchObject({ code: 'invalid' })
    }
  })
  it("answers not found for another organisation's property", async () => {
    const theirs = await makeLandlord(connection)
    await expect(loadCalendar(theirs, asked)).rejects.toMatchObject({ code: 'not-found' })
    await expect(loadCalendarPage(theirs, { propertySlug: building.slug, nowMs: NOW_MS })).rejects.toMatchObject({ code: 'not-found' })
  })
  it('is for landlords', async () => {
    const { organisationId } = db.scope
    const owner = await scopeFor(connection, { organisationId, personId: await makePerson(connection), roles: ['owner'] })
    await expect(loadCalendar(owner, asked)).rejects.toMatchObject({ code: 'forbidden' })
  })
})
