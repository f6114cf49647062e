/** Each rule of a version, broken alone; and every published record passes them all. */
import { describe, expect, it } from 'vitest'
import { checkVersion } from '#lib/core/tariff/check-version.ts'
import type { TariffVersion } from '#lib/core/tariff/types.ts'
import { readRecord, versionOf } from './cases.ts'
import { demand, hours, PLAIN, price } from './plain.ts'

const fieldsOf = (fields: Partial<TariffVersion>) => checkVersion({ ...PLAIN, ...fields }).map((one) => one.field)
const tier = (max: number | null, priceMinorPerKwh = 10) => ({ max, unit: 'kWh' as const, priceMinorPerKwh })
const flat = (tiers: ReturnType<typeof demand>, structureByMonth = Array<number>(12).fill(0)) => ({
  tiersByStructure: [tiers],
  structureByMonth,
})
const season = (name: string, startsOn: string) => ({ name, startsOn })
const twoRows = { weekdayGrid: hours(() => 0).slice(0, 2), weekendGrid: hours(() => 0).slice(0, 2) }

describe('checkVersion', () => {
  it.each([
    'pge-e19-2019.urdb.json',
    'psco-rd-2018.urdb.json',
    'fpl-rs1.urdb.json',
    'entergy-lps-tou-2018.urdb.json',
    'psco-spvtou-b-2019.urdb.json',
    'south-central-lp1.urdb.json',
  ])('finds nothing wrong in the published %s', (file) => {
    expect(checkVersion(versionOf(readRecord(file)))).toEqual([])
  })
  it.each([
    ['name', { name: ' ' }],
    ['effectiveFrom', { effectiveFrom: '2026-02-29' }],
    ['effectiveFrom', { effectiveFrom: 'soon' }],
    ['energyPeriods', { energyPeriods: [] }],
    ['periodNames', { periodNames: ['night'] }],
    ['energyPeriods[0]', { energyPeriods: [[], price(1), price(1), price(1)] }],
    ['energyPeriods[0][0].price', { energyPeriods: [price(Number.NaN), price(1), price(1), price(1)] }],
    ['energyPeriods[0][0].max', { energyPeriods: [[tier(100)], price(1)] }],
    ['energyPeriods[0][0].max', { energyPeriods: [[tier(null), tier(null)], price(1)] }],
    ['energyPeriods[0][1].max', { energyPeriods: [[tier(100), tier(100), tier(null)], price(1)] }],
    ['energyPeriods[0]', { energyPeriods: [[tier(100), { ...tier(200), unit: 'kWh daily' as const }, tier(null)], price(1)] }],
    ['weekdayGrid', { energyPeriods: [price(1)] }],
    ['weekdayGrid', { weekdayGrid: hours(() => 0).slice(1) }],
    ['weekdayGrid', { weekdayGrid: hours(() => 0.5) }],
    ['weekendGrid', { weekendGrid: [...hours(() => 0).slice(1), [0, 0]] }],
    ['weekendGrid', { weekendGrid: Array.from({ length: 12 }, () => [0, 0]) }],
    ['seasons[0].startsOn', { seasons: [season('summer', '06-31')], weekdayGrid: [], weekendGrid: [] }],
    ['seasons[1].startsOn', { ...twoRows, seasons: [season('summer', '06-01'), season('winter', '05-01')] }],
    ['seasons[1].name', { ...twoRows, seasons: [season('summer', '06-01'), season('', '10-01')] }],
    ['specialDays[0].day', { specialDays: [{ day: '2026-04-31', dayType: 'weekend' }] }],
    [
      'specialDays[1].day',
      {
        specialDays: [
          { day: '2026-05-01', dayType: 'weekend' },
          { day: '2026-05-01', dayType: 'weekday' },
        ],
      },
    ],
    ['specialDays[0].dayType', { specialDays: [{ day: '2026-05-01', dayType: 'holiday' }] }],
    ['extraDayTypes[0].name', { extraDayTypes: [{ name: 'weekend', energyGrid: hours(() => 0), demandGrid: null }] }],
    ['extraDayTypes[0].energyGrid', { extraDayTypes: [{ name: 'holiday', energyGrid: hours(() => 9), demandGrid: null }] }],
    ['flatDemand.structureByMonth', { flatDemand: flat(demand(1), [0]) }],
    ['flatDemand.structureByMonth', { flatDemand: flat(demand(1), Array<number>(12).fill(1)) }],
    ['flatDemand.tiersByStructure[0][0].price', { flatDemand: flat(demand(Number.NaN)) }],
    ['lookback', { lookback: { fraction: 0.5, months: { kind: 'range' as const, count: 3 } } }],
    [
      'periodDemand.weekdayGrid',
      { periodDemand: { tiersByPeriod: [demand(1)], weekdayGrid: hours(() => 1), weekendGrid: hours(() => 0) } },
    ],
    ['fixed', { fixed: { amountMinor: -1, per: 'month' as const } }],
    ['minimum', { minimum: { amountMinor: Number.NaN, per: 'month' as const } }],
    ['fuelAdjustmentMinorPerKwh', { fuelAdjustmentMinorPerKwh: [1] }],
  ] as readonly (readonly [string, Partial<TariffVersion>])[])('names %s', (field, fields) => {
    expect(fieldsOf(fields)).toContain(field)
  })
  it('finds nothing wrong in a version with seasons, holidays, tiers and a price below zero', () => {
    expect(
      fieldsOf({
        ...twoRows,
        seasons: [season('summer', '02-29'), season('winter', '10-01')],
        energyPeriods: [[tier(100, -2), tier(null)]],
        specialDays: [{ day: '2028-02-29', dayType: 'holiday' }],
        extraDayTypes: [{ name: 'holiday', energyGrid: twoRows.weekdayGrid, demandGrid: null }],
        flatDemand: flat(demand(7)),
      }),
    ).toEqual([])
  })
})
