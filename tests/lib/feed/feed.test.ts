/** The calendar address: secret, one a tenancy, renewable; what stands in it, read by ical.js, an independent implementation of RFC 5545. */
import ICAL from 'ical.js'
import { beforeEach, describe, expect, it } from 'vitest'
import { inTransaction } from '#db/org-db.ts'
import { addPreference } from '#db/queries/preference.ts'
import { changeTenancyEnd, changeTenancyPerson } from '#db/queries/tenancy.ts'
import { at, shower, week } from '#lib/demo/weeks.ts'
import { evaluateUnit } from '#lib/evaluation/evaluate-unit.server.ts'
import { loadFeed } from '#lib/feed/load-feed.server.ts'
import { loadSubscription } from '#lib/feed/load-subscription.server.ts'
import { renewFeed } from '#lib/feed/renew-feed.server.ts'
import { stopFeed } from '#lib/feed/stop-feed.server.ts'
import { isUnchanged } from '#lib/http/conditional.ts'
import { NOW_MS } from '../../support/factories.ts'
import { COLD, makeWorld, personOf, unitOf, WARM, type World } from '../../support/world.ts'

const DAY_MS = 86_400_000
const HERE = { tenancyId: null, nowMs: NOW_MS }
let world: World
beforeEach(async () => {
  world = await makeWorld()
})
const partOf = async (over: Partial<typeof HERE> = {}) =>
  (await loadSubscription(world.tenant, { ...HERE, ...over })).subscription?.address.split('/').at(-1) ?? ''
const ask = (part: string, nowMs = NOW_MS) => loadFeed(world.db, { part, nowMs })
const textOf = async (part: string, nowMs = NOW_MS): Promise<string> => {
  const feed = await ask(part, nowMs)
  if (feed.status !== 'open') throw new Error(`the feed is ${feed.status}`)
  return feed.text
}
const read = (text: string) => new ICAL.Component(ICAL.parse(text) as unknown[])
const eventsIn = (text: string) =>
  read(text)
    .getAllSubcomponents('vevent')
    .map((event) => new ICAL.Event(event))
const uids = (text: string) => eventsIn(text).map((event) => event.uid)

describe('a calendar address', () => {
  it('is not there before it is asked for', async () => {
    expect((await loadSubscription(world.tenant, HERE)).subscription).toBeNull()
  })
  it('answers the tenant’s own days with unique names, and not one word of anybody else', async () => {
    await renewFeed(world.tenant, HERE)
    const text = await textOf(await partOf())
    expect(new Set(uids(text)).size).toBe(uids(text).length)
    expect(text).not.toMatch(/@(tenants|people)\.example|Tenant of/)
    expect(text).not.toContain(WARM)
    expect(read(text).getFirstPropertyValue('x-wr-calname')).toBe(`Hot water, ${COLD}`)
    expect(read(text).getFirstPropertyValue('x-wr-caldesc')).toContain('Today and the 7 days after it')
  })
  it('folds lines at 75 octets and ends each with CR LF (RFC 5545, 3.1)', async () => {
    await renewFeed(world.tenant, HERE)
    const text = await textOf(await partOf())
    expect(text.replaceAll('\r\n', '')).not.toMatch(/[\r\n]/)
    expect(Math.max(...text.split('\r\n').map((line) => Buffer.byteLength(line)))).toBeLessThanOrEqual(75)
  })
  it('keeps the name of a day’s event when its start moves, and when the address is renewed', async () => {
    const { tenancyId, unitId } = unitOf(world, COLD)
    const set = async (minute: number, nowMs: number) => {
      const daily = [shower(minute, 1, 3)]
      const preference = { tenancyId, week: week({ weekdays: daily, weekend: daily }), willing: [], setBy: null, setAtMs: nowMs }
      await inTransaction(world.landlord, (trx) => addPreference(trx, preference))
      await evaluateUnit(world.landlord, { unitId, nowMs })
    }
    await set(at(19), NOW_MS)
    await renewFeed(world.tenant, HERE)
    const before = eventsIn(await textOf(await partOf()))
    await set(at(20), NOW_MS + 60_000)
    await renewFeed(world.tenant, HERE)
    const after = eventsIn(await textOf(await partOf()))
    expect(after.map((event) => event.uid)).toEqual(before.map((event) => event.uid))
    after.forEach((event, index) => {
      expect(event.startDate.toJSDate().getTime()).toBeGreaterThan(before[index]?.startDate.toJSDate().getTime() ?? Infinity)
      // A program takes a change with a higher number only (RFC 5545, 3.8.7.4).
      expect(event.sequence).toBeGreaterThan(before[index]?.sequence ?? Infinity)
    })
  })
  it('is dead at once when renewed or stopped', async () => {
    await renewFeed(world.tenant, HERE)
    const first = await partOf()
    await renewFeed(world.tenant, { ...HERE, nowMs: NOW_MS + 1 })
    expect(await ask(first)).toEqual({ status: 'not-found' })
    const second = await partOf()
    expect((await ask(second)).status).toBe('open')
    await stopFeed(world.tenant, HERE)
    expect(await ask(second)).toEqual({ status: 'not-found' })
  })
  it('cannot be made from what the database holds, nor guessed from another', async () => {
    await renewFeed(world.tenant, HERE)
    const part = await partOf()
    const { id } = await world.db.selectFrom('calendar_feed').select('id').executeTakeFirstOrThrow()
    expect(await ask(`${id}.ics`)).toEqual({ status: 'not-found' })
    const [named = '', secret = ''] = part.split('.')
    const other = `${secret[0] === '0' ? '1' : '0'}${secret.slice(1)}`
    expect(await ask(`${named}.${other}.ics`)).toEqual({ status: 'not-found' })
    expect(await ask('../etc')).toEqual({ status: 'not-found' })
  })
  it('is made for nobody but the tenant themselves', async () => {
    const { tenancyId } = unitOf(world, WARM)
    await expect(renewFeed(world.tenant, { tenancyId, nowMs: NOW_MS })).rejects.toMatchObject({ code: 'not-found' })
    await expect(loadSubscription(world.tenant, { tenancyId, nowMs: NOW_MS })).rejects.toMatchObject({ code: 'not-found' })
    await expect(stopFeed(world.tenant, { tenancyId, nowMs: NOW_MS })).rejects.toMatchObject({ code: 'not-found' })
    await expect(renewFeed(world.landlord, HERE)).rejects.toMatchObject({ code: 'forbidden' })
    await expect(renewFeed(world.stranger, HERE)).rejects.toMatchObject({ code: 'forbidden' })
  })
  it('is one a tenancy: somebody with two has two', async () => {
    const second = unitOf(world, WARM).tenancyId
    await inTransaction(world.landlord, (trx) => changeTenancyPerson(trx, second, personOf(world.tenant)))
    await renewFeed(world.tenant, { tenancyId: second, nowMs: NOW_MS })
    const { subscription } = await loadSubscription(world.tenant, { tenancyId: second, nowMs: NOW_MS })
    const text = await textOf(subscription?.address.split('/').at(-1) ?? '')
    expect(read(text).getFirstPropertyValue('x-wr-calname')).toBe(`Hot water, ${WARM}`)
    expect((await loadSubscription(world.tenant, { tenancyId: unitOf(world, COLD).tenancyId, nowMs: NOW_MS })).subscription).toBeNull()
  })
  it('shows no day after the tenancy, is empty for thirty days after its end, and then gone', async () => {
    await renewFeed(world.tenant, HERE)
    const part = await partOf()
    await inTransaction(world.landlord, (trx) => changeTenancyEnd(trx, unitOf(world, COLD).tenancyId, '2026-12-04'))
    const days = uids(await textOf(part)).map((uid) => uid.slice(0, 10))
    expect(days.at(-1)).toBe('2026-12-03')
    expect(uids(await textOf(part, NOW_MS + 3 * DAY_MS))).toEqual([])
    expect(uids(await textOf(part, NOW_MS + 32 * DAY_MS))).toEqual([])
    // 3 January 2027 is the thirtieth day after 4 December 2026.
    expect(await ask(part, NOW_MS + 33 * DAY_MS)).toEqual({ status: 'gone' })
  })
  it('answers the same bytes until something is computed again or the day turns', async () => {
    await renewFeed(world.tenant, HERE)
    const part = await partOf()
    const [first, later] = [await ask(part), await ask(part, NOW_MS + 3_600_000)]
    expect(later).toEqual(first)
    const tomorrow = await ask(part, NOW_MS + DAY_MS)
    if (first.status !== 'open' || tomorrow.status !== 'open') throw new Error('not open')
    expect(tomorrow.etag).not.toBe(first.etag)
    expect(tomorrow.lastModifiedMs).toBeGreaterThan(first.lastModifiedMs)
  })
})

describe('isUnchanged', () => {
  const known = { etag: '"a"', lastModifiedMs: Date.UTC(2026, 11, 1, 12) }
  const asked = (headers: Record<string, string>) => isUnchanged(new Headers(headers), known)
  // RFC 9110, 13.1.2, 13.1.3 and 13.2.2.
  it.each([
    [{}, false],
    [{ 'if-none-match': '"a"' }, true],
    [{ 'if-none-match': '"b", W/"a"' }, true],
    [{ 'if-none-match': '*' }, true],
    [{ 'if-none-match': '"b"', 'if-modified-since': 'Tue, 01 Dec 2026 12:00:00 GMT' }, false],
    [{ 'if-modified-since': 'Tue, 01 Dec 2026 12:00:00 GMT' }, true],
    [{ 'if-modified-since': 'Tue, 01 Dec 2026 11:59:59 GMT' }, false],
    [{ 'if-modified-since': 'yesterday' }, false],
  ])('of %j is %s', (headers, expected) => {
    expect(asked(headers as Record<string, string>)).toBe(expected)
  })
})
