/** Rate records written again: published ones, and any version a format of weekdays and weekends can hold. */
import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import type { TariffVersion } from '#lib/core/tariff/types.ts'
import { writeUrdb } from '#lib/core/tariff/urdb-export.ts'
import { readUrdb } from '#lib/core/tariff/urdb-import.ts'
import { type Rate, readRecord } from './cases.ts'

const OPTIONS = { currency: 'USD', minorPerMajor: 100, effectiveFrom: '2024-01-01' }
const hours = (period: number) => Array.from({ length: 12 }, () => Array.from({ length: 24 }, () => period))
const BASE: Rate = {
  name: 'base',
  utility: 'Tidewater Light',
  energyratestructure: [[{ max: 500, rate: 0.1 }, { rate: 0.2 }]],
  energyweekdayschedule: hours(0),
  energyweekendschedule: hours(0),
}
const read = (record: unknown, options = OPTIONS) => {
  const outcome = readUrdb(record, options)
  if (outcome.status !== 'read') throw new Error(JSON.stringify(outcome.problems))
  return outcome
}
const RECORDS = [
  'pge-e19-2019.urdb.json',
  'psco-rd-2018.urdb.json',
  'fpl-rs1.urdb.json',
  'entergy-lps-tou-2018.urdb.json',
  'psco-spvtou-b-2019.urdb.json',
  'south-central-lp1.urdb.json',
]

/** What the record says of the bill, its texts and provenance left out. */
const billed = (record: Rate) => ({ ...read(record).version })

describe('writeUrdb', () => {
  it.each(RECORDS)('writes %s so that it is read back unchanged', (file) => {
    const version = billed(readRecord(file))
    const written = writeUrdb(version)
    expect(written.notCarried).toEqual([])
    expect(read(JSON.parse(JSON.stringify(written.record))).version).toEqual(version)
  })
  it('keeps every charge a version can have', () => {
    const thousandths = (least: number) => fc.integer({ min: least, max: 99_999 }).map((value) => value / 1_000)
    const price = thousandths(0)
    // A charge of nothing is no charge, and comes back as none.
    const charge = thousandths(1)
    const grid = fc.array(fc.array(fc.integer({ min: 0, max: 1 }), { minLength: 48, maxLength: 48 }), { minLength: 12, maxLength: 12 })
    const tiers = fc.tuple(price, price, fc.integer({ min: 1, max: 900 }))
    const per = fc.constantFrom('month', 'day', 'year')
    const version: fc.Arbitrary<TariffVersion> = fc.record({
      name: fc.constant('any'),
      utility: fc.constant('any'),
      effectiveFrom: fc.constantFrom('2024-02-29', '2026-06-16'),
      currency: fc.constant('USD'),
      minorPerMajor: fc.constantFrom(1, 100, 1_000),
      energyPeriods: fc.array(tiers, { minLength: 2, maxLength: 2 }).map((all) =>
        all.map(([low, high, max]) => [
          { max, unit: 'kWh daily' as const, priceMinorPerKwh: low },
          { max: null, unit: 'kWh daily' as const, priceMinorPerKwh: high },
        ]),
      ),
      weekdayGrid: grid,
      weekendGrid: grid,
      specialDays: fc.constant([]),
      flatDemand: fc.option(
        fc.tuple(charge, price, fc.integer({ min: 1, max: 900 })).map(([low, high, maxKw]) => ({
          tiersByStructure: [
            [
              { maxKw, priceMinorPerKw: low },
              { maxKw: null, priceMinorPerKw: high },
            ],
          ],
          structureByMonth: Array<number>(12).fill(0),
        })),
      ),
      periodDemand: fc.option(
        fc.tuple(charge, grid).map(([rate, demand]) => ({
          tiersByPeriod: [[{ maxKw: null, priceMinorPerKw: 0 }], [{ maxKw: null, priceMinorPerKw: rate }]],
          weekdayGrid: demand,
          weekendGrid: demand,
        })),
      ),
      demandWindowMin: fc.constantFrom(15, 30, 60),
      fixed: fc.option(fc.record({ amountMinor: charge, per })),
      minimum: fc.option(fc.record({ amountMinor: charge, per })),
      fuelAdjustmentMinorPerKwh: fc.option(fc.array(charge, { minLength: 12, maxLength: 12 })),
    })
    fc.assert(
      fc.property(version, (one) => {
        const { record, notCarried } = writeUrdb(one)
        expect(read(JSON.parse(JSON.stringify(record)), { ...OPTIONS, minorPerMajor: one.minorPerMajor }).version).toEqual(one)
        expect(notCarried.join(' ')).toMatch(/48 steps/)
      }),
      { numRuns: 60 },
    )
  })
  it('names what the format has no place for', () => {
    const version = billed(BASE)
    const { notCarried } = writeUrdb({
      ...version,
      currency: 'EUR',
      specialDays: [{ day: '2026-12-25', dayType: 'holiday' }],
      extraDayTypes: [{ name: 'holiday', energyGrid: hours(0), demandGrid: null }],
      coincidentDemand: [{ priceMinorPerKw: 900, hours: [] }],
    })
    expect(notCarried.join(' ')).toMatch(/EUR.*1 special days.*holiday.*system’s peak/s)
  })
})
