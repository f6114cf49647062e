/** Showers: the tenant's own, answered at once, and kept out of the audit. */
import { beforeEach, describe, expect, it } from 'vitest'
import { currentTenancy } from '#db/queries/tenancy.ts'
import { formOf, weekOf } from '#lib/preference/form-fields.ts'
import { setPreference } from '#lib/preference/set-preference.server.ts'
import { startTenancy } from '#lib/tenancy/start-tenancy.server.ts'
import { loadCard } from '#lib/tip/load-card.server.ts'
import { NOW_MS } from '../../support/factories.ts'
import { COLD, makeWorld, unitOf, WARM, type World } from '../../support/world.ts'

const FORM = {
  weekdays: { time: '06:45', count: 1, minutesEach: 3 },
  evening: { time: '', count: 1, minutesEach: 8 },
  weekend: { time: '09:00', count: 1, minutesEach: 3 },
}
const INPUT = { week: weekOf(FORM), willing: [] }
let world: World
beforeEach(async () => {
  world = await makeWorld()
})
const set = (db = world.tenant, code = COLD, input: unknown = INPUT) =>
  setPreference(db, { tenancyId: unitOf(world, code).tenancyId, input, nowMs: NOW_MS + 1 })

describe('setPreference', () => {
  it('evaluates the unit at once: a shorter shower makes a cold unit warm', async () => {
    const { days } = await set()
    expect(days.filter((day) => day.day > '2026-12-01').every((day) => day.status === 'ready')).toBe(true)
  })
  it('shows on the card', async () => {
    await set()
    const card = await loadCard(world.tenant, NOW_MS)
    expect(card.unitCode).toBe(COLD)
    expect(card.tip?.lines[0]).toContain('a shower of 3 minutes')
  })
  it("answers not found for a neighbour's tenancy and another organisation's", async () => {
    await expect(set(world.tenant, WARM)).rejects.toMatchObject({ code: 'not-found' })
    await expect(set(world.stranger)).rejects.toMatchObject({ code: 'not-found' })
  })
  it('is forbidden to electricians and owners', async () => {
    await expect(set(world.electrician)).rejects.toMatchObject({ code: 'forbidden' })
    await expect(set(world.owner)).rejects.toMatchObject({ code: 'forbidden' })
  })
  it('says that it changed in the audit, and not to what', async () => {
    await set()
    const entry = await world.db.selectFrom('audit_entry').where('subject_kind', '=', 'preference').selectAll().executeTakeFirstOrThrow()
    expect(entry).toMatchObject({ action: 'set', before: null, after: null })
  })
  it('refuses showers outside the limits by field', async () => {
    const week = weekOf({ ...FORM, weekdays: { time: '06:45', count: 99, minutesEach: 8 } })
    await expect(set(world.tenant, COLD, { week, willing: [] })).rejects.toMatchObject({ code: 'invalid' })
  })
})

describe('after moving out', () => {
  it('shows the former tenant nothing of the next one, and takes no showers from them', async () => {
    const { unitId, tenancyId } = unitOf(world, COLD)
    await startTenancy(world.landlord, {
      unitId,
      input: { name: 'Next', email: 'next@tenants.example', fromDay: '2026-12-01' },
      nowMs: NOW_MS,
    })
    expect((await currentTenancy(world.landlord, unitId, '2026-12-01'))?.id).not.toBe(tenancyId)
    await expect(loadCard(world.tenant, NOW_MS)).rejects.toMatchObject({ code: 'not-found' })
    await expect(set()).rejects.toMatchObject({ code: 'not-found' })
  })
  it('shows the last evening no tomorrow that belongs to the next tenant', async () => {
    const { unitId } = unitOf(world, COLD)
    await startTenancy(world.landlord, {
      unitId,
      input: { name: 'Next', email: 'next@tenants.example', fromDay: '2026-12-02' },
      nowMs: NOW_MS,
    })
    expect(await loadCard(world.tenant, NOW_MS)).toMatchObject({ day: '2026-12-02', tip: null, strip: null })
  })
})

describe('weekOf and formOf', () => {
  it('are each other’s inverse for what the form can say', () => {
    expect(formOf(weekOf(FORM))).toEqual({ ...FORM, evening: { time: '', count: 1, minutesEach: 8 } })
  })
})
