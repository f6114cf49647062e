/** A month's figures, words and drawings: parts that add up in months of every length, and no saving without its range. */
import { beforeEach, describe, expect, it } from 'vitest'
import { type DigestFigures, findLastEdition } from '#db/queries/digest.ts'
import type { Evaluation } from '#db/queries/evaluation.ts'
import { listFlagsTouched } from '#db/queries/flag.ts'
import { monthBounds } from '#lib/core/time/civil.ts'
import { energyChartSvg, THEME, unitsChartSvg } from '#lib/digest/chart.ts'
import { type MonthCase, monthFigures } from '#lib/digest/figures.ts'
import { digestView } from '#lib/digest/view.ts'
import { writeDigest } from '#lib/digest/write-digest.server.ts'
import { NOW_MS } from '../../support/factories.ts'
import { makeWorld, type World } from '../../support/world.ts'

let world: World
beforeEach(async () => {
  world = await makeWorld()
})
const write = () => writeDigest(world.landlord, { propertyId: world.building.propertyId, month: '2026-12', nowMs: NOW_MS })
const edition = () => findLastEdition(world.landlord, world.building.propertyId, '2026-12')

describe('monthFigures', () => {
  it.each([
    ['2028-02', 29, 696],
    ['2026-03', 31, 743],
    ['2026-10', 31, 745],
    ['2026-11', 30, 720],
  ])('covers %s: %d days, %d hours in London', (month, days, hours) => {
    const interval = monthBounds(month, 'Europe/London')
    expect((interval.endsAtMs - interval.startsAtMs) / 3_600_000).toBe(hours)
    const figures = monthFigures({
      month,
      interval,
      zone: 'Europe/London',
      propertyName: 'P',
      currency: 'GBP',
      codes: new Map(),
      evaluations: [],
      flags: [],
      visits: [],
      feedback: { hot: 0, cold: 0 },
    })
    expect(figures.days).toHaveLength(days)
    expect(figures.costMinor).toBeNull()
    expect(digestView(figures, month).readiness).toBe('No unit needed hot water this month.')
  })
})

describe('monthFigures over flags and visits', () => {
  // March 2026 in London loses an hour on the 29th: it ends at 23:00 UTC on the 31st.
  const interval = monthBounds('2026-03', 'Europe/London')
  const { startsAtMs, endsAtMs } = interval
  const flag = (openedAtMs: number, closedAtMs: number | null): MonthCase['flags'][number] => ({
    severity: 'cold',
    openedAtMs,
    closed: closedAtMs === null ? null : { atMs: closedAtMs, because: 'computation', byPersonId: null, note: null, untilDay: null },
  })
  const figures = (over: Partial<MonthCase>) =>
    monthFigures({
      month: '2026-03',
      interval,
      zone: 'Europe/London',
      propertyName: 'P',
      currency: 'GBP',
      codes: new Map(),
      evaluations: [],
      flags: [],
      visits: [],
      feedback: { hot: 0, cold: 0 },
      ...over,
    })

  it('keeps the cost of a month in which one unit-day has no price, and says so', () => {
    const evaluation = (costMinor: number | null): Evaluation =>
      ({
        status: 'ready',
        day: '2026-03-02',
        unitId: 'a',
        energyInKwh: 5,
        peakKwh: 1,
        costMinor,
        baselineEnergyKwh: 6,
        baselineCostMinor: costMinor === null ? null : 150,
        shortfallMin: 0,
      }) as unknown as Evaluation
    const month = figures({ evaluations: [evaluation(100), evaluation(null), evaluation(120)] })
    // The figures' own sums: 100 + 120, 2 × 150; savings in money for two of the three, in energy for all.
    expect(month).toMatchObject({ costMinor: 220, baselineCostMinor: 300, energyKwh: 15, savedKwh: 3, savedMinor: 80, pricedSavedKwh: 2 })
    expect(digestView(month, '2026-03').paragraphs).toContain(
      'No price was in force for 1 of 3 unit-days: their energy is in the figures, their cost is not.',
    )
    expect(figures({ evaluations: [evaluation(null)] }).costMinor).toBeNull()
  })
  it('balances flags: open at the start + raised − closed = open at the end, both ends half-open', () => {
    const month = figures({
      flags: [
        flag(startsAtMs - 1, null),
        flag(startsAtMs - 1, startsAtMs),
        flag(startsAtMs - 1, endsAtMs),
        flag(startsAtMs, null),
        flag(startsAtMs, endsAtMs - 1),
        flag(endsAtMs - 1, endsAtMs + 1),
      ],
    })
    expect(month).toMatchObject({ flagsOpenAtStart: 3, flagsRaised: 3, flagsClosed: 2 })
    expect(month.flagsOpen.reduce((sum, { count }) => sum + count, 0)).toBe(4)
  })
  it('counts every flag of the month in the database once, whenever it was opened', async () => {
    await write()
    const december = (await edition())?.figures
    const open = (december?.flagsOpen ?? []).reduce((sum, { count }) => sum + count, 0)
    expect((december?.flagsOpenAtStart ?? 0) + (december?.flagsRaised ?? 0) - (december?.flagsClosed ?? 0)).toBe(open)
    // A month on, nothing new has been raised, and what is open is still accounted for.
    const { startsAtMs: fromMs, endsAtMs: toMs } = monthBounds('2027-01', 'Europe/London')
    const january = await listFlagsTouched(world.landlord, world.building.propertyId, fromMs, toMs)
    expect(january).toHaveLength(open)
  })
  it('lists visits by unit and local day, in order, and only those signed off within the month', () => {
    const month = figures({
      visits: [
        { state: 'done', doneAtMs: endsAtMs - 1, unitCode: 'B', dueDay: null },
        { state: 'done', doneAtMs: endsAtMs, unitCode: 'C', dueDay: null },
        { state: 'planned', doneAtMs: null, unitCode: 'E', dueDay: null },
        { state: 'planned', doneAtMs: null, unitCode: 'D', dueDay: '2026-04-03' },
        { state: 'cancelled', doneAtMs: null, unitCode: 'F', dueDay: '2026-04-03' },
      ],
    })
    expect(month.signedOff).toEqual([{ code: 'B', day: '2026-03-31' }])
    expect(month.planned).toEqual([
      { code: 'D', day: '2026-04-03' },
      { code: 'E', day: null },
    ])
  })
})

describe('digestView', () => {
  it('gives every saving a range, in energy and in money', async () => {
    await write()
    const figures = (await edition())?.figures
    if (!figures) throw new Error('no digest')
    const every = { savedKwh: 100, pricedSavedKwh: 100, baselineEnergyKwh: 1_000, pricedBaselineKwh: 1_000 }
    const saved: DigestFigures = { ...figures, ...every, savedMinor: 3_000, baselineCostMinor: 20_000 }
    // 100 kWh at the baseline's mean 20p is £20 of the £30; losses between none and twice move the money by £20 either way.
    expect(digestView(saved, '2026-12').saving).toContain(
      '100.0 kWh less (from 0 to 200 kWh); at the tariff £30.00 less (from £10.00 less to £50.00 less)',
    )
    expect(digestView({ ...saved, savedKwh: -5, savedMinor: 200 }, '2026-12').saving).toContain('no energy saved (5.0 kWh more)')
  })
  it('claims nothing that an older edition did not account for', async () => {
    await write()
    const figures = (await edition())?.figures
    if (!figures) throw new Error('no digest')
    const old = { ...figures }
    for (const later of ['savedKwh', 'savedMinor', 'flagsOpenAtStart', 'planned', 'signedOff'] as const) delete old[later]
    const view = digestView(old, '2026-12')
    expect(view.saving).toBe('This edition states no saving.')
    expect(view.lines.map(([label]) => label)).not.toContain('Flags open at the start')
    expect(view.paragraphs.join(' ')).not.toMatch(/undefined|NaN/)
  })
})

describe('unitsChartSvg', () => {
  it('adds up to the unit-days of the page', async () => {
    await write()
    const figures = (await edition())?.figures
    if (!figures) throw new Error('no digest')
    const sum = (of: 'neededUnits' | 'warmUnits') => figures.days.reduce((total, day) => total + (day[of] ?? 0), 0)
    expect(sum('neededUnits')).toBe(figures.unitDaysNeeded)
    expect(sum('warmUnits')).toBe(figures.unitDaysWarm)
    expect(unitsChartSvg(figures, THEME)).toContain(
      `aria-label="Units warm on time by day: ${figures.unitDaysWarm} of ${figures.unitDaysNeeded}`,
    )
  })
})

describe('energyChartSvg', () => {
  it('says in words what it draws', async () => {
    await write()
    const figures = (await edition())?.figures
    expect(figures && energyChartSvg(figures, THEME)).toMatch(/role="img" aria-label="Energy by day: [\d.]+ kWh in all/)
  })
})
