/** Importing a roster: all rows or none, nothing lost that the table does not speak of, and back again unchanged. */
import { parse } from 'csv-parse/sync'
import type { Kysely } from 'kysely'
import { beforeEach, describe, expect, it } from 'vitest'
import type { PropertyId } from '#db/ids.ts'
import type { OrgDb } from '#db/org-db.ts'
import { listCurrentHardware } from '#db/queries/hardware.ts'
import { findProperty, type Property } from '#db/queries/property.ts'
import { listTenanciesOn } from '#db/queries/tenancy.ts'
import { findUnitByCode, listUnits } from '#db/queries/unit.ts'
import type { Database } from '#db/schema.ts'
import type { Installation } from '#lib/core/hardware/types.ts'
import { DEMO_BUILDINGS } from '#lib/demo/buildings.ts'
import { recordHardware } from '#lib/hardware/record-hardware.server.ts'
import { exportRoster } from '#lib/roster/export-roster.server.ts'
import { importRoster, previewRoster } from '#lib/roster/import-roster.server.ts'
import { makeBuilding } from '../../support/building.ts'
import { freshDatabase } from '../../support/database.ts'
import { makeLandlord, makePerson, NOW_MS, scopeFor } from '../../support/factories.ts'

const empty = { ...(DEMO_BUILDINGS[0] as (typeof DEMO_BUILDINGS)[number]), units: [] }
const TABLE = `unit,floor,stack,tenant,email,litres,lower_w,controller,minutes,programme,r_megohm,c_microfarad,timer_ic,showers
1A,0,A,Ada,ada@tenants.example,150,3000,dial,90,,,,,06:45 1x8 Mon-Fri; 08:00 2x10 Sat-Sun
1B,0,B,Bao,bao@tenants.example,120,3000,switch,,05:00-06:30 daily,,,,07:00 1x8 daily
2A,1,A,Cem,cem@tenants.example,120,3000,rc,,,6.8,470,cmos,07:15 1x8 daily
`

describe('importRoster', () => {
  let db: Kysely<Database>
  let ours: OrgDb
  let propertyId: PropertyId
  beforeEach(async () => {
    db = await freshDatabase()
    ours = await makeLandlord(db)
    ;({ propertyId } = await makeBuilding(ours, empty))
  })

  const exported = async () => exportRoster(ours, (await findProperty(ours, propertyId)) as Property, NOW_MS)
  const hardwareOf = async (code: string) => {
    const unit = (await listUnits(ours, propertyId)).find((one) => one.code === code)
    const record = unit && (await listCurrentHardware(ours, propertyId)).get(unit.id)
    if (!record) throw new Error(`${code} has no hardware`)
    return record
  }

  it('adds every row with hardware, tenant and showers', async () => {
    const change = await importRoster(ours, { propertyId, text: TABLE, nowMs: NOW_MS })
    expect(change).toMatchObject({ added: 3, updated: 0 })
    expect((await listUnits(ours, propertyId)).map((unit) => unit.code)).toEqual(['1A', '1B', '2A'])
    expect((await listCurrentHardware(ours, propertyId)).size).toBe(3)
    expect(change.tenancies).toHaveLength(3)
  })
  it('writes nothing when one row is wrong', async () => {
    await expect(importRoster(ours, { propertyId, text: `${TABLE}2B,x,,,,,,,,,,,,\n`, nowMs: NOW_MS })).rejects.toMatchObject({
      code: 'invalid',
    })
    expect(await listUnits(ours, propertyId)).toEqual([])
  })
  it('updates by unit code, and adds no revision for what is the same', async () => {
    await importRoster(ours, { propertyId, text: TABLE, nowMs: NOW_MS })
    const change = await importRoster(ours, { propertyId, text: TABLE.replace('dial,90', 'dial,120'), nowMs: NOW_MS + 1 })
    expect(change).toMatchObject({ added: 0, updated: 1, unchanged: 2, tenancies: [] })
    const revisions = [...(await listCurrentHardware(ours, propertyId)).values()].map((record) => record.revision)
    expect(revisions.sort()).toEqual([1, 1, 2])
  })
  it('reads its own export back and finds nothing to write', async () => {
    await importRoster(ours, { propertyId, text: TABLE, nowMs: NOW_MS })
    expect(await importRoster(ours, { propertyId, text: await exported(), nowMs: NOW_MS + 1 })).toMatchObject({
      added: 0,
      updated: 0,
      unchanged: 3,
    })
    expect([...(await listCurrentHardware(ours, propertyId)).values()].every((record) => record.revision === 1)).toBe(true)
    expect(await db.selectFrom('preference').selectAll().execute()).toHaveLength(3)
  })
  it('reads its own export back from a spreadsheet with semicolons and decimal commas', async () => {
    await importRoster(ours, { propertyId, text: TABLE, nowMs: NOW_MS })
    const text = (await exported())
      .split('\r\n')
      .map((line) => (parse(line)[0] ?? []).map((cell) => `"${/^[\d.]+$/.test(cell) ? cell.replace('.', ',') : cell}"`).join(';'))
      .join('\n')
    expect(await importRoster(ours, { propertyId, text, nowMs: NOW_MS + 1 })).toMatchObject({ added: 0, updated: 0, unchanged: 3 })
  })
  it('leaves what an electrician found where a later table says nothing about it', async () => {
    await importRoster(ours, { propertyId, text: TABLE, nowMs: NOW_MS })
    const before = await hardwareOf('1A')
    const found = {
      ...before.installation,
      circuit: { ...before.installation.circuit, lengthM: 14, reliefValve: true, polesSwitched: 2 as const },
      controller: { ...before.installation.controller, scaleMaxMin: 180 } as Installation['controller'],
    }
    const input = { installation: found, reason: 'Looked inside', measuredMin: null, expectedRevision: 1 }
    await recordHardware(ours, { unitId: before.unitId, input, visitId: null, nowMs: NOW_MS + 1 })
    await importRoster(ours, { propertyId, text: 'unit,breaker_a\n1A,20\n', nowMs: NOW_MS + 2 })
    const after = await hardwareOf('1A')
    expect(after.revision).toBe(3)
    expect(after.installation).toEqual({ ...found, circuit: { ...found.circuit, breakerA: 20 } })
  })
  it('keeps floor, tenant and showers where the table has no such column', async () => {
    await importRoster(ours, { propertyId, text: TABLE, nowMs: NOW_MS })
    await importRoster(ours, { propertyId, text: 'unit,stack\n2A,C\n', nowMs: NOW_MS + 1 })
    expect(await findUnitByCode(ours, propertyId, '2A')).toMatchObject({ floor: 1, stack: 'C' })
    expect((await listTenanciesOn(ours, propertyId, '2026-12-01')).map((tenancy) => tenancy.name).sort()).toEqual(['Ada', 'Bao', 'Cem'])
  })
  it('hands a unit over to another e-mail, and begins a tenancy to come only once', async () => {
    await importRoster(ours, { propertyId, text: TABLE, nowMs: NOW_MS })
    const next = 'unit,tenant,email,from\n1A,Dot,dot@tenants.example,2026-12-20\n'
    const { tenancies } = await importRoster(ours, { propertyId, text: next, nowMs: NOW_MS + 1 })
    expect(tenancies).toHaveLength(1)
    const days = async (day: string) => (await listTenanciesOn(ours, propertyId, day)).filter((one) => ['Ada', 'Dot'].includes(one.name))
    expect((await days('2026-12-19')).map((one) => one.name)).toEqual(['Ada'])
    expect((await days('2026-12-20')).map((one) => one.name)).toEqual(['Dot'])
    await importRoster(ours, { propertyId, text: 'unit,tenant,email\n2B,Eve,eve@tenants.example\n', nowMs: NOW_MS + 2 })
    const future = 'unit,tenant,email,from\n2C,Fay,fay@tenants.example,2027-01-01\n'
    await importRoster(ours, { propertyId, text: future, nowMs: NOW_MS + 3 })
    expect(await importRoster(ours, { propertyId, text: future, nowMs: NOW_MS + 4 })).toMatchObject({ unchanged: 1, tenancies: [] })
  })
  it('refuses a tenancy that would lie over another, in the preview already', async () => {
    await importRoster(ours, { propertyId, text: TABLE, nowMs: NOW_MS })
    const over = 'unit,tenant,email,from\n1A,Dot,dot@tenants.example,2026-11-01\n'
    expect((await previewRoster(ours, { propertyId, text: over, nowMs: NOW_MS })).problems).toMatchObject([{ line: 2, column: 'from' }])
  })
  it('spells a tenant anew and keeps their tenancy', async () => {
    await importRoster(ours, { propertyId, text: TABLE, nowMs: NOW_MS })
    const change = await importRoster(ours, {
      propertyId,
      text: 'unit,tenant,email\n1A,Ada Brackwater,ADA@tenants.example\n',
      nowMs: NOW_MS,
    })
    expect(change).toMatchObject({ updated: 1, tenancies: [] })
    expect((await listTenanciesOn(ours, propertyId, '2026-12-01')).map((one) => one.name)).toContain('Ada Brackwater')
  })
  it('says in the preview what each row changes and which units it does not name', async () => {
    await importRoster(ours, { propertyId, text: TABLE, nowMs: NOW_MS })
    const { rows, unnamed } = await previewRoster(ours, { propertyId, text: 'unit,minutes\n1A,120\n3A,\n', nowMs: NOW_MS })
    expect(rows.map((row) => row.changes)).toEqual([['Timed by: Dial set to 90 min → Dial set to 120 min'], ['New unit']])
    expect(unnamed).toBe(2)
    expect((await hardwareOf('1A')).revision).toBe(1)
  })
  it("answers not found for another organisation's property, and forbids other roles", async () => {
    const theirs = await makeLandlord(db)
    await expect(importRoster(theirs, { propertyId, text: TABLE, nowMs: NOW_MS })).rejects.toMatchObject({ code: 'not-found' })
    const owner = await scopeFor(db, { organisationId: ours.scope.organisationId, personId: await makePerson(db), roles: ['owner'] })
    await expect(importRoster(owner, { propertyId, text: TABLE, nowMs: NOW_MS })).rejects.toMatchObject({ code: 'forbidden' })
  })
})
