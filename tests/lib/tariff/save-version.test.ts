/** Saving a written version through the product's own verb: history is added to and never changed. */
import { beforeEach, describe, expect, it } from 'vitest'
import { findProperty } from '#db/queries/property.ts'
import { readUrdb } from '#lib/core/tariff/urdb-import.ts'
import { draftOf } from '#lib/tariff/draft.ts'
import { exportTariff } from '#lib/tariff/export-tariff.server.ts'
import { loadEditor } from '#lib/tariff/load-editor.server.ts'
import { loadTariff } from '#lib/tariff/load-tariff.server.ts'
import { saveVersion } from '#lib/tariff/save-version.server.ts'
import { NOW_MS } from '../../support/factories.ts'
import { makeWorld, type World } from '../../support/world.ts'

let world: World
beforeEach(async () => {
  world = await makeWorld()
})
const property = async () => (await findProperty(world.landlord, world.building.propertyId))!
const editor = async (from: string | null = null) => loadEditor(world.landlord, { property: await property(), from, nowMs: NOW_MS })
const save = (input: unknown, over: { db?: World['landlord']; nowMs?: number } = {}) =>
  saveVersion(over.db ?? world.landlord, { propertyId: world.building.propertyId, input, nowMs: over.nowMs ?? NOW_MS })
const rows = () => world.db.selectFrom('tariff_version').selectAll().orderBy('effective_from').orderBy('edition').execute()

describe('saveVersion', () => {
  it('adds a version from its day and leaves every stored row as it was', async () => {
    const before = await rows()
    const { draft, revision } = await editor()
    expect(draft.effectiveFrom).toBe('2027-01-01')
    await expect(save({ revision, reason: '', version: { ...draft, name: 'Three rates' } })).resolves.toEqual({
      effectiveFrom: '2027-01-01',
      revision: revision + 1,
    })
    const after = await rows()
    expect(after.slice(0, before.length)).toEqual(before)
    expect(after.at(-1)).toMatchObject({ effective_from: '2027-01-01', edition: 1, reason: null, record: null })
  })
  it('makes a correction the next edition of its day, with the reason, and counts the last', async () => {
    const from = (await editor()).versions[0]!.effectiveFrom
    const { draft, revision } = await editor(from)
    const fixed = { amountMinor: 99, per: 'day' as const }
    await expect(save({ revision, reason: ' ', version: { ...draft, fixed } })).rejects.toMatchObject({
      details: { fields: [{ field: 'reason' }] },
    })
    await save({ revision, reason: 'The bill says 0.99 a day.', version: { ...draft, fixed } })
    expect((await rows()).map((row) => [row.effective_from, row.edition, row.reason])).toEqual([
      [from, 1, null],
      [from, 2, 'The bill says 0.99 a day.'],
    ])
    const shown = await loadTariff(world.landlord, await property(), NOW_MS)
    expect(shown?.versions).toHaveLength(1)
    expect(shown?.versions[0]).toMatchObject({ reason: 'The bill says 0.99 a day.', corrected: [{ changes: ['Fixed charge: changed.'] }] })
    expect(shown?.current?.charges.join(' ')).toContain('£0.99 a day')
  })
  it('asks for a reason where days that have passed get other prices', async () => {
    const { draft, revision } = await editor()
    await expect(save({ revision, reason: '', version: { ...draft, effectiveFrom: '2026-11-01' } })).rejects.toMatchObject({
      details: { fields: [{ field: 'reason' }] },
    })
  })
  it('tells the second of two writers what changed, and stores nothing of theirs until they have seen it', async () => {
    const [first, second] = [await editor(), await editor()]
    const dearer = first.draft.energyPeriods.map((tiers) => tiers.map((tier) => ({ ...tier, priceMinorPerKwh: 50 })))
    await save({ revision: first.revision, reason: '', version: { ...first.draft, energyPeriods: dearer } }, { nowMs: NOW_MS + 1 })
    const mine = { ...second.draft, effectiveFrom: '2027-02-01' }
    const refused = await save({ revision: second.revision, reason: '', version: mine }).catch((error: unknown) => error)
    expect(refused).toMatchObject({ code: 'conflict' })
    const { details } = refused as { details: { fields: { message: string }[] } }
    expect(details.fields.map((one) => one.message).join(' ')).toMatch(/2027-01-01 has been saved.*was 0\.142, is 0\.5 GBP\/kWh/)
    expect(await rows()).toHaveLength(2)
    await save({ revision: (await editor()).revision, reason: '', version: mine })
    expect((await rows()).map((row) => row.effective_from)).toContain('2027-02-01')
  })
  it('refuses what the core cannot bill, by field, and amounts in another currency become the property’s', async () => {
    const { draft, revision } = await editor()
    await expect(save({ revision, reason: '', version: { ...draft, weekdayGrid: [[9]] } })).rejects.toMatchObject({
      code: 'invalid',
      details: { fields: expect.arrayContaining([expect.objectContaining({ field: 'weekdayGrid' })]) },
    })
    await expect(save({ revision, reason: '', version: { name: 'x' } })).rejects.toMatchObject({ code: 'invalid' })
    await save({ revision, reason: '', version: { ...draft, currency: 'USD' } })
    expect((await editor('2027-01-01')).draft.currency).toBe('GBP')
  })
  it('writes a version that is read back from its exported record unchanged', async () => {
    const { draft, revision } = await editor()
    await save({ revision, reason: '', version: draft })
    const { record } = await exportTariff(world.landlord, { property: await property(), from: '2027-01-01', nowMs: NOW_MS })
    const read = readUrdb(JSON.parse(JSON.stringify(record)), { currency: 'GBP', minorPerMajor: 100, effectiveFrom: '2000-01-01' })
    if (read.status !== 'read') throw new Error('The exported record was refused.')
    // The format has no names of periods.
    expect(draftOf({ ...read.version, periodNames: draft.periodNames, seasons: draft.seasons, ...grids(read.version) })).toEqual(draft)
  })
  it("answers not found for another organisation's property, and forbids other roles", async () => {
    const { draft, revision } = await editor()
    const input = { revision, reason: '', version: draft }
    await expect(save(input, { db: world.stranger })).rejects.toMatchObject({ code: 'not-found' })
    await expect(save(input, { db: world.tenant })).rejects.toMatchObject({ code: 'forbidden' })
    await expect(loadEditor(world.electrician, { property: await property(), from: null, nowMs: NOW_MS })).rejects.toMatchObject({
      code: 'forbidden',
    })
  })
})

/** The demo's rate is the same in every month: the record's first row is the season's. */
const grids = (version: {
  readonly weekdayGrid: readonly (readonly number[])[]
  readonly weekendGrid: readonly (readonly number[])[]
}) => ({
  weekdayGrid: version.weekdayGrid.slice(0, 1),
  weekendGrid: version.weekendGrid.slice(0, 1),
})
