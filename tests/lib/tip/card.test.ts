/** The card: one's own day while it lasts, the hazards of one's own heater, and nothing of whoever lives there next. */
import { beforeEach, describe, expect, it } from 'vitest'
import { inTransaction } from '#db/org-db.ts'
import { addPreference } from '#db/queries/preference.ts'
import { addTenancy, changeTenancyEnd, changeTenancyPerson } from '#db/queries/tenancy.ts'
import { british, daily, dial, timeSwitch } from '#lib/demo/installations.ts'
import { at, shower, week } from '#lib/demo/weeks.ts'
import { evaluateUnit } from '#lib/evaluation/evaluate-unit.server.ts'
import { cautionsFor, isPressed } from '#lib/tip/cautions.ts'
import { loadCard } from '#lib/tip/load-card.server.ts'
import { openTenancy } from '#lib/tip/own-tenancy.server.ts'
import { NOW_MS } from '../../support/factories.ts'
import { COLD, makeWorld, personOf, unitOf, WARM, type World } from '../../support/world.ts'

const HOUR_MS = 3_600_000
let world: World
beforeEach(async () => {
  world = await makeWorld()
})
const card = (over: { readonly nowMs?: number; readonly tenancyId?: unknown } = {}) =>
  loadCard(world.tenant, { tenancyId: null, nowMs: NOW_MS, ...over })

describe('loadCard', () => {
  it('shows today while a shower of today is ahead, and tomorrow after the last', async () => {
    const { tenancyId, unitId } = unitOf(world, COLD)
    const evening = [shower(at(19), 1, 3)]
    await inTransaction(world.landlord, (trx) =>
      addPreference(trx, { tenancyId, week: week({ weekdays: evening, weekend: evening }), willing: [], setBy: null, setAtMs: NOW_MS }),
    )
    await evaluateUnit(world.landlord, { unitId, nowMs: NOW_MS })
    // 12:00 in London, then 19:04 with the last of three minutes over.
    expect(await card()).toMatchObject({ isToday: true, day: '2026-12-01' })
    expect(await card({ nowMs: NOW_MS + 7 * HOUR_MS + 4 * 60_000 })).toMatchObject({ isToday: false, day: '2026-12-02' })
  })
  it('says who runs the building', async () => {
    const shown = await card()
    expect(shown.kind === 'open' && shown.landlords).toEqual([{ name: expect.any(String), email: expect.stringContaining('@') }])
  })
  it('shows nothing of the unit to whoever has moved out, and the next tenant’s day to the next alone', async () => {
    const { tenancyId, unitId } = unitOf(world, COLD)
    await inTransaction(world.landlord, async (trx) => {
      await changeTenancyEnd(trx, tenancyId, '2026-12-01')
      const fields = { unitId, personId: null, name: 'Next', email: 'next@tenants.example', fromDay: '2026-12-01', toDay: null }
      const next = await addTenancy(trx, fields, NOW_MS)
      const mornings = [shower(at(5, 15), 1, 4)]
      await addPreference(trx, {
        tenancyId: next,
        week: week({ weekdays: mornings, weekend: mornings }),
        willing: [],
        setBy: null,
        setAtMs: NOW_MS,
      })
    })
    await evaluateUnit(world.landlord, { unitId, nowMs: NOW_MS })
    const shown = await card()
    expect(shown).toEqual({ kind: 'over', unitCode: COLD, propertyName: expect.any(String), toDay: '2026-12-01' })
    expect(JSON.stringify(shown)).not.toContain('05:')
    await expect(card({ tenancyId })).rejects.toMatchObject({ code: 'not-found' })
  })
  it('shows no day before a tenancy begins', async () => {
    const { unitId, tenancyId } = unitOf(world, WARM)
    await inTransaction(world.landlord, async (trx) => {
      await changeTenancyEnd(trx, tenancyId, '2026-12-10')
      await changeTenancyEnd(trx, unitOf(world, COLD).tenancyId, '2026-12-01')
      const personId = personOf(world.tenant)
      await addTenancy(trx, { unitId, personId, name: 'T', email: 't@tenants.example', fromDay: '2026-12-10', toDay: null }, NOW_MS)
    })
    expect(await card()).toMatchObject({ kind: 'open', unitCode: WARM, begins: '2026-12-10', tip: null, strip: null, preference: null })
  })
  it('is forbidden to electricians and owners', async () => {
    await expect(loadCard(world.electrician, { tenancyId: null, nowMs: NOW_MS })).rejects.toMatchObject({ code: 'forbidden' })
    await expect(loadCard(world.owner, { tenancyId: null, nowMs: NOW_MS })).rejects.toMatchObject({ code: 'forbidden' })
  })
})

describe('openTenancy', () => {
  it('opens each of several, by its id, and says the way back to its card', async () => {
    const second = unitOf(world, WARM).tenancyId
    expect((await openTenancy(world.tenant, { tenancyId: null, nowMs: NOW_MS })).cardQuery).toBe('')
    await inTransaction(world.landlord, (trx) => changeTenancyPerson(trx, second, personOf(world.tenant)))
    const home = await openTenancy(world.tenant, { tenancyId: second, nowMs: NOW_MS })
    expect(home.unit.code).toBe(WARM)
    expect(home.cardQuery).toBe(`?tenancy=${second}`)
  })
  it("answers not found for a neighbour's tenancy and for what is no id", async () => {
    await expect(openTenancy(world.tenant, { tenancyId: unitOf(world, WARM).tenancyId, nowMs: NOW_MS })).rejects.toMatchObject({
      code: 'not-found',
    })
    await expect(openTenancy(world.tenant, { tenancyId: 'x', nowMs: NOW_MS })).rejects.toMatchObject({ code: 'not-found' })
  })
})

describe('cautionsFor', () => {
  const kinds = (...given: Parameters<typeof cautionsFor>) => cautionsFor(...given).map((caution) => caution.kind)
  const tank = british(dial(60), 120)
  const hot = { ...tank, load: { ...tank.load, tank: { ...tank.load.tank, setPointC: 60, mixingValveC: null } } }
  const mixed = { ...hot, load: { ...hot.load, tank: { ...hot.load.tank, mixingValveC: 45 } } }

  it('names a timer that may not stop, water that scalds and water that may grow Legionella, each when it is so', () => {
    expect(kinds({ installation: mixed, flags: [] })).toEqual([])
    expect(kinds({ installation: hot, flags: [] })).toEqual(['scald'])
    expect(kinds({ installation: mixed, flags: [{ kind: 'may-never-stop' }, { kind: 'growth-range' }] })).toEqual(['timer', 'growth'])
    expect(kinds({ installation: null, flags: [{ kind: 'misses-recovery' }] })).toEqual([])
  })
  it('gives the shortest published time to a burn at 60 °C (3 s, second degree, a trade page; CPSC 5098 says 6 s)', () => {
    expect(cautionsFor({ installation: hot, flags: [] })[0]?.text).toMatch(/60 °C at the tap and burns skin in 3 s/)
  })
})

describe('isPressed', () => {
  it('is false for what a clock switches', () => {
    expect(isPressed(british(dial(60), 120))).toBe(true)
    expect(isPressed(undefined)).toBe(true)
    expect(isPressed(british(timeSwitch([daily(120, 300)]), 120))).toBe(false)
  })
})
