/** Dismissing and reopening flags: the rules, the roles, and other organisations. */
import type { Kysely } from 'kysely'
import { beforeEach, describe, expect, it } from 'vitest'
import { type FlagId, newId, type PropertyId, type UnitId } from '#db/ids.ts'
import { inTransaction, type OrgDb } from '#db/org-db.ts'
import { addFlag, closeFlag, findFlag } from '#db/queries/flag.ts'
import type { Database } from '#db/schema.ts'
import { dismissFlag } from '#lib/flag/dismiss-flag.server.ts'
import { loadFlags } from '#lib/flag/load-flags.server.ts'
import { reopenFlag } from '#lib/flag/reopen-flag.server.ts'
import { byUrgency } from '#lib/flag/view.ts'
import { DEMO_BUILDINGS } from '#lib/demo/buildings.ts'
import { makeBuilding } from '../../support/building.ts'
import { freshDatabase } from '../../support/database.ts'
import { makeLandlord, makePerson, NOW_MS, scopeFor } from '../../support/factories.ts'

let connection: Kysely<Database>
let db: OrgDb
let propertyId: PropertyId
let unitId: UnitId
const building = { ...DEMO_BUILDINGS[0], units: DEMO_BUILDINGS[0]?.units.slice(0, 2) ?? [] } as (typeof DEMO_BUILDINGS)[number]

const open = async (severity: 'dangerous' | 'cold' | 'attention' = 'cold', openedAtMs = NOW_MS): Promise<FlagId> => {
  const id = newId<FlagId>()
  const kind = severity === 'dangerous' ? 'may-never-stop' : 'misses-recovery'
  const evidence = { lines: [], shortfallMin: null, day: null }
  await inTransaction(db, (trx) => addFlag(trx, { id, propertyId, unitId, kind, severity, summary: 'found', evidence, openedAtMs }))
  return id
}
const dismissal = (flagId: string, untilDay = '2026-12-20') => ({
  input: { flagId, reason: 'the tenant is away', untilDay },
  nowMs: NOW_MS,
})
const audits = () => db.selectFrom('audit_entry').selectAll('audit_entry').execute()

beforeEach(async () => {
  connection = await freshDatabase()
  db = await makeLandlord(connection)
  const made = await makeBuilding(db, building)
  propertyId = made.propertyId
  unitId = made.units.get('Flat 1')?.unitId ?? ('' as never)
})

describe('dismissFlag', () => {
  it('closes the flag with the reason, the person and the day, and writes an audit entry', async () => {
    const id = await open()
    await dismissFlag(db, dismissal(id))
    expect((await findFlag(db, id))?.closed).toMatchObject({ because: 'dismissed', note: 'the tenant is away', untilDay: '2026-12-20' })
    expect((await audits()).map((entry) => entry.action)).toEqual(['flag.dismiss'])
  })
  it('wants a reason and a day after today', async () => {
    const id = await open()
    await expect(dismissFlag(db, { input: { flagId: id, reason: ' ', untilDay: '2026-12-20' }, nowMs: NOW_MS })).rejects.toMatchObject({
      code: 'invalid',
      details: { fields: [{ field: 'reason' }] },
    })
    await expect(dismissFlag(db, dismissal(id, '2026-12-01'))).rejects.toMatchObject({ details: { fields: [{ field: 'untilDay' }] } })
    expect((await findFlag(db, id))?.closed).toBeNull()
  })
  it('dismisses a hazard for thirty days at most', async () => {
    const id = await open('dangerous')
    await expect(dismissFlag(db, dismissal(id, '2027-01-01'))).rejects.toMatchObject({ code: 'invalid' })
    await dismissFlag(db, dismissal(id, '2026-12-31'))
    expect((await findFlag(db, id))?.closed?.untilDay).toBe('2026-12-31')
  })
  it('refuses a flag that is closed already', async () => {
    const id = await open()
    await dismissFlag(db, dismissal(id))
    await expect(dismissFlag(db, dismissal(id))).rejects.toMatchObject({ code: 'conflict' })
  })
  it("answers not found for another organisation's flag", async () => {
    const id = await open()
    await expect(dismissFlag(await makeLandlord(connection), dismissal(id))).rejects.toMatchObject({ code: 'not-found' })
    expect((await findFlag(db, id))?.closed).toBeNull()
  })
  it('is for landlords', async () => {
    const id = await open()
    const { organisationId } = db.scope
    for (const role of ['tenant', 'electrician', 'owner'] as const) {
      const other = await scopeFor(connection, { organisationId, personId: await makePerson(connection), roles: [role] })
      await expect(dismissFlag(other, dismissal(id))).rejects.toMatchObject({ code: 'forbidden' })
    }
  })
})

describe('reopenFlag', () => {
  it('opens a dismissed flag again with its age', async () => {
    const id = await open('cold', NOW_MS - 9 * 86_400_000)
    await dismissFlag(db, dismissal(id))
    await reopenFlag(db, { input: { flagId: id }, nowMs: NOW_MS })
    expect(await findFlag(db, id)).toMatchObject({ closed: null, openedAtMs: NOW_MS - 9 * 86_400_000 })
  })
  it('refuses a flag that the computation closed', async () => {
    const id = await open()
    await inTransaction(db, (trx) =>
      closeFlag(trx, id, { atMs: NOW_MS, because: 'computation', byPersonId: null, note: null, untilDay: null }),
    )
    await expect(reopenFlag(db, { input: { flagId: id }, nowMs: NOW_MS })).rejects.toMatchObject({ code: 'conflict' })
  })
  it('refuses to open the same finding twice', async () => {
    const first = await open()
    await dismissFlag(db, dismissal(first))
    await open()
    await expect(reopenFlag(db, { input: { flagId: first }, nowMs: NOW_MS })).rejects.toMatchObject({ code: 'conflict' })
  })
  it("answers not found for another organisation's flag", async () => {
    const id = await open()
    await expect(reopenFlag(await makeLandlord(connection), { input: { flagId: id }, nowMs: NOW_MS })).rejects.toMatchObject({
      code: 'not-found',
    })
  })
})

describe('loadFlags', () => {
  const asked = { propertySlug: building.slug, kind: null, nowMs: NOW_MS }
  it('queues the dangerous before the cold and filters by kind', async () => {
    await open('cold', NOW_MS - 5_000)
    await open('dangerous')
    expect((await loadFlags(db, asked)).open.map((item) => item.flag.severity)).toEqual(['dangerous', 'cold'])
    expect((await loadFlags(db, { ...asked, kind: 'misses-recovery' })).open).toHaveLength(1)
    expect((await loadFlags(db, { ...asked, kind: 'no such kind' })).open).toHaveLength(2)
  })
  it("answers not found for another organisation's property", async () => {
    await expect(loadFlags(await makeLandlord(connection), asked)).rejects.toMatchObject({ code: 'not-found' })
  })
})

describe('byUrgency', () => {
  it('puts the oldest of equally severe flags first', () => {
    const flags = [
      { severity: 'cold' as const, openedAtMs: 2 },
      { severity: 'attention' as const, openedAtMs: 0 },
      { severity: 'cold' as const, openedAtMs: 1 },
    ]
    expect(flags.sort(byUrgency).map((flag) => flag.openedAtMs)).toEqual([1, 2, 0])
  })
})
