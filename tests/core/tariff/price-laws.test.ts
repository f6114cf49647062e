/** Laws of prices and costs, whatever the tariff and the calendar. */
import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { instantOf, monthBounds } from '#lib/core/time/civil.ts'
import { costOf } from '#lib/core/tariff/cost.ts'
import { peakIntervals, prepareTariff, priceAt, priceBands } from '#lib/core/tariff/price.ts'
import { tariffIn } from './arbitrary.ts'

describe('priceAt', () => {
  it('answers alike from a prepared tariff and from the tariff itself', () => {
    fc.assert(
      fc.property(
        tariffIn('2026-03'),
        fc.array(fc.integer({ min: -40 * 86_400, max: 40 * 86_400 }), { minLength: 20 }),
        (tariff, offsetsS) => {
          const prepared = prepareTariff(tariff)
          for (const offsetS of offsetsS) {
            const atMs = Date.UTC(2026, 2, 20) + offsetS * 1_000
            expect(priceAt(prepared, atMs)).toEqual(priceAt(tariff, atMs))
          }
        },
      ),
      { numRuns: 30 },
    )
  })
})

describe('priceBands', () => {
  it('tiles a range, and the peaks among them hold no cheaper hour than the rest of their month', () => {
    fc.assert(
      fc.property(tariffIn('2026-10'), (tariff) => {
        const range = monthBounds('2026-10', tariff.zone)
        const bands = priceBands(tariff, range)
        expect(bands[0]?.startsAtMs).toBe(range.startsAtMs)
        expect(bands.at(-1)?.endsAtMs).toBe(range.endsAtMs)
        bands.slice(1).forEach((band, index) => expect(band.startsAtMs).toBe(bands[index]?.endsAtMs))
        if (tariff.versions.length > 1) return
        const peaks = peakIntervals(tariff, range)
        const cheapestPeak = Math.min(...peaks.map((peak) => peak.priceMinorPerKwh))
        for (const band of bands) if (!band.onPeak) expect(band.priceMinorPerKwh).toBeLessThan(cheapestPeak)
      }),
      { numRuns: 60 },
    )
  })
})

describe('costOf', () => {
  it('costs a load as its parts together cost, and a series as its pieces', () => {
    fc.assert(
      fc.property(
        tariffIn('2026-03'),
        fc.integer({ min: 0, max: 2_000 }),
        fc.integer({ min: 1, max: 500 }),
        fc.nat(500),
        (tariff, start, first, second) => {
          const startsAtMs = instantOf('2026-03-28', start, tariff.zone)
          const cutMs = startsAtMs + first * 60_000
          const endsAtMs = cutMs + second * 60_000
          const cost = (from: number, to: number) => {
            const outcome = costOf(tariff, [{ startsAtMs: from, endsAtMs: to, powerW: 4_500 }])
            return outcome.status === 'costed' ? outcome.costMinor : Number.NaN
          }
          expect(cost(startsAtMs, endsAtMs)).toBeCloseTo(cost(startsAtMs, cutMs) + cost(cutMs, endsAtMs), 6)
          const series = costOf(tariff, { startsAtMs, slotMin: first, energyKwh: [(4.5 * first) / 60] })
          expect(series.status === 'costed' && series.costMinor).toBeCloseTo(cost(startsAtMs, cutMs), 6)
        },
      ),
      { numRuns: 80 },
    )
  })
})
