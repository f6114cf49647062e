/** The answer beside the form: the same as the night's evaluation, with what it costs on-peak and when it would cost less. */
import { beforeAll, describe, expect, it } from 'vitest'
import { findEvaluation } from '#db/queries/evaluation.ts'
import type { PriceBand } from '#lib/core/tariff/price.ts'
import { at, shower, week } from '#lib/demo/weeks.ts'
import { answersOf, type Heater } from '#lib/preference/answers.ts'
import { daysLabel } from '#lib/preference/form-fields.ts'
import { loadShowers } from '#lib/preference/load-showers.server.ts'
import { setPreference } from '#lib/preference/set-preference.server.ts'
import { NOW_MS } from '../../support/factories.ts'
import { COLD, makeWorld, unitOf, type World } from '../../support/world.ts'

let world: World
let heater: Heater
beforeAll(async () => {
  world = await makeWorld()
  const showers = await loadShowers(world.tenant, { tenancyId: null, mode: null, nowMs: NOW_MS })
  if (!showers.heater) throw new Error('no heater on record')
  heater = showers.heater
})

describe('answersOf', () => {
  it.each([
    ['short', week({ weekdays: [shower(at(6, 45), 1, 8)], weekend: [] })],
    ['ready', week({ weekdays: [shower(at(6, 45), 1, 3)], weekend: [] })],
  ] as const)('says the same as the night’s evaluation of a %s day', async (status, wanted) => {
    await setPreference(world.tenant, { tenancyId: unitOf(world, COLD).tenancyId, input: { week: wanted, willing: [] }, nowMs: NOW_MS + 1 })
    const evaluation = await findEvaluation(world.landlord, unitOf(world, COLD).unitId, '2026-12-07')
    expect(evaluation?.status).toBe(status)
    const [answer] = answersOf(heater, wanted)
    // Monday is the worst day of the five: the tank has stood cold over the weekend.
    const said = status === 'ready' ? 'works at 06:45' : `${evaluation?.shortfallMin} min too short`
    expect(answer).toMatchObject({ label: 'Monday to Friday', bad: status === 'short', words: expect.stringContaining(said) })
  })
  it('joins days that come to the same and tells the others apart', () => {
    const labels = answersOf(heater, week({ weekdays: [shower(at(6, 45), 1, 3)], weekend: [], friday: [shower(at(19), 1, 3)] })).map(
      (one) => one.label,
    )
    expect(labels).toEqual(['Monday to Thursday', 'Friday', 'Saturday and Sunday'])
  })
  it('says what is on-peak, and a time at which it costs notably less and is warm', () => {
    // Dear from 06:00 to 08:00 and nothing else: the run before 07:30 lies in it, hours later none does.
    const band = (fromHour: number, toHour: number, priceMinorPerKwh: number): PriceBand => ({
      startsAtMs: fromHour * 3_600_000,
      endsAtMs: toHour * 3_600_000,
      price: { status: 'priced', priceMinorPerKwh, periodIndex: 0 },
      onPeak: priceMinorPerKwh === 50,
    })
    const tables = [[band(-24, 6, 10), band(6, 8, 50), band(8, 36, 10)]]
    const days = heater.days.map((day) => ({ ...day, table: 0 }))
    const wanted = week({ weekdays: [shower(at(7, 30), 1, 3)], weekend: [] })
    const [answer] = answersOf({ ...heater, tables, days }, wanted)
    expect(answer?.words).toMatch(/Costs about £0\.\d\d a day, £0\.\d\d of it on-peak\. At \d\d:\d\d instead: £0\.\d\d\./)
    const cheap = [[band(-24, 36, 10)]]
    expect(answersOf({ ...heater, tables: cheap, days }, wanted)[0]?.words).toMatch(/none of it on-peak\.$/)
  })
  it('joins days whose cost differs by less than a tenth, and keeps a weekend apart that costs notably less', () => {
    const priced = (priceMinorPerKwh: number): readonly PriceBand[] => [
      {
        startsAtMs: -24 * 3_600_000,
        endsAtMs: 36 * 3_600_000,
        price: { status: 'priced', priceMinorPerKwh, periodIndex: 0 },
        onPeak: false,
      },
    ]
    const labels = (weekendPrice: number) => {
      const days = heater.days.map((day, weekday) => ({ ...day, table: weekday < 5 ? 0 : 1 }))
      const every = [shower(at(7), 1, 3)]
      return answersOf({ ...heater, days, tables: [priced(20), priced(weekendPrice)] }, week({ weekdays: every, weekend: every })).map(
        (one) => one.label,
      )
    }
    expect(labels(19)).toEqual(['Every day'])
    expect(labels(10)).toEqual(['Monday to Friday', 'Saturday and Sunday'])
  })
  it('says nothing of money without a tariff', () => {
    const days = heater.days.map((day) => ({ ...day, table: null }))
    expect(answersOf({ ...heater, days }, week({ weekdays: [shower(at(7), 1, 3)], weekend: [] }))[0]?.words).not.toContain('Costs')
  })
})

describe('daysLabel', () => {
  it.each([
    [[0, 1, 2, 3, 4, 5, 6], 'Every day'],
    [[0, 1, 2, 3, 4], 'Monday to Friday'],
    [[5, 6], 'Saturday and Sunday'],
    [[0, 2, 4], 'Monday, Wednesday and Friday'],
    [[3], 'Thursday'],
  ])('%j is %s', (days, label) => {
    expect(daysLabel(days)).toBe(label)
  })
})
