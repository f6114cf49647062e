/** Hot or cold: one word a day, the last one counts, about days of one's own tenancy that have begun. */
import { beforeEach, describe, expect, it } from 'vitest'
import { inTransaction } from '#db/org-db.ts'
import { countFeedback, findFeedback } from '#db/queries/feedback.ts'
import { changeTenancyEnd } from '#db/queries/tenancy.ts'
import { giveFeedback } from '#lib/feedback/give-feedback.server.ts'
import { NOW_MS } from '../../support/factories.ts'
import { COLD, makeWorld, unitOf, WARM, type World } from '../../support/world.ts'

let world: World
beforeEach(async () => {
  world = await makeWorld()
})
const TODAY = '2026-12-01'
const say = (verdict: string, { db = world.tenant, code = COLD, day = TODAY } = {}) =>
  giveFeedback(db, { tenancyId: unitOf(world, code).tenancyId, input: { day, verdict }, nowMs: NOW_MS })
const said = (day = TODAY) => findFeedback(world.landlord, unitOf(world, COLD).tenancyId, day)

describe('giveFeedback', () => {
  it('keeps one word a day, the last', async () => {
    await say('hot')
    await say('cold')
    expect(await said()).toBe('cold')
    const days = { fromDay: TODAY, toDay: '2026-12-02' }
    expect(await countFeedback(world.landlord, world.building.propertyId, days)).toEqual({ hot: 0, cold: 1 })
  })
  it('refuses a day that has not begun at the property', async () => {
    await expect(say('hot', { day: '2026-12-02' })).rejects.toMatchObject({ code: 'invalid' })
    expect(await said('2026-12-02')).toBeNull()
  })
  it('answers not found for a day outside the tenancy', async () => {
    await inTransaction(world.landlord, (trx) => changeTenancyEnd(trx, unitOf(world, COLD).tenancyId, TODAY))
    await expect(say('hot')).rejects.toMatchObject({ code: 'not-found' })
    await expect(say('hot', { day: '2025-12-31' })).rejects.toMatchObject({ code: 'not-found' })
  })
  it("answers not found for a neighbour's tenancy and another organisation's", async () => {
    await expect(say('hot', { code: WARM })).rejects.toMatchObject({ code: 'not-found' })
    await expect(say('hot', { db: world.stranger })).rejects.toMatchObject({ code: 'not-found' })
    await expect(say('hot', { db: world.electrician })).rejects.toMatchObject({ code: 'not-found' })
  })
  it('refuses any other word', async () => {
    await expect(say('lukewarm')).rejects.toMatchObject({ code: 'invalid' })
  })
})
