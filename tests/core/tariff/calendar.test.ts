/** Bills over clock changes, leap days, half-hour zones, southern seasons and changes of rate, to the cent; the sums stand in the fixture. */
import { describe, expect, it } from 'vitest'
import { instantOf, monthBounds } from '#lib/core/time/civil.ts'
import { billMonth, billYear } from '#lib/core/tariff/bill.ts'
import type { Bill, LoadSeries } from '#lib/core/tariff/types.ts'
import {
  caseBook,
  type CalendarCase,
  exactMajor,
  type ExpectedBill,
  kwhOf,
  loadOf,
  readCases,
  runsOf,
  tariffOf,
  versionOf,
  yearBounds,
} from './cases.ts'

const calendar = readCases<CalendarCase>('calendar.json')
const { asked, caseOf } = caseBook(calendar)

function expectBill(bill: Bill, expected: ExpectedBill): void {
  expect(bill.totalMinor).toBe(Math.round(expected.totalMajor * 100))
  expect(exactMajor(bill)).toBeCloseTo(expected.totalMajor, 6)
  expect(kwhOf(bill)).toBeCloseTo(expected.energyKwh, 6)
  for (const [period, kwh] of Object.entries(expected.kwhByPeriod)) {
    const lines = bill.lines.filter((line) => line.kind === 'energy' && line.periodIndex === Number(period))
    expect(lines.reduce((sum, line) => sum + line.quantity, 0)).toBeCloseTo(kwh, 6)
  }
  expect(exactMajor(bill, 'energy')).toBeCloseTo(expected.energyMajor, 6)
  expect(exactMajor(bill, 'flat-demand')).toBeCloseTo(expected.flatDemandMajor, 6)
  expect(exactMajor(bill, 'period-demand')).toBeCloseTo(expected.periodDemandMajor, 6)
  expect(exactMajor(bill, 'fixed')).toBeCloseTo(expected.fixedMajor, 6)
  expect(bill.unbilled).toEqual([])
}

/** A constant load with, where the case has it, extra energy in single slots. */
function monthLoad({ zone, month, load }: CalendarCase): LoadSeries {
  const series = loadOf(monthBounds(month, zone), load.slotMin, () => load.kw)
  const extra = load.extraKwh ?? {}
  return { ...series, energyKwh: series.energyKwh.map((kwh, slot) => kwh + (extra[String(slot)] ?? 0)) }
}

describe('billMonth', () => {
  it.each(['own01', 'own03', 'own05', 'own09'])('bills a constant load through a month with its clock change or leap day (%s)', (id) => {
    const one = caseOf(id)
    const bill = billMonth(tariffOf(one.zone, one.rate), one.month, monthLoad(one))
    expectBill(bill, one.expected)
  })

  it('splits an hourly reading that straddles a local price boundary by time: 471.00, not the 453.00 of billing it at its start (own07)', () => {
    const one = caseOf('own07')
    const load = { startsAtMs: Date.parse(one.load.startsAt), slotMin: one.load.slotMin, energyKwh: one.load.kwh }
    const bill = billMonth(tariffOf(one.zone, one.rate), one.month, load)
    expectBill(bill, one.expected)
    expect(bill.totalMinor).not.toBe(one.billedAtStartMajor * 100)
    // Three days of a month: the bill says that it has no more.
    expect(bill.coveredFraction).toBeCloseTo(72 / (31 * 24), 2)
  })

  it('bills each version for its own days: tier bounds, fixed and demand charges by their share (own10)', () => {
    const one = caseOf('own10')
    const at = (day: string) => instantOf(day, 0, one.zone)
    const parts = one.load.parts
    const load = loadOf(monthBounds(one.month, one.zone), one.load.slotMin, (_, startsAtMs) => {
      return parts.find((part) => at(part.from) <= startsAtMs && startsAtMs < at(part.to))?.kw ?? Number.NaN
    })
    const versions = one.versions.map(({ effectiveFrom, rate }) => versionOf(rate, effectiveFrom))
    const bill = billMonth({ zone: one.zone, versions }, one.month, load)
    expect(bill.totalMinor).toBe(Math.round(one.expectedTotalMajor * 100))
    const half = bill.lines.findIndex((line) => line.kind === 'fixed') + 1
    ;[bill.lines.slice(0, half), bill.lines.slice(half)].forEach((lines, index) => {
      const expected = one.expectedParts[index]
      if (!expected) throw new Error('A part is missing.')
      expect(exactMajor({ lines }, 'energy')).toBeCloseTo(expected.energyMajor, 6)
      expect(exactMajor({ lines }, 'fixed')).toBeCloseTo(expected.fixedMajor, 6)
      expect(exactMajor({ lines }, 'flat-demand')).toBeCloseTo(expected.flatDemandMajor, 6)
      expect(exactMajor({ lines })).toBeCloseTo(expected.totalMajor, 6)
    })
    const allBy = (version: (typeof versions)[number] | undefined) =>
      version ? billMonth({ zone: one.zone, versions: [{ ...version, effectiveFrom: '2020-01-01' }] }, one.month, load).totalMinor : 0
    expect(allBy(versions[0])).toBe(one.allOldMajor * 100)
    expect(allBy(versions[1])).toBe(one.allNewMajor * 100)
  })

  it.each(caseOf('own11').variants)('bills four heaters started $name: same energy, other demand (own11)', ({ starts, expected }) => {
    const one = caseOf('own11')
    const { zone, month, load } = one
    const runs = runsOf(month, zone, starts, load.heaterMin)
    const series = loadOf(monthBounds(month, zone), load.slotMin, (_, atMs) => {
      const on = runs.filter((run) => run.startsAtMs <= atMs && atMs < run.endsAtMs).length
      return load.baseKw + on * load.heaterKw
    })
    expectBill(billMonth(tariffOf(zone, one.rate), month, series), expected)
  })

  it.each(caseOf('own13').variants)(
    'bills a burst of 15 minutes by what a meter of $slotMin minutes sees (own13)',
    ({ slotMin, expected }) => {
      const one = caseOf('own13')
      const { zone, month, load } = one
      const slotsADay = 1_440 / load.slotMin
      const fine = loadOf(monthBounds(month, zone), load.slotMin, (slot) => {
        return load.baseKw + (slot % slotsADay === load.burstSlot ? load.burstKw : 0)
      })
      const group = slotMin / load.slotMin
      const energyKwh = Array.from({ length: fine.energyKwh.length / group }, (_, slot) =>
        fine.energyKwh.slice(slot * group, (slot + 1) * group).reduce((sum, kwh) => sum + kwh, 0),
      )
      const tariff = tariffOf(zone, one.rate)
      expectBill(billMonth(tariff, month, { ...fine, slotMin, energyKwh }), expected)
      // The same sums come from the fine meter under a tariff whose demand is a mean over the longer window.
      const windowed = { ...tariff, versions: tariff.versions.map((version) => ({ ...version, demandWindowMin: slotMin })) }
      expectBill(billMonth(windowed, month, fine), expected)
    },
  )

  it.each(caseOf('own14').variants)('cuts tiers in the unit they are stated in: $name (own14)', ({ rate, expected }) => {
    const one = caseOf('own14')
    expectBill(billMonth(tariffOf(one.zone, rate), one.month, monthLoad(one)), expected)
  })
})

describe('billYear', () => {
  it('bills a southern summer at both ends of the calendar year (own08)', () => {
    const one = caseOf('own08')
    const load = loadOf(yearBounds(one.year, one.zone), one.load.slotMin, () => one.load.kw)
    const { months, totalMinor } = billYear(tariffOf(one.zone, one.rate), one.year, load)
    const expected = one.expectedMonths
    expect(expected).toHaveLength(12)
    months.forEach((bill, month) => {
      expect(exactMajor(bill)).toBeCloseTo(expected[month]?.totalMajor ?? Number.NaN, 6)
      expect(kwhOf(bill)).toBeCloseTo(expected[month]?.energyKwh ?? Number.NaN, 6)
    })
    // Months that end in half a cent are rounded line by line.
    expect(Math.abs(totalMinor - one.expectedYear.totalMajor * 100)).toBeLessThanOrEqual(6)
    expect(months.reduce((sum, bill) => sum + exactMajor(bill), 0)).toBeCloseTo(one.expectedYear.totalMajor, 6)
  })
  it('has 8,784 hours in the leap year 2028 (own09)', () => {
    const one = caseOf('own09')
    const load = loadOf(yearBounds(2028, one.zone), one.load.slotMin, () => one.load.kw)
    const { months, totalMinor } = billYear(tariffOf(one.zone, one.rate), 2028, load)
    expect(months.reduce((sum, bill) => sum + kwhOf(bill), 0)).toBeCloseTo(one.wholeYear.energyKwh, 6)
    expect(totalMinor).toBe(one.wholeYear.totalMajor * 100)
  })
})

describe('the calendar cases', () => {
  it('are all in the fixture and have all been billed above', () => {
    const known = ['own01', 'own03', 'own05', 'own07', 'own08', 'own09', 'own10', 'own11', 'own13', 'own14']
    expect(calendar.map((one) => one.id).sort()).toEqual(known)
    expect([...asked].sort()).toEqual(known)
  })
})
