/** Reads of what a building consists of: domain values, newest first where several stand, and never across organisations. */
import type { Kysely } from 'kysely'
import { beforeEach, describe, expect, it } from 'vitest'
import { inTransaction, type OrgDb } from '#db/org-db.ts'
import { addHardwareRevision, addMeasuredDuration, currentHardware, listCurrentHardware, listHardware } from '#db/queries/hardware.ts'
import { addPreference, currentPreferences, findPreference } from '#db/queries/preference.ts'
import { findProperty, findPropertyBySlug, listProperties, type Property } from '#db/queries/property.ts'
import { addTariffVersion, findStoredTariff, findTariff } from '#db/queries/tariff.ts'
import { addTenancy, currentTenancy, findTenancy, listTenancies, listTenanciesOn } from '#db/queries/tenancy.ts'
import { findUnit, findUnitByCode, listUnits } from '#db/queries/unit.ts'
import type { Database } from '#db/schema.ts'
import { DEMO_BUILDINGS } from '#lib/demo/buildings.ts'
import { british, dial } from '#lib/demo/installations.ts'
import { type MadeBuilding, makeBuilding } from '../../support/building.ts'
import { freshDatabase } from '../../support/database.ts'
import { makeLandlord, NOW_MS } from '../../support/factories.ts'
import { COLD, unitOf } from '../../support/world.ts'

let db: Kysely<Database>
let ours: OrgDb
let theirs: OrgDb
let building: MadeBuilding
let property: Property
beforeEach(async () => {
  db = await freshDatabase()
  ours = await makeLandlord(db)
  theirs = await makeLandlord(db)
  building = await makeBuilding(ours, DEMO_BUILDINGS[0] as (typeof DEMO_BUILDINGS)[number])
  property = (await findProperty(ours, building.propertyId)) as Property
})
const cold = () => unitOf({ building }, COLD)
const tariffIdOf = ({ tariffId }: Property) => {
  if (!tariffId) throw new Error('the building has no tariff')
  return tariffId
}
const record = (minutes: number, recordedAtMs = NOW_MS) =>
  inTransaction(ours, (trx) =>
    addHardwareRevision(trx, {
      unitId: cold().unitId,
      installation: british(dial(minutes), 120),
      reason: 'changed',
      visitId: null,
      recordedBy: null,
      recordedAtMs,
    }),
  )

describe('property queries', () => {
  it('answer the climate as a value and find by slug', async () => {
    expect(property.climate.kind).toBe('climate')
    expect((await findPropertyBySlug(ours, property.slug))?.id).toBe(property.id)
    expect(await listProperties(ours)).toHaveLength(1)
  })
  it("do not see another organisation's", async () => {
    expect(await listProperties(theirs)).toEqual([])
    expect(await findProperty(theirs, property.id)).toBeNull()
    expect(await findPropertyBySlug(theirs, property.slug)).toBeNull()
  })
})

describe('unit queries', () => {
  it('list units as people count, 2 before 10', async () => {
    const codes = (await listUnits(ours, property.id)).map((unit) => unit.code)
    expect(codes).toEqual([...codes].sort((one, other) => one.localeCompare(other, 'en', { numeric: true })))
    expect(codes).toHaveLength(8)
  })
  it("do not see another organisation's", async () => {
    expect(await listUnits(theirs, property.id)).toEqual([])
    expect(await findUnit(theirs, cold().unitId)).toBeNull()
    expect(await findUnitByCode(theirs, property.id, COLD)).toBeNull()
  })
})

describe('hardware queries', () => {
  it('answer the newest revision of every unit with the readings of its controller', async () => {
    const { recordId } = await record(50)
    const reading = { unitId: cold().unitId, recordId, durationMin: 47, measuredBy: null, measuredAtMs: NOW_MS }
    await inTransaction(ours, (trx) => addMeasuredDuration(trx, reading))
    const listed = await listCurrentHardware(ours, property.id)
    expect(listed.size).toBe(8)
    expect(listed.get(cold().unitId)).toMatchObject({ revision: 2, measured: [{ durationMin: 47, measuredAtMs: NOW_MS }] })
    expect(await currentHardware(ours, cold().unitId)).toEqual(listed.get(cold().unitId))
    await record(60, NOW_MS + 1)
    expect(await currentHardware(ours, cold().unitId)).toMatchObject({ revision: 3, measured: [] })
    expect((await listHardware(ours, cold().unitId)).map((one) => one.revision)).toEqual([3, 2, 1])
  })
  it("do not see another organisation's", async () => {
    expect(await listHardware(theirs, cold().unitId)).toEqual([])
    expect((await listCurrentHardware(theirs, property.id)).size).toBe(0)
  })
})

describe('tenancy queries', () => {
  it('hold the first day of a tenancy and not the last', async () => {
    const { unitId } = unitOf({ building }, COLD)
    const [first] = await listTenancies(ours, unitId)
    await db.updateTable('tenancy').set({ to_day: '2026-12-10' }).where('unit_id', '=', unitId).execute()
    const next = { unitId, personId: null, name: 'Next', email: 'next@tenants.example', fromDay: '2026-12-10', toDay: null }
    await inTransaction(ours, (trx) => addTenancy(trx, next, NOW_MS))
    const on = async (day: string) =>
      (await listTenanciesOn(ours, property.id, day)).filter((one) => one.unitId === unitId).map((one) => one.name)
    expect(await on('2026-12-09')).toEqual([first?.name])
    expect(await on('2026-12-10')).toEqual(['Next'])
    expect((await currentTenancy(ours, unitId, '2026-12-10'))?.name).toBe('Next')
    expect(await currentTenancy(ours, unitId, '2025-12-31')).toBeNull()
  })
  it("do not see another organisation's", async () => {
    expect(await findTenancy(theirs, cold().tenancyId)).toBeNull()
    expect(await listTenancies(theirs, cold().unitId)).toEqual([])
    expect(await listTenanciesOn(theirs, property.id, '2026-12-01')).toEqual([])
  })
})

describe('preference queries', () => {
  it('answer the newest week of every tenancy', async () => {
    const { tenancyId } = cold()
    const none = { tenancyId, week: Array.from({ length: 7 }, () => []), willing: [], setBy: null, setAtMs: NOW_MS + 1 }
    await inTransaction(ours, (trx) => addPreference(trx, none))
    expect((await findPreference(ours, tenancyId))?.week.flat()).toEqual([])
    expect((await currentPreferences(ours, property.id)).get(tenancyId)?.week.flat()).toEqual([])
  })
  it("do not see another organisation's", async () => {
    expect(await findPreference(theirs, cold().tenancyId)).toBeNull()
    expect((await currentPreferences(theirs, property.id)).size).toBe(0)
  })
})

describe('tariff queries', () => {
  it('answer versions in order of their day, in the tariff’s zone', async () => {
    const tariffId = tariffIdOf(property)
    const [stored] = (await findStoredTariff(ours, tariffId))?.stored ?? []
    if (!stored) throw new Error('the building has no tariff')
    const earlier = {
      tariffId,
      effectiveFrom: '2024-01-01',
      version: stored.version,
      record: null,
      source: 'invented',
      createdAtMs: NOW_MS,
    }
    await inTransaction(ours, (trx) => addTariffVersion(trx, earlier))
    const tariff = await findTariff(ours, tariffId)
    expect(tariff?.zone).toBe(property.zone)
    expect(tariff?.versions.map((version) => version.effectiveFrom)).toEqual(['2024-01-01', stored.effectiveFrom])
  })
  it("do not see another organisation's", async () => expect(await findTariff(theirs, tariffIdOf(property))).toBeNull())
})
