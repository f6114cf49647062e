/** The round at a clock change: who is on it, planned once, told once, seen by nobody else. */
import { beforeEach, describe, expect, it } from 'vitest'
import { findPropertyBySlug, type Property } from '#db/queries/property.ts'
import { listVisits } from '#db/queries/visit.ts'
import { loadClockNotice } from '#lib/clock-round/load-clock-notice.server.ts'
import { loadClockRound } from '#lib/clock-round/load-round.server.ts'
import { planRound } from '#lib/clock-round/plan-round.server.ts'
import { assignVisit } from '#lib/visit/assign-visit.server.ts'
import { evaluateProperty } from '#lib/evaluation/evaluate-property.server.ts'
import { recordHardware } from '#lib/hardware/record-hardware.server.ts'
import { listOpenFlags } from '#db/queries/flag.ts'
import { NOW_MS } from '../../support/factories.ts'
import { CLOCKED, COLD, makeWorld, personOf, unitOf, type World } from '../../support/world.ts'

/** 28 March 2027, 01:00 UTC, and 31 October 2027, 01:00 UTC: the next two changes in London after 1 December 2026 (IANA tz database). */
const SPRING_MS = Date.UTC(2027, 2, 28, 1)
const AUTUMN_MS = Date.UTC(2027, 9, 31, 1)

let world: World
let property: Property
beforeEach(async () => {
  world = await makeWorld()
  const found = await findPropertyBySlug(world.landlord, 'sallow-court')
  if (!found) throw new Error('the world has no property')
  property = found
})
const load = (nowMs = NOW_MS) => loadClockRound(world.landlord, { property, nowMs, outage: null })
const plan = (over: Record<string, unknown> = {}, db = world.landlord, nowMs = NOW_MS) =>
  planRound(db, {
    input: { property: property.slug, changeAtMs: String(SPRING_MS), electricianId: personOf(world.electrician), ...over },
    organisationSlug: 'ours',
    nowMs,
  })
const mails = () => world.db.selectFrom('message').where('kind', '=', 'visit-assigned').selectAll().execute()

describe('loadClockRound', () => {
  it('lists the switch that does not follow at both changes: late after spring, early after autumn', async () => {
    const { rounds, switches } = await load()
    expect(switches).toBe(1)
    expect(
      rounds.map(({ change, visits }) => [
        change.atMs,
        visits.map(({ unit, aheadMin, side, dueDay }) => [unit.code, aheadMin, side, dueDay]),
      ]),
    ).toEqual([
      [SPRING_MS, [[CLOCKED, -60, 'before', '2027-03-27']]],
      [AUTUMN_MS, [[CLOCKED, 60, 'after', '2027-11-07']]],
    ])
  })
  it('has no round where clocks are not changed', async () => {
    const { rounds } = await loadClockRound(world.landlord, {
      property: { ...property, zone: 'Asia/Kathmandu' },
      nowMs: NOW_MS,
      outage: null,
    })
    expect(rounds).toEqual([])
  })
  it('lists the clocks that a power cut longer than their reserve leaves wrong', async () => {
    const codes = async (outage: string) =>
      (await loadClockRound(world.landlord, { property, nowMs: NOW_MS, outage })).afterOutage.map(({ unit }) => unit.code)
    // The switch has a reserve of 100 h.
    expect(await codes('100')).toEqual([])
    expect(await codes('101')).toEqual([CLOCKED])
    expect((await loadClockRound(world.landlord, { property, nowMs: NOW_MS, outage: 'long' })).outageH).toBe(24)
  })
  it('is forbidden to electricians and owners', async () => {
    for (const db of [world.electrician, world.owner])
      await expect(loadClockRound(db, { property, nowMs: NOW_MS, outage: null })).rejects.toMatchObject({ code: 'forbidden' })
  })
})

describe('loadClockNotice', () => {
  const notice = (nowMs: number) => loadClockNotice(world.landlord, { property, nowMs })
  it('is silent until six weeks before the change, then counts the visits that nobody makes yet', async () => {
    expect(await notice(NOW_MS)).toBeNull()
    const nearMs = SPRING_MS - 30 * 86_400_000
    expect((await notice(nearMs))?.open).toBe(1)
    await plan()
    expect((await notice(nearMs))?.open).toBe(0)
  })
})

describe('planRound', () => {
  it('plans a visit a switch with what to set and record, and sends one letter', async () => {
    expect(await plan()).toEqual({ planned: 1, already: 0 })
    const [visit] = (await listVisits(world.landlord)).filter((one) => one.proposal.cause !== undefined)
    expect(visit).toMatchObject({ unitCode: CLOCKED, state: 'planned', dueDay: '2027-03-27' })
    expect(visit?.proposal.findings[0]).toContain('Sunday 28 March 2027: 01:00 becomes 02:00')
    expect(visit?.proposal.findings[0]).toContain('1 h late')
    expect(visit?.proposal.changes[0]).toContain('60 min ahead of the local time')
    const [mail] = await mails()
    expect(mail?.text).toContain(CLOCKED)
    expect(mail?.text).toContain('Isolate and lock off')
    expect(mail?.text).toContain('Europe/London')
  })
  it('plans nothing twice and tells nobody twice, however often it is sent', async () => {
    await plan()
    expect(await plan()).toEqual({ planned: 0, already: 1 })
    expect(await mails()).toHaveLength(1)
    expect((await listVisits(world.landlord)).filter((visit) => visit.unitCode === CLOCKED)).toHaveLength(1)
  })
  it('plans the next change beside it, as a visit of its own', async () => {
    await plan()
    expect(await plan({ changeAtMs: String(AUTUMN_MS) })).toEqual({ planned: 1, already: 0 })
    expect(await mails()).toHaveLength(2)
  })
  it('refuses a change that is not one of the next two, and plans nothing', async () => {
    await expect(plan({ changeAtMs: String(SPRING_MS + 1) })).rejects.toMatchObject({ code: 'conflict' })
    await expect(plan({}, world.landlord, SPRING_MS + 1)).rejects.toMatchObject({ code: 'conflict' })
    expect(await mails()).toEqual([])
  })
  it('is forbidden to electricians, and knows no property of another organisation and no electrician without access', async () => {
    await expect(plan({}, world.electrician)).rejects.toMatchObject({ code: 'forbidden' })
    await expect(plan({}, world.stranger)).rejects.toMatchObject({ code: 'not-found' })
    await expect(plan({ electricianId: personOf(world.owner) })).rejects.toMatchObject({ code: 'not-found' })
    await expect(plan({ electricianId: '' })).rejects.toMatchObject({ code: 'not-found' })
  })
  it('keeps a second visit from being sent for the flag that an unset switch then raises', async () => {
    await plan()
    const afterMs = SPRING_MS + 86_400_000
    await evaluateProperty(world.landlord, { propertyId: property.id, nowMs: afterMs })
    const { unitId } = unitOf(world, CLOCKED)
    const flag = (await listOpenFlags(world.landlord, { unitId })).find((one) => one.kind === 'clock-is-off')
    expect(flag?.summary).toContain('60 min late')
    const input = { unitId, flagIds: [flag?.id], electricianId: personOf(world.electrician), dueDay: '', note: '' }
    await expect(assignVisit(world.landlord, { input, organisationSlug: 'ours', nowMs: afterMs })).rejects.toMatchObject({
      code: 'conflict',
    })
  })
  it('set ahead on the day before and recorded as fast, the switch raises no flag after the change and is on the next round', async () => {
    const { unitId } = unitOf(world, CLOCKED)
    const before = (await load()).rounds[0]?.visits[0]?.unit.controller
    if (before?.kind !== 'time-switch') throw new Error('the clocked unit has a switch')
    const record = await world.db
      .selectFrom('hardware_record')
      .where('unit_id', '=', unitId)
      .select('installation')
      .executeTakeFirstOrThrow()
    const installation = { ...(JSON.parse(record.installation) as object), controller: { ...before, driftMin: 60 } }
    const dayBeforeMs = SPRING_MS - 13 * 3_600_000
    await recordHardware(world.landlord, {
      unitId,
      input: { installation, reason: 'Set to the time after the change', measuredMin: null, expectedRevision: 1 },
      visitId: null,
      nowMs: dayBeforeMs,
    })
    const flags = async () => (await listOpenFlags(world.landlord, { unitId })).map((flag) => flag.kind)
    // Recording evaluates at once: an hour fast on this day, and right by the end of the week that is computed.
    expect(await flags()).not.toContain('clock-is-off')
    await evaluateProperty(world.landlord, { propertyId: property.id, nowMs: SPRING_MS + 86_400_000 })
    expect(await flags()).not.toContain('clock-is-off')
    const { rounds } = await load(dayBeforeMs + 60_000)
    expect(rounds[0]?.comesRight.map(({ code }) => code)).toEqual([CLOCKED])
    expect(rounds[1]?.visits.map(({ unit, aheadMin }) => [unit.code, aheadMin])).toEqual([[CLOCKED, 60]])
  })
  it('leaves units without a clock alone', async () => {
    await plan()
    expect((await listVisits(world.landlord)).some((visit) => visit.unitCode === COLD)).toBe(false)
  })
})
