/** Laws that every bill keeps, whatever the tariff, the load and the calendar. */
import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { monthBounds } from '#lib/core/time/civil.ts'
import { billMonth, billYear } from '#lib/core/tariff/bill.ts'
import type { Bill, LoadSeries, Tariff } from '#lib/core/tariff/types.ts'
import { energyIn } from '#lib/core/tariff/usage.ts'
import { billing, version } from './arbitrary.ts'

const RUNS = { numRuns: 120 }

const dearer = ({ zone: where, versions }: Tariff, more: number): Tariff => ({
  zone: where,
  versions: versions.map((one) => ({
    ...one,
    energyPeriods: one.energyPeriods.map((all) => all.map((tier) => ({ ...tier, priceMinorPerKwh: tier.priceMinorPerKwh + more }))),
    fixed: one.fixed && { ...one.fixed, amountMinor: one.fixed.amountMinor + more },
    minimum: one.minimum && { ...one.minimum, amountMinor: one.minimum.amountMinor + more },
  })),
})
const total = (bill: Bill) => bill.totalMinor

describe('billMonth', () => {
  it('adds up: the total is the sum of its lines, each a whole number within half a unit of quantity times price', () => {
    fc.assert(
      fc.property(billing, ({ of, tariff, load }) => {
        const { lines, totalMinor } = billMonth(tariff, of, load)
        expect(totalMinor).toBe(lines.reduce((sum, line) => sum + line.amountMinor, 0))
        for (const line of lines) {
          expect(Number.isSafeInteger(line.amountMinor)).toBe(true)
          expect(line.exactMinor).toBeCloseTo(line.quantity * line.priceMinorPerUnit, 6)
          // A minimum is topped up from rounded lines and takes their roundings on itself.
          if (line.kind !== 'minimum') expect(Math.abs(line.amountMinor - line.exactMinor)).toBeLessThanOrEqual(0.5 + 1e-6)
        }
      }),
      RUNS,
    )
  })
  it('bills every kilowatt-hour of the month exactly once', () => {
    fc.assert(
      fc.property(billing, ({ of, tariff, load }) => {
        const billedKwh = billMonth(tariff, of, load).lines.reduce((sum, line) => sum + (line.kind === 'energy' ? line.quantity : 0), 0)
        expect(billedKwh).toBeCloseTo(energyIn(load, monthBounds(of, tariff.zone)), 6)
      }),
      RUNS,
    )
  })
  it('never costs less under a dearer tariff', () => {
    fc.assert(
      fc.property(billing, fc.double({ min: 0, max: 9, noNaN: true }), ({ of, tariff, load }, more) => {
        expect(total(billMonth(dearer(tariff, more), of, load))).toBeGreaterThanOrEqual(total(billMonth(tariff, of, load)))
      }),
      RUNS,
    )
  })
  it('never costs less for more energy in every slot, where tiers do not get cheaper and their bounds do not move with the peak', () => {
    fc.assert(
      fc.property(billing, fc.double({ min: 1, max: 2, noNaN: true }), ({ of, tariff, load }, factor) => {
        const steady = {
          ...tariff,
          versions: tariff.versions.map((one) => ({
            ...one,
            // Periods alike in their bounds: the share of a tier then grows with the month’s total only.
            energyPeriods: one.energyPeriods.map((all) =>
              all.map((tier) => ({ ...tier, max: tier.max === null ? null : 100, unit: 'kWh' as const })),
            ),
          })),
        }
        const more = { ...load, energyKwh: load.energyKwh.map((kwh) => kwh * factor) }
        const lines = billMonth(steady, of, load).lines.length
        // Each line may round down where it rounded up before.
        expect(total(billMonth(steady, of, more))).toBeGreaterThanOrEqual(total(billMonth(steady, of, load)) - lines)
      }),
      RUNS,
    )
  })
  it('is at least the minimum, and exactly the minimum when nothing is used', () => {
    fc.assert(
      fc.property(billing, fc.integer({ min: 1, max: 50_000 }), ({ of, tariff, load }, amountMinor) => {
        const one = tariff.versions[0]
        if (!one) return
        const least: Tariff = { ...tariff, versions: [{ ...one, fixed: null, minimum: { amountMinor, per: 'month' } }] }
        expect(total(billMonth(least, of, load))).toBeGreaterThanOrEqual(amountMinor)
        expect(total(billMonth(least, of, { ...load, energyKwh: [] }))).toBe(amountMinor)
      }),
      RUNS,
    )
  })
  it('does not depend on how a constant load is metered, as long as slots are no longer than the demand window', () => {
    fc.assert(
      fc.property(billing, ({ of, tariff }) => {
        const hourly = { ...tariff, versions: tariff.versions.map((one) => ({ ...one, demandWindowMin: 60 as const })) }
        const { startsAtMs, endsAtMs } = monthBounds(of, tariff.zone)
        const metered = (minutes: number): LoadSeries => ({
          startsAtMs,
          slotMin: minutes,
          energyKwh: Array.from({ length: (endsAtMs - startsAtMs) / (minutes * 60_000) }, () => (2 * minutes) / 60),
        })
        const [coarse, fine] = [billMonth(hourly, of, metered(30)), billMonth(hourly, of, metered(5))]
        expect(fine.lines.map((line) => [line.kind, line.periodIndex])).toEqual(coarse.lines.map((line) => [line.kind, line.periodIndex]))
        fine.lines.forEach((line, index) => expect(line.exactMinor).toBeCloseTo(coarse.lines[index]?.exactMinor ?? Number.NaN, 4))
      }),
      { numRuns: 40 },
    )
  })
})

describe('billYear', () => {
  it('tops a year up to its minimum once, in whole units', () => {
    fc.assert(
      fc.property(version, fc.integer({ min: 1, max: 900_000 }), (one, amountMinor) => {
        const tariff: Tariff = { zone: 'Europe/London', versions: [{ ...one, minimum: { amountMinor, per: 'year' } }] }
        const { startsAtMs } = monthBounds('2026-01', 'Europe/London')
        const year = billYear(tariff, 2026, { startsAtMs, slotMin: 60, energyKwh: Array.from({ length: 8_760 }, () => 0.4) })
        const months = year.months.reduce((sum, bill) => sum + bill.totalMinor, 0)
        expect(year.totalMinor).toBe(Math.max(months, amountMinor))
        expect(year.months).toHaveLength(12)
      }),
      { numRuns: 20 },
    )
  })
})
