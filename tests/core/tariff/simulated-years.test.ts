/** Bills of a year against those of public simulation tools, month by month and charge by charge; the sources stand in the fixtures. */
import { describe, expect, it } from 'vitest'
import { monthBounds } from '#lib/core/time/civil.ts'
import { billMonth, billYear } from '#lib/core/tariff/bill.ts'
import {
  caseBook,
  exactMajor,
  kwhOf,
  loadOf,
  readCases,
  readRecord,
  readValues,
  type SimulatedYear,
  tariffOf,
  yearBounds,
} from './cases.ts'

const simulated = readCases<SimulatedYear>('simulated-years.json')
const { asked, caseOf } = caseBook(simulated)

/** The tools know no clock change and a year of 365 days that begins on a Monday: 2018 in UTC. */
const ZONE = 'UTC'
const YEAR = 2018
/** The simulation prints ten digits, of up to 12,000 a month; its loads are carried to a milliwatt. */
const PRINTED_MAJOR = 1e-4
const CENT_MAJOR = 0.01

const CHARGES = [
  ['energyMajor', ['energy', 'fuel']],
  ['flatDemandMajor', ['flat-demand']],
  ['periodDemandMajor', ['period-demand']],
  ['fixedMajor', ['fixed']],
  ['minimumMajor', ['minimum']],
  ['totalMajor', []],
] as const

describe('billYear', () => {
  it.each(simulated)('bills $id as the simulation does, each charge of each month', (one) => {
    caseOf(one.id)
    const record = one.record ? readRecord(one.record) : (one.rate ?? {})
    const tariff = tariffOf(ZONE, record)
    const hourlyKw = readValues(one.load)
    const load = loadOf(yearBounds(YEAR, ZONE), one.slotMin, (slot) => hourlyKw[Math.floor((slot * one.slotMin) / 60)] ?? Number.NaN)
    const { months, totalMinor } = billYear(tariff, YEAR, load)
    const { expected } = one
    let compared = 0
    for (const [charge, kinds] of CHARGES) {
      expected[charge]?.forEach((major, month) => {
        const bill = months[month]
        if (!bill) throw new Error('A month is missing.')
        expect(Math.abs(exactMajor(bill, ...kinds) - major), `${charge} of month ${month + 1}`).toBeLessThan(PRINTED_MAJOR)
        compared++
      })
    }
    expected.energyKwh?.forEach((kwh, month) => expect(months[month] && kwhOf(months[month])).toBeCloseTo(kwh, 3))
    expect(compared).toBeGreaterThanOrEqual(48)
    expect(months.every((bill) => bill.coveredFraction === 1 && bill.unbilled.length === 0)).toBe(true)
    const yearMajor = months.reduce((sum, bill) => sum + exactMajor(bill), 0)
    if (one.annual) expect(Math.abs(yearMajor - one.annual.annualMajor)).toBeLessThanOrEqual(one.annual.toleranceMajor)
    // Half a cent a line is what rounding may move.
    const lines = months.reduce((sum, bill) => sum + bill.lines.length, 0)
    expect(Math.abs(totalMinor / 100 - yearMajor)).toBeLessThanOrEqual((lines * CENT_MAJOR) / 2)
  })
})

describe('billMonth', () => {
  it('agrees with the year’s bill month by month', () => {
    const tariff = tariffOf(ZONE, readRecord('pge-e19-2019.urdb.json'))
    const kw = readValues('commercial-hourly-kw.csv')
    const load = loadOf(yearBounds(YEAR, ZONE), 60, (hour) => kw[hour] ?? Number.NaN)
    const month = monthBounds('2018-07', ZONE)
    const july = loadOf(month, 60, (hour) => kw[hour + (month.startsAtMs - load.startsAtMs) / 3_600_000] ?? Number.NaN)
    expect(billMonth(tariff, '2018-07', july)).toEqual(billYear(tariff, YEAR, load).months[6])
  })
})

describe('the simulated years', () => {
  it('are all in the fixture and have all been billed above', () => {
    const known = ['ssc01', 'ssc03', 'ssc04', 'ssc08', 'urdb01', 'urdb04']
    expect(simulated.map((one) => one.id)).toEqual(known)
    expect([...asked]).toEqual(known)
  })
})
