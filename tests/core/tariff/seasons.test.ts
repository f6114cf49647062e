/** Seasons that begin on any day of the year, by hand, and as rows of months where they begin with one. */
import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { billMonth } from '#lib/core/tariff/bill.ts'
import { peakIntervals, priceAt } from '#lib/core/tariff/price.ts'
import type { Season, Tariff } from '#lib/core/tariff/types.ts'
import { writeUrdb } from '#lib/core/tariff/urdb-export.ts'
import { monthBounds } from '#lib/core/time/civil.ts'
import { exactMajor, kwhOf, loadOf } from './cases.ts'
import { at, PLAIN, tariffWith, zone } from './plain.ts'

const day = (periodOf: (hour: number) => number) => Array.from({ length: 24 }, (_, hour) => periodOf(hour))
const priceOn = (tariff: Tariff, on: string, hour: number) => {
  const outcome = priceAt(tariff, at(on, hour))
  return outcome.status === 'priced' ? outcome.priceMinorPerKwh : outcome.reason
}
/** Summer from 15 June: 30 from noon to 18:00. Winter from 15 September, over the new year: 10. */
const seasons: readonly Season[] = [
  { name: 'summer', startsOn: '06-15' },
  { name: 'winter', startsOn: '09-15' },
]
const grid = [day((hour) => (hour >= 12 && hour < 18 ? 1 : 0)), day(() => 0)]
const tariff = tariffWith({ seasons, weekdayGrid: grid, weekendGrid: grid })

describe('priceAt', () => {
  it('changes the season on its first local day, and back over the new year', () => {
    expect(priceOn(tariff, '2026-06-14', 13)).toBe(10)
    expect(priceOn(tariff, '2026-06-15', 13)).toBe(30)
    expect(priceOn(tariff, '2026-09-14', 17)).toBe(30)
    expect(priceOn(tariff, '2026-09-15', 13)).toBe(10)
    expect(priceOn(tariff, '2027-01-01', 13)).toBe(10)
  })
  it('begins a season of 29 February on 1 March in years without one', () => {
    const leap = tariffWith({
      seasons: [{ name: 'spring', startsOn: '02-29' }, seasons[1]!],
      weekdayGrid: [day(() => 1), day(() => 0)],
      weekendGrid: [day(() => 1), day(() => 0)],
    })
    expect(priceOn(leap, '2028-02-28', 0)).toBe(10)
    expect(priceOn(leap, '2028-02-29', 0)).toBe(30)
    expect(priceOn(leap, '2026-02-28', 23)).toBe(10)
    expect(priceOn(leap, '2026-03-01', 0)).toBe(30)
  })
  it('answers as twelve rows of months do where every season begins with a month', () => {
    const months = fc.uniqueArray(fc.integer({ min: 0, max: 11 }), { minLength: 1, maxLength: 4 })
    fc.assert(
      fc.property(months, fc.integer({ min: 0, max: 365 * 24 - 1 }), (starts, hour) => {
        const ordered = starts.toSorted((one, other) => one - other)
        const rows = ordered.map((_, index) => day(() => index % 4))
        const rowOf = (month: number) =>
          rows[
            ordered.findLastIndex((start) => start <= month) === -1 ? rows.length - 1 : ordered.findLastIndex((start) => start <= month)
          ]!
        const bySeason = tariffWith({
          seasons: ordered.map((month) => ({ name: 's', startsOn: `${String(month + 1).padStart(2, '0')}-01` })),
          weekdayGrid: rows,
          weekendGrid: rows,
        })
        const monthly = Array.from({ length: 12 }, (_, month) => rowOf(month))
        const byMonth = tariffWith({ weekdayGrid: monthly, weekendGrid: monthly })
        const atMs = at('2026-01-01', hour)
        expect(priceAt(bySeason, atMs)).toEqual(priceAt(byMonth, atMs))
        expect(writeUrdb(bySeason.versions[0]!)).toEqual(writeUrdb(byMonth.versions[0]!))
      }),
      { numRuns: 200 },
    )
  })
})

describe('billMonth', () => {
  it('bills June by the winter’s hours until the 14th and the summer’s from the 15th', () => {
    const bill = billMonth(
      tariff,
      '2026-06',
      loadOf(monthBounds('2026-06', zone), 60, () => 1),
    )
    // 16 summer days with 6 dear hours: 96 kWh at 30, the other 624 at 10.
    expect(kwhOf(bill)).toBe(720)
    expect(exactMajor(bill, 'energy') * 100).toBeCloseTo(96 * 30 + 624 * 10, 9)
  })
})

describe('peakIntervals', () => {
  it('takes the peak from the season, so that a winter of one price has none', () => {
    const range = (from: string) => ({ startsAtMs: at(from, 0), endsAtMs: at(from, 24) })
    expect(peakIntervals(tariff, range('2026-06-15'))).toHaveLength(1)
    expect(peakIntervals(tariff, range('2026-06-14'))).toEqual([])
  })
  it('marks the dearer hours of a critical day where all other days have one price', () => {
    const flat = [day(() => 0), day(() => 0)]
    const critical = [day((hour) => (hour >= 16 && hour < 20 ? 3 : 0)), day((hour) => (hour >= 16 && hour < 20 ? 3 : 0))]
    const one = tariffWith({
      seasons,
      weekdayGrid: flat,
      weekendGrid: flat,
      specialDays: [{ day: '2026-07-15', dayType: 'critical' }],
      extraDayTypes: [{ name: 'critical', energyGrid: critical, demandGrid: null }],
    })
    expect(peakIntervals(one, { startsAtMs: at('2026-07-14', 0), endsAtMs: at('2026-07-17', 0) })).toEqual([
      { startsAtMs: at('2026-07-15', 16), endsAtMs: at('2026-07-15', 20), periodIndex: 3, priceMinorPerKwh: 200 },
    ])
  })
})

describe('writeUrdb', () => {
  it('writes seasons as months and names those that begin inside one', () => {
    const { record, notCarried } = writeUrdb({ ...PLAIN, seasons, weekdayGrid: grid, weekendGrid: grid })
    const rows = record.energyweekdayschedule as readonly (readonly number[])[]
    expect(rows.map((row) => row[13])).toEqual([0, 0, 0, 0, 0, 1, 1, 1, 0, 0, 0, 0])
    expect(notCarried.join(' ')).toMatch(/summer, from 06-15.*winter, from 09-15/)
  })
})
