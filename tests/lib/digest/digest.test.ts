/** The digest: parts that add up, months of every length, frozen editions, mail to owners and nobody's name in it. */
import { beforeEach, describe, expect, it } from 'vitest'
import { findLastEdition } from '#db/queries/digest.ts'
import { correctDigest } from '#lib/digest/correct-digest.server.ts'
import { loadDigest, loadDigests } from '#lib/digest/load-digests.server.ts'
import { writeDigest } from '#lib/digest/write-digest.server.ts'
import { NOW_MS } from '../../support/factories.ts'
import { COLD, makeWorld, type World } from '../../support/world.ts'

let world: World
beforeEach(async () => {
  world = await makeWorld()
})
const write = (reason?: string, db = world.landlord) =>
  writeDigest(db, { propertyId: world.building.propertyId, month: '2026-12', nowMs: NOW_MS, ...(reason ? { reason } : {}) })
const edition = () => findLastEdition(world.landlord, world.building.propertyId, '2026-12')

describe('writeDigest', () => {
  it('mails the owner once and writes nothing the second time', async () => {
    expect(await write()).toEqual({ written: 1, mailed: 1 })
    expect(await write()).toEqual({ written: 0, mailed: 0 })
    expect(await world.db.selectFrom('message').where('kind', '=', 'digest').selectAll().execute()).toHaveLength(1)
  })
  it('adds up: days to the month, peaks within energy, unit-days warm within needed', async () => {
    await write()
    const figures = (await edition())?.figures
    const sum = (of: 'energyKwh' | 'peakKwh') => (figures?.days ?? []).reduce((total, day) => total + day[of], 0)
    expect(sum('energyKwh')).toBeCloseTo(figures?.energyKwh ?? -1, 6)
    expect(sum('peakKwh')).toBeCloseTo(figures?.peakKwh ?? -1, 6)
    expect(figures?.peakKwh).toBeLessThanOrEqual(figures?.energyKwh ?? 0)
    expect(figures?.unitDaysWarm).toBeLessThan(figures?.unitDaysNeeded ?? 0)
    expect(figures?.energyKwh).toBeGreaterThan(10)
    expect(figures?.days).toHaveLength(31)
    // What the cold unit did not get is no saving: less is claimed than the plain difference.
    expect(figures?.savedKwh).toBeLessThan((figures?.baselineEnergyKwh ?? 0) - (figures?.energyKwh ?? 0))
  })
  it('links to its own page, which its owner opens', async () => {
    await write()
    const [mail] = await world.db.selectFrom('message').where('kind', '=', 'digest').selectAll().execute()
    const id = (await edition())?.id
    const { slug } = await world.db
      .selectFrom('organisation')
      .where('id', '=', world.landlord.scope.organisationId)
      .select('slug')
      .executeTakeFirstOrThrow()
    expect(mail?.text).toContain(`/o/${slug}/digests/${id}`)
    expect((await loadDigest(world.owner, id)).mayCorrect).toBe(false)
  })
  it('names the cold unit by its code and nobody by name', async () => {
    await write()
    const [mail] = await world.db.selectFrom('message').where('kind', '=', 'digest').selectAll().execute()
    expect(mail?.text).toContain(COLD)
    const names = await world.db.selectFrom('tenancy').select(['name', 'email']).execute()
    for (const { name, email } of names) {
      expect(mail?.text).not.toContain(name)
      expect(mail?.html).not.toContain(email)
    }
  })
  it('counts a flag that was raised in an earlier month and is still open', async () => {
    await world.db
      .updateTable('flag')
      .set({ opened_at_ms: NOW_MS - 90 * 86_400_000 })
      .execute()
    await write()
    const figures = (await edition())?.figures
    expect(figures?.flagsRaised).toBe(0)
    expect(figures?.flagsOpenAtStart).toBeGreaterThan(0)
    expect((figures?.flagsOpen ?? []).reduce((sum, flag) => sum + flag.count, 0)).toBe(figures?.flagsOpenAtStart)
  })
  it('makes a correction a new edition that says why, and leaves the first as it was', async () => {
    await write()
    const first = await edition()
    expect(await write('A meter was read late')).toEqual({ written: 1, mailed: 1 })
    expect(await edition()).toMatchObject({ edition: 2, reason: 'A meter was read late' })
    expect((await loadDigest(world.landlord, first?.id)).digest).toEqual(first)
    await expect(world.db.updateTable('digest').set({ reason: 'rewritten' }).execute()).rejects.toThrow(/never changes/)
  })
  it('writes nothing for a month in which nothing was evaluated', async () => {
    expect(await writeDigest(world.landlord, { propertyId: world.building.propertyId, month: '2026-03', nowMs: NOW_MS })).toEqual({
      written: 0,
      mailed: 0,
    })
  })
  it("answers not found for another organisation's property", async () => {
    await expect(write(undefined, world.stranger)).rejects.toMatchObject({ code: 'not-found' })
  })
})

describe('correctDigest', () => {
  it('writes the month again for the landlord, with the reason, and points from the old edition to the new', async () => {
    await write()
    const first = await edition()
    const second = await correctDigest(world.landlord, {
      digestId: first?.id,
      input: { reason: 'Two units were missing' },
      nowMs: NOW_MS + 1,
    })
    expect(await loadDigest(world.owner, first?.id)).toMatchObject({ newer: { id: second, edition: 2 } })
    expect((await loadDigest(world.owner, second)).digest.reason).toBe('Two units were missing')
  })
  it('is forbidden to owners, needs a reason, and is not found for another organisation', async () => {
    await write()
    const digestId = (await edition())?.id
    const correct = (db: typeof world.owner, reason: string) => correctDigest(db, { digestId, input: { reason }, nowMs: NOW_MS + 1 })
    await expect(correct(world.owner, 'why not')).rejects.toMatchObject({ code: 'forbidden' })
    await expect(correct(world.landlord, ' ')).rejects.toMatchObject({ code: 'invalid' })
    await expect(correct(world.stranger, 'why not')).rejects.toMatchObject({ code: 'not-found' })
    expect((await edition())?.edition).toBe(1)
  })
})

describe('loadDigests', () => {
  it('shows an owner their own, a tenant none, another organisation nothing', async () => {
    await write()
    expect(await loadDigests(world.owner)).toHaveLength(1)
    await expect(loadDigests(world.tenant)).rejects.toMatchObject({ code: 'forbidden' })
    expect(await loadDigests(world.stranger)).toEqual([])
    await expect(loadDigest(world.stranger, (await edition())?.id)).rejects.toMatchObject({ code: 'not-found' })
  })
})
