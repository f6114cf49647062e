/** Charges of a year against those asserted by a public optimiser's own tests; the sources stand in the fixture. */
import { describe, expect, it } from 'vitest'
import { billYear } from '#lib/core/tariff/bill.ts'
import type { Bill, BillLine } from '#lib/core/tariff/types.ts'
import { type AnnualCase, caseBook, exactMajor, kwhOf, loadOf, readCases, readRecord, readValues, tariffOf, yearBounds } from './cases.ts'

const annual = readCases<AnnualCase>('annual-charges.json')
const { asked, caseOf } = caseBook(annual)
/** Their calendar knows no clock change. */
const ZONE = 'UTC'

const sumOf = (bills: readonly Bill[], ...kinds: readonly BillLine['kind'][]) =>
  bills.reduce((sum, bill) => sum + exactMajor(bill, ...kinds), 0)

describe('billYear', () => {
  it('bills 24,000 kWh of a midrise building under RS-1 as 2,342.88 of energy (reopt01)', () => {
    const { record, year, load, expected } = caseOf('reopt01')
    const shares = readValues(load.file)
    const series = loadOf(yearBounds(year, ZONE), 60, (hour) => ((shares[hour] ?? Number.NaN) / 1e6) * load.annualKwh)
    const { months } = billYear(tariffOf(ZONE, readRecord(record)), year, series)
    expect(sumOf(months, 'energy')).toBeCloseTo(expected.energyMajor, 2)
    expect(sumOf(months)).toBeCloseTo(expected.totalMajor, 2)
    months.forEach((bill, month) => {
      expect(exactMajor(bill, 'energy')).toBeCloseTo(expected.monthlyEnergyMajor[month] ?? Number.NaN, 4)
      expect(kwhOf(bill)).toBeCloseTo(expected.monthlyKwh[month] ?? Number.NaN, 3)
    })
  })
  it('bills 35 % of January’s peak through the year as 5,302.50 of demand (reopt02)', () => {
    const { rate, year, load, expected } = caseOf('reopt02')
    const except = load.exceptKw
    const series = loadOf(yearBounds(year, ZONE), 60, (hour) => except[String(hour)] ?? load.baseKw)
    const { months } = billYear(tariffOf(ZONE, rate), year, series)
    expect(sumOf(months, 'flat-demand')).toBeCloseTo(expected.flatDemandMajor, 6)
    expect(months.map((bill) => bill.lines.find((line) => line.kind === 'flat-demand')?.quantity)).toEqual(
      expected.billedKw.map((kw) => expect.closeTo(kw, 9)),
    )
    // The readings start with the year, so what earlier months would bill is said to be unknown; December knows all it needs.
    expect(months[0]?.notes).toHaveLength(1)
    expect(months[11]?.notes).toEqual([])
  })
  it('bills a flat 114 kW above 50 kW as 9,238.36 of period demand (reopt06)', () => {
    const { rate, year, load, expected } = caseOf('reopt06')
    const series = loadOf(yearBounds(year, ZONE), 60, () => load.annualKwh / 8_760)
    const { months } = billYear(tariffOf(ZONE, rate), year, series)
    expect(sumOf(months, 'period-demand')).toBeCloseTo(expected.periodDemandMajor, 6)
    expect(sumOf(months, 'energy')).toBeCloseTo(expected.energyMajor, 6)
    expect(sumOf(months)).toBeCloseTo(expected.totalMajor, 6)
  })
  it('bills a blended rate as 1,000 and 136.99, and named hours of the system’s peak as 15 (reopt07)', () => {
    const { rate, year, load, expected, coincident } = caseOf('reopt07')
    const flat = (annualKwh: number) => loadOf(yearBounds(year, ZONE), 60, () => annualKwh / 8_760)
    const { months } = billYear(tariffOf(ZONE, rate), year, flat(load.annualKwh))
    expect(sumOf(months, 'energy')).toBeCloseTo(expected.energyMajor, 6)
    expect(sumOf(months, 'flat-demand')).toBeCloseTo(expected.flatDemandMajor, 2)

    const base = tariffOf(ZONE, rate)
    const hourOf = (fromOne: number) => {
      const startsAtMs = yearBounds(year, ZONE).startsAtMs + (fromOne - 1) * 3_600_000
      return { startsAtMs, endsAtMs: startsAtMs + 3_600_000 }
    }
    const coincidentDemand = coincident.hoursFromOne.map((hours, group) => ({
      priceMinorPerKw: (coincident.priceMajorPerKw[group] ?? Number.NaN) * 100,
      hours: hours.map(hourOf),
    }))
    const named = { ...base, versions: base.versions.map((version) => ({ ...version, coincidentDemand })) }
    const bills = billYear(named, year, flat(coincident.annualKwh)).months
    expect(sumOf(bills, 'coincident-demand')).toBeCloseTo(coincident.expectedMajor, 9)
    expect(bills.filter((bill) => bill.lines.some((line) => line.kind === 'coincident-demand'))).toHaveLength(2)
  })
})

describe('the annual charges', () => {
  it('are all in the fixture and have all been billed above', () => {
    const known = ['reopt01', 'reopt02', 'reopt06', 'reopt07']
    expect(annual.map((one) => one.id)).toEqual(known)
    expect([...asked]).toEqual(known)
  })
})
