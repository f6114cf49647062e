/** Visits: sent by the landlord to who may come, signed off once, seen by nobody else. */
import { beforeEach, describe, expect, it } from 'vitest'
import { inTransaction } from '#db/org-db.ts'
import { listOpenFlags } from '#db/queries/flag.ts'
import { listHardware } from '#db/queries/hardware.ts'
import { deleteAccess } from '#db/queries/organisation.ts'
import { british, dial } from '#lib/demo/installations.ts'
import { assignVisit } from '#lib/visit/assign-visit.server.ts'
import type { Visit } from '#db/queries/visit.ts'
import { loadVisit, loadVisits } from '#lib/visit/load-visits.server.ts'
import { openVisit } from '#lib/visit/open-visit.server.ts'
import { signOffVisit } from '#lib/visit/sign-off-visit.server.ts'
import { byBuilding, dueOf } from '#lib/visit/view.ts'
import { NOW_MS } from '../../support/factories.ts'
import { COLD, makeWorld, personOf, unitOf, type World } from '../../support/world.ts'

const LEFT = { installation: british(dial(150), 120), reason: 'Dial set longer', measuredMin: 149, expectedRevision: 1 }
let world: World
beforeEach(async () => {
  world = await makeWorld()
})
const assign = async (db = world.landlord, over: Record<string, unknown> = {}) => {
  const { unitId } = unitOf(world, COLD)
  const flags = await listOpenFlags(world.landlord, { unitId })
  const input = {
    unitId,
    flagIds: flags.map((flag) => flag.id),
    electricianId: personOf(world.electrician),
    dueDay: '2026-12-04',
    note: 'Ring first',
    ...over,
  }
  return assignVisit(db, { input, organisationSlug: 'ours', nowMs: NOW_MS })
}
const mails = (kind: 'visit-assigned' | 'visit-done') => world.db.selectFrom('message').where('kind', '=', kind).selectAll().execute()

describe('assignVisit', () => {
  it('tells the electrician what was found and what would fix it, with the cautions', async () => {
    await assign()
    const [mail] = await mails('visit-assigned')
    expect(mail?.subject).toContain(`Visit ${COLD}`)
    expect(mail?.text).toContain('Isolate and lock off')
    const proposal = (await loadVisits(world.electrician)).buildings[0]?.visits[0]?.proposal
    expect(proposal?.changes.length).toBeGreaterThan(0)
    expect(proposal?.evidence?.[0]?.lines.map((line) => line.label)).toContain('Shortfall')
  })
  it('plans one visit for a flag, however often it is sent', async () => {
    await assign()
    await expect(assign()).rejects.toMatchObject({ code: 'conflict' })
    expect(await mails('visit-assigned')).toHaveLength(1)
  })
  it('is forbidden to electricians themselves', async () => {
    await expect(assign(world.electrician)).rejects.toMatchObject({ code: 'forbidden' })
  })
  it('answers not found for an electrician without access to the property', async () => {
    await inTransaction(world.landlord, (trx) =>
      deleteAccess(trx, { personId: personOf(world.electrician), propertyId: world.building.propertyId, role: 'electrician' }),
    )
    await expect(assign()).rejects.toMatchObject({ code: 'not-found' })
  })
  it("answers not found for another organisation's unit and writes no mail", async () => {
    await expect(assign(world.stranger)).rejects.toMatchObject({ code: 'not-found' })
    expect(await mails('visit-assigned')).toEqual([])
  })
})

describe('openVisit', () => {
  it('answers not found once the electrician’s access to the property is taken away', async () => {
    const visitId = await assign()
    expect((await openVisit(world.electrician, visitId)).unitCode).toBe(COLD)
    const access = { personId: personOf(world.electrician), propertyId: world.building.propertyId, role: 'electrician' } as const
    await inTransaction(world.landlord, (trx) => deleteAccess(trx, access))
    await expect(openVisit(world.electrician, visitId)).rejects.toMatchObject({ code: 'not-found' })
  })
})

describe('loadVisits', () => {
  it('shows an electrician what is theirs, the landlord everything and who comes, others nothing', async () => {
    await assign()
    expect((await loadVisits(world.electrician)).plannedCount).toBe(1)
    const { plannedCount, names } = await loadVisits(world.landlord)
    expect(plannedCount).toBe(1)
    expect(names.get(personOf(world.electrician))).toBe('electrician')
    expect((await loadVisits(world.stranger)).plannedCount).toBe(0)
    await expect(loadVisits(world.tenant)).rejects.toMatchObject({ code: 'forbidden' })
    await expect(loadVisits(world.owner)).rejects.toMatchObject({ code: 'forbidden' })
  })
  it('shows nothing of a property that has been closed to the electrician', async () => {
    const visitId = await assign()
    await inTransaction(world.landlord, (trx) =>
      deleteAccess(trx, { personId: personOf(world.electrician), propertyId: world.building.propertyId, role: 'electrician' }),
    )
    expect((await loadVisits(world.electrician)).plannedCount).toBe(0)
    await expect(loadVisit(world.electrician, visitId)).rejects.toMatchObject({ code: 'not-found' })
    await expect(
      signOffVisit(world.electrician, { visitId, input: LEFT, organisationSlug: 'ours', nowMs: NOW_MS + 1 }),
    ).rejects.toMatchObject({ code: 'not-found' })
    expect((await openVisit(world.landlord, visitId)).state).toBe('planned')
  })
})

describe('loadVisit', () => {
  it('opens the form at the newest revision', async () => {
    expect(await loadVisit(world.electrician, await assign())).toMatchObject({ form: { revision: 1 }, visit: { unitCode: COLD } })
  })
})

describe('byBuilding', () => {
  const visit = (propertyId: string, unitCode: string, dueDay: string | null) =>
    ({ propertyId, propertyName: propertyId, unitCode, dueDay }) as unknown as Visit
  it('puts the building that is due soonest first, and in it the nearest day; none comes last', () => {
    const buildings = byBuilding([
      visit('A', '1', '2026-12-05'),
      visit('B', '9', null),
      visit('B', '2', '2026-12-03'),
      visit('B', '1', '2026-12-05'),
    ])
    expect(buildings.map(({ propertyName, visits }) => [propertyName, visits.map((one) => one.unitCode)])).toEqual([
      ['B', ['2', '1', '9']],
      ['A', ['1']],
    ])
  })
})

describe('dueOf', () => {
  it.each([
    ['2026-12-04', 'by Friday 4 December', false],
    ['2026-12-01', 'due today', false],
    ['2026-11-30', 'was due on Monday 30 November', true],
    [null, 'no day set', false],
  ])('%s: %s', (dueDay, words, late) => {
    expect(dueOf({ dueDay, zone: 'Europe/London' }, NOW_MS)).toEqual({ words, late })
  })
  it('goes by the property’s own day', () => {
    // 12:00 UTC on the 1st is already the 2nd in Auckland.
    expect(dueOf({ dueDay: '2026-12-01', zone: 'Pacific/Auckland' }, NOW_MS).late).toBe(true)
  })
})

describe('signOffVisit', () => {
  const signOff = async (visitId: string, db = world.electrician) =>
    signOffVisit(db, { visitId, input: LEFT, organisationSlug: 'ours', nowMs: NOW_MS + 1 })

  it('records the revision, closes the flag and tells the landlord', async () => {
    const { evaluation } = await signOff(await assign())
    expect(evaluation.closed).toContain('misses-recovery')
    expect(await listHardware(world.landlord, unitOf(world, COLD).unitId)).toHaveLength(2)
    expect(await mails('visit-done')).toHaveLength(1)
  })
  it('is done once however often it is sent', async () => {
    const visitId = await assign()
    await signOff(visitId)
    await expect(signOff(visitId)).rejects.toMatchObject({ code: 'conflict' })
    expect(await listHardware(world.landlord, unitOf(world, COLD).unitId)).toHaveLength(2)
    expect(await mails('visit-done')).toHaveLength(1)
  })
  it("answers not found for another organisation's visit, and forbids tenants", async () => {
    const visitId = await assign()
    await expect(signOff(visitId, world.stranger)).rejects.toMatchObject({ code: 'not-found' })
    await expect(openVisit(world.tenant, visitId)).rejects.toMatchObject({ code: 'forbidden' })
  })
})
