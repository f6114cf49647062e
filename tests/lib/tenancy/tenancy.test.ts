/** Tenancies in days, half-open: one ends where the next begins, and the next sees nothing of the last. */
import { beforeEach, describe, expect, it } from 'vitest'
import { currentTenancy, listTenancies } from '#db/queries/tenancy.ts'
import { endTenancy } from '#lib/tenancy/end-tenancy.server.ts'
import { startTenancy } from '#lib/tenancy/start-tenancy.server.ts'
import { NOW_MS } from '../../support/factories.ts'
import { COLD, makeWorld, unitOf, type World } from '../../support/world.ts'

const NEXT = { name: 'Next', email: 'next@tenants.example', fromDay: '2026-12-10' }
let world: World
beforeEach(async () => {
  world = await makeWorld()
})
const start = (input: unknown = NEXT, db = world.landlord) => startTenancy(db, { unitId: unitOf(world, COLD).unitId, input, nowMs: NOW_MS })
const livingOn = async (day: string) => (await currentTenancy(world.landlord, unitOf(world, COLD).unitId, day))?.name ?? null

describe('startTenancy', () => {
  it('hands the unit over on the day itself', async () => {
    await start()
    expect(await livingOn('2026-12-09')).toBe(`Tenant of ${COLD}`)
    expect(await livingOn('2026-12-10')).toBe('Next')
  })
  it('refuses a beginning before the present one’s', async () => {
    await expect(start({ ...NEXT, fromDay: '2025-01-01' })).rejects.toMatchObject({ code: 'invalid' })
    expect(await listTenancies(world.landlord, unitOf(world, COLD).unitId)).toHaveLength(1)
  })
  it('refuses a day that does not exist', async () => {
    await expect(start({ ...NEXT, fromDay: '2026-02-30' })).rejects.toMatchObject({ code: 'invalid' })
  })
  it("answers not found for another organisation's unit, and forbids tenants", async () => {
    await expect(start(NEXT, world.stranger)).rejects.toMatchObject({ code: 'not-found' })
    await expect(start(NEXT, world.tenant)).rejects.toMatchObject({ code: 'forbidden' })
  })
})

describe('endTenancy', () => {
  it('refuses an end after the next one’s beginning, and so does the database', async () => {
    const first = unitOf(world, COLD).tenancyId
    await start()
    await expect(endTenancy(world.landlord, { tenancyId: first, input: { toDay: '2026-12-20' }, nowMs: NOW_MS })).rejects.toMatchObject({
      code: 'invalid',
    })
    await expect(world.db.updateTable('tenancy').set({ to_day: '2026-12-20' }).where('id', '=', first).execute()).rejects.toThrow(/overlap/)
  })
  it('leaves nobody from the day on', async () => {
    await endTenancy(world.landlord, { tenancyId: unitOf(world, COLD).tenancyId, input: { toDay: '2026-12-05' }, nowMs: NOW_MS })
    expect(await livingOn('2026-12-04')).toBe(`Tenant of ${COLD}`)
    expect(await livingOn('2026-12-05')).toBeNull()
  })
  it("answers not found for another organisation's tenancy", async () => {
    await expect(
      endTenancy(world.stranger, { tenancyId: unitOf(world, COLD).tenancyId, input: { toDay: '2026-12-05' }, nowMs: NOW_MS }),
    ).rejects.toMatchObject({ code: 'not-found' })
  })
})
