/** Importing a published rate record through the product's own verb. */
import { readFileSync } from 'node:fs'
import { beforeEach, describe, expect, it } from 'vitest'
import { findProperty } from '#db/queries/property.ts'
import { exportTariff } from '#lib/tariff/export-tariff.server.ts'
import { importTariff } from '#lib/tariff/import-tariff.server.ts'
import { loadTariff } from '#lib/tariff/load-tariff.server.ts'
import { NOW_MS } from '../../support/factories.ts'
import { makeWorld, type World } from '../../support/world.ts'

const read = (name: string) => readFileSync(new URL(`../../fixtures/tariff/${name}`, import.meta.url), 'utf8')
let world: World
beforeEach(async () => {
  world = await makeWorld()
})
const load = (record: string, over: { effectiveFrom?: string; db?: World['landlord'] } = {}) =>
  importTariff(over.db ?? world.landlord, {
    propertyId: world.building.propertyId,
    input: { record, effectiveFrom: over.effectiveFrom ?? '' },
    nowMs: NOW_MS,
  })

describe('importTariff', () => {
  it('adds a version in force from its day and shows its peaks', async () => {
    await load(read('pge-e19-2019.urdb.json'), { effectiveFrom: '2026-11-01' })
    const property = await findProperty(world.landlord, world.building.propertyId)
    const tariff = await loadTariff(world.landlord, property as NonNullable<typeof property>, NOW_MS)
    expect(tariff?.versions.at(-1)).toMatchObject({ effectiveFrom: '2026-11-01', inForce: true })
    // The record's December weekdays: dear from 08:00 to 21:00.
    expect(tariff?.current?.weekday.filter((band) => band.peak)).toMatchObject([{ fromHour: 8, toHour: 21 }])
  })
  it('refuses a record without a price by the field’s name and keeps the tariff as it was', async () => {
    await expect(load(read('no-price.urdb.json'))).rejects.toMatchObject({
      code: 'invalid',
      details: { fields: [{ field: 'energyratestructure[0][0].rate' }] },
    })
    await expect(load('not json')).rejects.toMatchObject({ code: 'invalid', details: { fields: [{ field: 'record' }] } })
    expect(await world.db.selectFrom('tariff_version').selectAll().execute()).toHaveLength(1)
  })
  it('refuses a second version from the same day', async () => {
    await load(read('pge-e19-2019.urdb.json'), { effectiveFrom: '2026-11-01' })
    await expect(load(read('pge-e19-2019.urdb.json'), { effectiveFrom: '2026-11-01' })).rejects.toMatchObject({
      details: { fields: [{ field: 'effectiveFrom' }] },
    })
  })
  it("answers not found for another organisation's property, and forbids other roles", async () => {
    await expect(load(read('pge-e19-2019.urdb.json'), { db: world.stranger })).rejects.toMatchObject({ code: 'not-found' })
    await expect(load(read('pge-e19-2019.urdb.json'), { db: world.electrician })).rejects.toMatchObject({ code: 'forbidden' })
  })
})

describe('exportTariff', () => {
  it('gives back the record of each version by its first day, and of the one in force', async () => {
    const property = (await findProperty(world.landlord, world.building.propertyId))!
    const { effectiveFrom, record } = await exportTariff(world.landlord, { property, from: null, nowMs: NOW_MS })
    expect(record).toHaveProperty('energyratestructure')
    const again = await exportTariff(world.landlord, { property, from: effectiveFrom, nowMs: NOW_MS })
    expect(again.record).toEqual(record)
    await expect(exportTariff(world.landlord, { property, from: '1999-01-01', nowMs: NOW_MS })).rejects.toMatchObject({ code: 'not-found' })
    await expect(exportTariff(world.tenant, { property, from: null, nowMs: NOW_MS })).rejects.toMatchObject({ code: 'forbidden' })
  })
})
