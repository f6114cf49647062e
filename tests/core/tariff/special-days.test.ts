/** Prices on holidays and days of their own kind, at month ends and over midnight. Figures by hand. */
import { describe, expect, it } from 'vitest'
import { peakIntervals, priceAt } from '#lib/core/tariff/price.ts'
import type { Tariff } from '#lib/core/tariff/types.ts'
import { at, hours, tariffWith } from './plain.ts'

const priceOn = (tariff: Tariff, day: string, hour: number) => {
  const outcome = priceAt(tariff, at(day, hour))
  return outcome.status === 'priced' ? outcome.priceMinorPerKwh : outcome.reason
}

describe('priceAt', () => {
  // 1 January 2026 is a Thursday, 4 July 2026 a Saturday, 24 December 2026 a Thursday.
  const tariff = tariffWith({
    specialDays: [
      { day: '2026-01-01', dayType: 'weekend' },
      { day: '2026-07-04', dayType: 'weekday' },
      { day: '2026-12-24', dayType: 'half holiday' },
      { day: '2026-12-23', dayType: 'critical' },
    ],
    extraDayTypes: [
      { name: 'half holiday', energyGrid: hours((hour) => (hour < 12 ? 1 : 2)), demandGrid: null },
      { name: 'critical', energyGrid: hours((hour) => (hour >= 16 && hour < 20 ? 3 : 0)), demandGrid: null },
    ],
  })
  it('bills a holiday as a weekend and a working Saturday as a weekday', () => {
    expect(priceOn(tariff, '2026-01-01', 17)).toBe(10)
    expect(priceOn(tariff, '2026-01-02', 17)).toBe(30)
    expect(priceOn(tariff, '2026-07-04', 17)).toBe(30)
    expect(priceOn(tariff, '2026-07-05', 17)).toBe(10)
  })
  it('bills a day type of its own by its own hours', () => {
    expect(priceOn(tariff, '2026-12-24', 11)).toBe(30)
    expect(priceOn(tariff, '2026-12-24', 13)).toBe(5)
    expect(priceOn(tariff, '2026-12-23', 17)).toBe(200)
  })
  it('leaves the peak of other days what it was when a month has one critical day', () => {
    const peaks = (day: string) => peakIntervals(tariff, { startsAtMs: at(day, 0), endsAtMs: at(day, 24) })
    expect(peaks('2026-12-22')).toEqual([
      { startsAtMs: at('2026-12-22', 16), endsAtMs: at('2026-12-22', 20), periodIndex: 1, priceMinorPerKwh: 30 },
    ])
    expect(peaks('2026-12-23').map((peak) => peak.priceMinorPerKwh)).toEqual([200])
  })
  it('adds the month’s fuel adjustment and changes at midnight of the first', () => {
    const fuel = tariffWith({ fuelAdjustmentMinorPerKwh: [1, 2, 0, 0, 0, 0, 0, 0, 0, 0, 0, 0] })
    expect(priceAt(fuel, at('2026-02-01', 0) - 1)).toMatchObject({ priceMinorPerKwh: 11 })
    expect(priceAt(fuel, at('2026-02-01', 0))).toMatchObject({ priceMinorPerKwh: 12 })
  })
  it('names the day on which there is no version yet', () => {
    expect(priceOn(tariff, '2025-12-31', 23)).toMatch(/2025-12-31/)
  })
})

describe('peakIntervals', () => {
  it('joins a peak over midnight and cuts it to the range asked for', () => {
    const evening = tariffWith({ weekdayGrid: hours((hour) => (hour >= 22 || hour < 2 ? 1 : 0)) })
    // Monday 1 to Tuesday 2 June 2026.
    const range = { startsAtMs: at('2026-06-01', 12), endsAtMs: at('2026-06-02', 1) }
    expect(peakIntervals(evening, range)).toEqual([
      { startsAtMs: at('2026-06-01', 22), endsAtMs: at('2026-06-02', 1), periodIndex: 1, priceMinorPerKwh: 30 },
    ])
  })
})
