/** A unit's model: the same as the night's evaluation, and what a change would make of it, by law. */
import { beforeAll, describe, expect, it } from 'vitest'
import { listUnitEvaluations } from '#db/queries/evaluation.ts'
import { findProperty } from '#db/queries/property.ts'
import { findUnit } from '#db/queries/unit.ts'
import { dayChart } from '#lib/unit/day-chart.ts'
import { loadUnitModel } from '#lib/unit/load-unit-model.server.ts'
import { answerOf, changed, NO_CHANGE, type UnitModel } from '#lib/unit/model.ts'
import { compare, tryFields } from '#lib/unit/what-if.ts'
import { NOW_MS } from '../../support/factories.ts'
import { COLD, makeWorld, unitOf, type World } from '../../support/world.ts'

let world: World
let model: UnitModel
const load = async (db: World['landlord']) => {
  const unit = (await findUnit(world.landlord, unitOf(world, COLD).unitId))!
  const property = (await findProperty(world.landlord, unit.propertyId))!
  return loadUnitModel(db, { property, unit, nowMs: NOW_MS })
}
beforeAll(async () => {
  world = await makeWorld()
  const loaded = await load(world.landlord)
  if (!loaded) throw new Error('the unit has hardware on record')
  model = loaded
})

describe('answerOf', () => {
  it('says of each day what the night’s evaluation says', async () => {
    const stored = await listUnitEvaluations(world.landlord, unitOf(world, COLD).unitId, model.days[0]!.day, model.days[6]!.day)
    const answer = answerOf(model)
    expect(stored.length).toBeGreaterThan(3)
    for (const evaluation of stored) {
      const index = model.days.findIndex(({ day }) => day === evaluation.day)
      const { readiness, costMinor } = answer.days[index]!
      expect(readiness.status).toBe(evaluation.status)
      // The evaluation looks a day further ahead; what a week repeats is the same.
      expect(Math.max(0, ...readiness.needs.map((need) => need.shortfallMin))).toBeCloseTo(evaluation.shortfallMin, 0)
      expect(Math.abs((costMinor ?? 0) - (evaluation.costMinor ?? 0))).toBeLessThanOrEqual(1)
    }
  })
  it('is forbidden to a tenant', async () => {
    await expect(load(world.tenant)).rejects.toMatchObject({ code: 'forbidden' })
  })
})

describe('changed', () => {
  const shortDays = (one: UnitModel) => answerOf(one).days.filter(({ readiness }) => readiness.status === 'short').length
  it('leaves the model as it is where nothing is tried', () => {
    expect(changed(model, NO_CHANGE)).toEqual(model)
  })
  it('is never short more often with a longer run, a stronger element or a smaller flow', () => {
    const now = shortDays(model)
    expect(now).toBeGreaterThan(0)
    expect(shortDays(changed(model, { ...NO_CHANGE, runMin: 120 }))).toBe(0)
    expect(shortDays(changed(model, { ...NO_CHANGE, elementW: 9_000 }))).toBeLessThanOrEqual(now)
    expect(shortDays(changed(model, { ...NO_CHANGE, flowLPerMin: 4 }))).toBeLessThanOrEqual(now)
  })
  it('takes no more power than before from a lower voltage', () => {
    const power = (one: UnitModel) => answerOf(one).days.flatMap(({ readiness }) => readiness.heating.map((span) => span.powerW))
    expect(Math.max(...power(changed(model, { ...NO_CHANGE, supplyVoltageV: 208 })))).toBeLessThan(Math.max(...power(model)))
  })
})

describe('compare', () => {
  it('shows now beside then in the same words', () => {
    const then = answerOf(changed(model, { ...NO_CHANGE, runMin: 120 }))
    const rows = compare(model, answerOf(model), then, 1)
    expect(rows.find((row) => row.label === 'That day')).toMatchObject({ now: expect.stringContaining('short'), then: 'warm on time' })
    expect(compare(model, answerOf(model), answerOf(model), 1).every((row) => row.now === row.then)).toBe(true)
  })
  it('offers only what is installed to be changed', () => {
    expect(tryFields(model).map((field) => field.name)).toContain('runMin')
    expect(tryFields(model).every((field) => field.now === null || (field.now >= field.min && field.now <= field.max))).toBe(true)
  })
})

describe('dayChart', () => {
  it('draws every line inside its frame and every run in the day', () => {
    const answer = answerOf(model)
    model.days.forEach((day, index) => {
      const chart = dayChart({ ...day, readiness: answer.days[index]!.readiness })
      const numbers = [...chart.outlet.matchAll(/[ML]([\d.]+) ([\d.]+)/g)].map(([, x, y]) => [Number(x), Number(y)] as const)
      expect(numbers).toHaveLength(96)
      for (const [x, y] of numbers) {
        expect(x).toBeGreaterThanOrEqual(44)
        expect(x).toBeLessThanOrEqual(708)
        expect(y).toBeGreaterThanOrEqual(chart.plotTopPx)
        expect(y).toBeLessThanOrEqual(chart.plotBottomPx)
      }
      expect(chart.sentence).toContain('°C')
    })
  })
})
