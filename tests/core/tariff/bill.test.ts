/** Bills that the worked cases do not reach: lookback by range, demand at edges, parts of months. Sums by hand. */
import { describe, expect, it } from 'vitest'
import { monthBounds } from '#lib/core/time/civil.ts'
import { billMonth, billYear } from '#lib/core/tariff/bill.ts'
import type { LoadSeries } from '#lib/core/tariff/types.ts'
import { exactMajor, kwhOf, loadOf } from './cases.ts'
import { at, demand, hours, PLAIN, price, tariffWith, zone } from './plain.ts'

const steady = (month: string, kw: number, slotMin = 60): LoadSeries => loadOf(monthBounds(month, zone), slotMin, () => kw)

describe('billMonth', () => {
  it('leaves days before the first version unbilled and says so', () => {
    const bill = billMonth(
      tariffWith({ effectiveFrom: '2026-06-21', fixed: { amountMinor: 3_000, per: 'month' } }),
      '2026-06',
      steady('2026-06', 1),
    )
    expect(bill.unbilled).toEqual([
      {
        interval: { startsAtMs: at('2026-06-01', 0), endsAtMs: at('2026-06-21', 0) },
        reason: expect.stringMatching(/2026-06-01 for 20 days/),
      },
    ])
    expect(kwhOf(bill)).toBeCloseTo(10 * 24, 9)
    expect(exactMajor(bill, 'fixed')).toBeCloseTo(10, 9)
  })
  it('bills three versions in one month, each for its days', () => {
    const from = (day: string, amountMinor: number) => ({ ...PLAIN, effectiveFrom: day, fixed: { amountMinor, per: 'day' as const } })
    const tariff = { zone, versions: [from('2026-01-01', 10), from('2026-02-10', 20), from('2026-02-20', 40)] }
    // 9 + 10 + 9 days.
    expect(exactMajor(billMonth(tariff, '2026-02', steady('2026-02', 1)), 'fixed') * 100).toBeCloseTo(9 * 10 + 10 * 20 + 9 * 40, 9)
  })
  it('bills a yearly charge in twelfths and a daily minimum by the days of the month', () => {
    const tariff = tariffWith({ fixed: { amountMinor: 12_000, per: 'year' }, minimum: { amountMinor: 100, per: 'day' } })
    const bill = billMonth(tariff, '2028-02', { startsAtMs: 0, slotMin: 60, energyKwh: [] })
    expect(exactMajor(bill, 'fixed')).toBeCloseTo(10, 9)
    expect(bill.totalMinor).toBe(29 * 100)
    expect(bill.coveredFraction).toBe(0)
  })
  it('counts the mean of an hour, not its highest quarter, where the demand window is an hour', () => {
    const burst = loadOf(monthBounds('2026-06', zone), 15, (slot) => (slot === 9 ? 8 : 0))
    const billed = (demandWindowMin: 15 | 30 | 60) => {
      const tariff = tariffWith({
        demandWindowMin,
        flatDemand: { tiersByStructure: [demand(100)], structureByMonth: Array<number>(12).fill(0) },
      })
      return exactMajor(billMonth(tariff, '2026-06', burst), 'flat-demand')
    }
    expect([billed(15), billed(30), billed(60)]).toEqual([8, 4, 2])
  })
  it('counts a window that straddles the edge of a demand period on both sides', () => {
    // Readings of an hour that start at half past, 6 kW from 15:30 to 16:30 on Monday 1 June 2026; the period starts at 16:00.
    const startsAtMs = at('2026-06-01', 0.5)
    const load = { startsAtMs, slotMin: 60, energyKwh: Array.from({ length: 700 }, (_, slot) => (slot === 15 ? 6 : 1)) }
    const grid = hours((hour) => (hour >= 16 && hour < 20 ? 1 : 0))
    const tariff = tariffWith({
      periodDemand: { tiersByPeriod: [demand(100), demand(200)], weekdayGrid: grid, weekendGrid: hours(() => 0) },
    })
    const lines = billMonth(tariff, '2026-06', load).lines.filter((line) => line.kind === 'period-demand')
    expect(lines.map((line) => [line.periodIndex, line.quantity])).toEqual([
      [0, 6],
      [1, 6],
    ])
  })
  it('looks back as many months as the range says, and no further', () => {
    const flatDemand = { tiersByStructure: [demand(100)], structureByMonth: Array<number>(12).fill(0) }
    const tariff = tariffWith({
      effectiveFrom: '2025-01-01',
      demandWindowMin: 60,
      flatDemand,
      lookback: { fraction: 0.5, months: { kind: 'range', count: 3 } },
    })
    const year = { startsAtMs: monthBounds('2026-01', zone).startsAtMs, endsAtMs: monthBounds('2026-12', zone).endsAtMs }
    const march = monthBounds('2026-03', zone).startsAtMs
    const load = loadOf(year, 60, (_, startsAtMs) => (startsAtMs === march ? 40 : 2))
    const billedKw = billYear(tariff, 2026, load).months.map((bill) => bill.lines.find((line) => line.kind === 'flat-demand')?.quantity)
    expect(billedKw).toEqual([2, 2, 40, 20, 20, 20, 2, 2, 2, 2, 2, 2])
    expect(billMonth(tariff, '2026-02', load).notes).toEqual([expect.stringMatching(/2 months further than the readings, to 2025-11/)])
    expect(billMonth(tariff, '2026-04', load).notes).toEqual([])
  })
  it('bills demand of an own day type by its own grid, or as a weekend where it has none', () => {
    const grid = hours((hour) => (hour >= 16 && hour < 20 ? 1 : 0))
    const periodDemand = { tiersByPeriod: [demand(0), demand(200)], weekdayGrid: grid, weekendGrid: hours(() => 0) }
    // Friday 19 June 2026 holds the month's highest hour, at 17:00.
    const load = loadOf(monthBounds('2026-06', zone), 60, (_, startsAtMs) => (startsAtMs === at('2026-06-19', 17) ? 9 : 1))
    const billedKw = (demandGrid: typeof grid | null) => {
      const tariff = tariffWith({
        periodDemand,
        specialDays: [{ day: '2026-06-19', dayType: 'holiday' }],
        extraDayTypes: [{ name: 'holiday', energyGrid: hours(() => 0), demandGrid }],
      })
      return billMonth(tariff, '2026-06', load).lines.find((line) => line.kind === 'period-demand')?.quantity
    }
    expect(billedKw(null)).toBe(1)
    expect(billedKw(grid)).toBe(9)
  })
  it.each([
    // Fifteen days of a month of thirty, 2 kW all the time (720 kWh) and a peak of 5 kW.
    ['kWh', 200, 100],
    ['kWh daily', 10, 150],
    ['kWh/kW', 100, 250],
    ['kWh/kW daily', 4, 300],
  ] as const)('cuts bounds in %s to the days of a version that begins inside the month', (unit, max, boundKwh) => {
    const tiers = [
      { max, unit, priceMinorPerKwh: 10 },
      { max: null, unit, priceMinorPerKwh: 20 },
    ]
    const load = loadOf(monthBounds('2026-06', zone), 60, (slot) => (slot === 700 ? 5 : 2))
    const bill = billMonth(
      tariffWith({ effectiveFrom: '2026-06-16', energyPeriods: [tiers], weekdayGrid: hours(() => 0) }),
      '2026-06',
      load,
    )
    expect(bill.lines[0]?.quantity).toBeCloseTo(boundKwh, 9)
    expect(kwhOf(bill)).toBeCloseTo(15 * 24 * 2 + 3, 9)
  })
  it('takes readings as long as the window as they are, wherever they start', () => {
    // Hourly readings from half past: two windows on the hour would see 2.5 kW.
    const load = {
      startsAtMs: at('2026-06-01', 0.5),
      slotMin: 60,
      energyKwh: Array.from({ length: 700 }, (_, slot) => (slot === 9 ? 4 : 1)),
    }
    const flatDemand = { tiersByStructure: [demand(100)], structureByMonth: Array<number>(12).fill(0) }
    const bill = billMonth(tariffWith({ demandWindowMin: 60, flatDemand }), '2026-06', load)
    expect(bill.lines.find((line) => line.kind === 'flat-demand')?.quantity).toBe(4)
  })
  it('rounds the half of a minor unit upwards, as decimals and not as binary remainders', () => {
    // 1.005 × 100 is 100.49999999999999 in binary.
    const load = { startsAtMs: at('2026-06-06', 0), slotMin: 60, energyKwh: [1.005] }
    expect(billMonth(tariffWith({ energyPeriods: [price(100)], weekdayGrid: hours(() => 0) }), '2026-06', load).totalMinor).toBe(101)
  })
  it('labels each tier by its bounds and shows what a unit costs', () => {
    const tariff = tariffWith({
      energyPeriods: [
        [
          { max: 300, unit: 'kWh', priceMinorPerKwh: 10 },
          { max: null, unit: 'kWh', priceMinorPerKwh: 15 },
        ],
      ],
      weekdayGrid: hours(() => 0),
    })
    const { lines } = billMonth(tariff, '2026-06', steady('2026-06', 1))
    expect(
      lines.map(({ label, quantity, priceMinorPerUnit, amountMinor }) => ({ label, quantity, priceMinorPerUnit, amountMinor })),
    ).toEqual([
      { label: 'Energy, period 0, up to 300 kWh', quantity: 300, priceMinorPerUnit: 10, amountMinor: 3_000 },
      { label: 'Energy, period 0, above 300 kWh', quantity: 420, priceMinorPerUnit: 15, amountMinor: 6_300 },
    ])
  })
})
