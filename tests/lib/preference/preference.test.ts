/** Showers: the tenant's own, answered at once, and kept out of the audit. */
import { beforeEach, describe, expect, it } from 'vitest'
import { findPreference } from '#db/queries/preference.ts'
import { currentTenancy } from '#db/queries/tenancy.ts'
import { formOf, readWeekForm, weekOf } from '#lib/preference/form-fields.ts'
import { saveShowers } from '#lib/preference/save-showers.server.ts'
import type { Shower } from '#lib/preference/week.ts'
import { setPreference } from '#lib/preference/set-preference.server.ts'
import { startTenancy } from '#lib/tenancy/start-tenancy.server.ts'
import { loadCard } from '#lib/tip/load-card.server.ts'
import { at, shower, week } from '#lib/demo/weeks.ts'
import { NOW_MS } from '../../support/factories.ts'
import { COLD, makeWorld, unitOf, WARM, type World } from '../../support/world.ts'

const SHORT_WEEK = week({ weekdays: [shower(at(6, 45), 1, 3)], weekend: [shower(at(9), 1, 3)] })
const INPUT = { week: SHORT_WEEK, willing: [] }
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
    expect(await loadCard(world.tenant, { tenancyId: null, nowMs: NOW_MS })).toMatchObject({
      kind: 'open',
      unitCode: COLD,
      tip: { short: false, lines: [expect.stringContaining('a shower of 3 minutes')] },
    })
  })
  it("answers not found for a neighbour's tenancy and another organisation's", async () => {
    await expect(set(world.tenant, WARM)).rejects.toMatchObject({ code: 'not-found' })
    await expect(set(world.stranger)).rejects.toMatchObject({ code: 'not-found' })
  })
  it('lets the landlord set any tenancy of theirs', async () => {
    expect((await set(world.landlord, WARM)).days).toHaveLength(8)
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
    const many = week({ weekdays: [shower(at(6, 45), 99, 8)], weekend: [] })
    await expect(set(world.tenant, COLD, { week: many, willing: [] })).rejects.toMatchObject({
      code: 'invalid',
      details: { fields: expect.arrayContaining([expect.objectContaining({ field: 'week.0.0.count' })]) },
    })
  })
  it('refuses two times of one day that overlap, and takes the second from the end of the first on', async () => {
    const two = (second: number) => ({ week: week({ weekdays: [shower(at(6, 45), 2, 8), shower(second)], weekend: [] }), willing: [] })
    // Two showers of 8 minutes with 5 between them end 21 minutes after the first begins.
    await expect(set(world.tenant, COLD, two(at(7, 5)))).rejects.toMatchObject({ code: 'invalid' })
    expect((await set(world.tenant, COLD, two(at(7, 6)))).days).toHaveLength(8)
  })
})

describe('after moving out', () => {
  const handOver = (fromDay: string) =>
    startTenancy(world.landlord, {
      unitId: unitOf(world, COLD).unitId,
      input: { name: 'Next', email: 'next@tenants.example', fromDay },
      nowMs: NOW_MS,
    })

  it('shows the former tenant nothing of the next one, and takes no showers from them', async () => {
    const { unitId, tenancyId } = unitOf(world, COLD)
    await handOver('2026-12-01')
    expect((await currentTenancy(world.landlord, unitId, '2026-12-01'))?.id).not.toBe(tenancyId)
    expect(await loadCard(world.tenant, { tenancyId: null, nowMs: NOW_MS })).toMatchObject({ kind: 'over' })
    await expect(set()).rejects.toMatchObject({ code: 'not-found' })
  })
  it('shows the last evening no tomorrow that belongs to the next tenant', async () => {
    await handOver('2026-12-02')
    expect(await loadCard(world.tenant, { tenancyId: null, nowMs: NOW_MS })).toMatchObject({ day: '2026-12-02', tip: null, strip: null })
  })
})

describe('saveShowers', () => {
  it('keeps what the form does not ask: the flow of a shower head and the hours in which somebody presses', async () => {
    const willing = [{ fromMinuteOfDay: 300, toMinuteOfDay: 480 }]
    const slow: Shower = { ...shower(at(6, 45), 1, 3), flowLPerMin: 5.5, useTemperatureC: 39 }
    await set(world.tenant, COLD, { week: week({ weekdays: [slow], weekend: [slow] }), willing })
    const fields = { mode: 'groups', 'weekdays-time': '07:00', 'weekdays-count': '2', 'weekdays-minutes': '4' }
    const { tenancyId } = unitOf(world, COLD)
    await saveShowers(world.tenant, { tenancyId, fields, nowMs: NOW_MS + 2 })
    const kept = await findPreference(world.landlord, tenancyId)
    expect(kept?.week[0]).toEqual([{ ...slow, readyByMinuteOfDay: 420, count: 2, minutesEach: 4 }])
    expect(kept?.week[6]).toEqual([])
    expect(kept?.willing).toEqual(willing)
  })
  it('refuses what is no time of day instead of dropping the shower', async () => {
    const fields = { mode: 'groups', 'weekdays-time': 'seven', 'weekdays-count': '1', 'weekdays-minutes': '8' }
    await expect(saveShowers(world.tenant, { tenancyId: unitOf(world, COLD).tenancyId, fields, nowMs: NOW_MS })).rejects.toMatchObject({
      code: 'invalid',
      message: expect.stringContaining('Choose a time of day'),
    })
  })
})

describe('formOf and weekOf', () => {
  const fieldsOf = (form: ReturnType<typeof formOf>): Record<string, string> =>
    Object.fromEntries([
      ['mode', form.mode],
      ...form.groups.flatMap(({ name, slots }) =>
        slots.flatMap(({ time, count, minutesEach }, index) => {
          const slot = index === 0 ? name : `${name}-${index + 1}`
          return [
            [`${slot}-time`, time],
            [`${slot}-count`, String(count)],
            [`${slot}-minutes`, String(minutesEach)],
          ]
        }),
      ),
    ])

  it.each([
    ['groups', SHORT_WEEK],
    ['groups', week({ weekdays: [shower(at(6)), shower(at(12)), shower(at(18))], weekend: [shower(at(9), 3, 12)] })],
    ['days', week({ weekdays: [shower(at(6, 45))], weekend: [shower(at(9))], friday: [shower(at(19, 30), 2)] })],
    ['days', SHORT_WEEK.map((showers, day) => (day === 6 ? [] : showers))],
  ] as const)('show a week as %s and give back the very same week', (mode, given) => {
    const form = formOf(given.map((showers) => [...showers]))
    expect(form.mode).toBe(mode)
    expect(weekOf(readWeekForm(fieldsOf(form)), null)).toEqual(given)
  })
  it('put times of a day in order', () => {
    const fields = { mode: 'days', 'sunday-time': '18:00', 'sunday-count': '1', 'sunday-minutes': '8', 'sunday-2-time': '7:30' }
    expect(weekOf(readWeekForm(fields), null)[6]?.map((one) => one.readyByMinuteOfDay)).toEqual([450, 1080])
  })
})
