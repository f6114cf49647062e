/**
 * The calendar over clock changes, read by ical.js, an independent implementation of RFC 5545. Instants and offsets of the changes:
 * IANA tz database 2025b, evaluated with CPython 3.11's zoneinfo. One zone is southern, two are off by half hours, one changes by half an hour.
 */
import ICAL from 'ical.js'
import { describe, expect, it } from 'vitest'
import { inTransaction } from '#db/org-db.ts'
import { changeTenancyPerson } from '#db/queries/tenancy.ts'
import { DEMO_BUILDINGS } from '#lib/demo/buildings.ts'
import { evaluateUnit } from '#lib/evaluation/evaluate-unit.server.ts'
import { loadFeed } from '#lib/feed/load-feed.server.ts'
import { loadSubscription } from '#lib/feed/load-subscription.server.ts'
import { renewFeed } from '#lib/feed/renew-feed.server.ts'
import { makeBuilding } from '../../support/building.ts'
import { freshDatabase } from '../../support/database.ts'
import { makeOrganisation, makePerson, NOW_MS, scopeFor } from '../../support/factories.ts'
import { CLOCKED, personOf, unitOf, WARM } from '../../support/world.ts'

const HOUR_MS = 3_600_000
const MIN_MS = 60_000
const CHANGES = [
  { zone: 'Europe/London', at: '2026-10-25T01:00Z', beforeMin: 60, afterMin: 0 },
  { zone: 'Europe/London', at: '2027-03-28T01:00Z', beforeMin: 0, afterMin: 60 },
  { zone: 'America/St_Johns', at: '2026-11-01T04:30Z', beforeMin: -150, afterMin: -210 },
  { zone: 'America/St_Johns', at: '2027-03-14T05:30Z', beforeMin: -210, afterMin: -150 },
  { zone: 'Pacific/Auckland', at: '2026-09-26T14:00Z', beforeMin: 720, afterMin: 780 },
  { zone: 'Pacific/Auckland', at: '2027-04-03T14:00Z', beforeMin: 780, afterMin: 720 },
  { zone: 'Australia/Lord_Howe', at: '2026-10-03T15:30Z', beforeMin: 630, afterMin: 660 },
  { zone: 'Australia/Lord_Howe', at: '2027-04-03T15:00Z', beforeMin: 660, afterMin: 630 },
] as const

const clock = (instantMs: number): string => new Date(instantMs).toISOString().slice(11, 16)

async function feedOf(zone: string, code: string, nowMs: number): Promise<string> {
  const db = await freshDatabase()
  const organisation = await makeOrganisation(db)
  const member = async (role: 'landlord' | 'tenant') =>
    scopeFor(db, { organisationId: organisation.id, personId: await makePerson(db), roles: [role] })
  const [landlord, tenant] = [await member('landlord'), await member('tenant')]
  const [given] = DEMO_BUILDINGS
  if (!given) throw new Error('no building')
  const building = await makeBuilding(landlord, { ...given, zone, units: given.units.filter((unit) => unit.code === code) })
  const { tenancyId, unitId } = unitOf({ building }, code)
  await inTransaction(landlord, (trx) => changeTenancyPerson(trx, tenancyId, personOf(tenant)))
  await evaluateUnit(landlord, { unitId, nowMs })
  await renewFeed(tenant, { tenancyId, nowMs: Math.min(nowMs, NOW_MS) })
  const { subscription } = await loadSubscription(tenant, { tenancyId, nowMs })
  const feed = await loadFeed(db, { part: subscription?.address.split('/').at(-1) ?? '', nowMs })
  if (feed.status !== 'open') throw new Error(`the feed is ${feed.status}`)
  return feed.text
}

const eventsIn = (text: string): readonly ICAL.Event[] =>
  new ICAL.Component(ICAL.parse(text) as unknown[]).getAllSubcomponents('vevent').map((event) => new ICAL.Event(event))

describe.each(CHANGES)('the calendar over $zone at $at', ({ zone, at, beforeMin, afterMin }) => {
  const changeMs = Date.parse(at)
  const wall = (instantMs: number) => clock(instantMs + (instantMs < changeMs ? beforeMin : afterMin) * MIN_MS)

  it('rings at the wall-clock time that it names, on each day before, of and after the change', async () => {
    const events = eventsIn(await feedOf(zone, WARM, changeMs - 72 * HOUR_MS))
    // A press a day at least, for eight days, on both sides of the change.
    expect(events.length).toBeGreaterThanOrEqual(8)
    const starts = events.map((event) => event.startDate.toJSDate().getTime())
    expect(starts.some((ms) => ms < changeMs) && starts.some((ms) => ms > changeMs)).toBe(true)
    const named = events.map((event) => /^Press the timer by (\d\d:\d\d)/.exec(event.summary)?.[1])
    expect(named).toEqual(starts.map(wall))
    for (const event of events) {
      const alarms = event.component.getAllSubcomponents('valarm')
      expect(alarms).toHaveLength(1)
      const trigger = alarms[0]?.getFirstPropertyValue('trigger') as ICAL.Duration
      expect(trigger.toSeconds()).toBe(0)
      expect(event.startDate.zone).toBe(ICAL.Timezone.utcTimezone)
    }
  })
  it('names from when the water is hot where a clock switches, and has nothing that rings', async () => {
    const events = eventsIn(await feedOf(zone, CLOCKED, changeMs - 72 * HOUR_MS))
    expect(events.length).toBeGreaterThanOrEqual(8)
    for (const event of events) {
      expect(event.summary).toMatch(/^Hot water from|^The water will be short/)
      const named = /^Hot water from (\d\d:\d\d)/.exec(event.summary)?.[1]
      if (named) expect(named).toBe(wall(event.startDate.toJSDate().getTime()))
      const until = /, until (\d\d:\d\d)\./.exec(event.description)?.[1]
      if (until) expect(until).toBe(wall(event.endDate.toJSDate().getTime()))
      expect(event.component.getAllSubcomponents('valarm')).toEqual([])
    }
  })
})
