/** Rate records as published, read and priced; calendar cases computed by hand from the record's own figures. */
import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { instantOf, monthBounds } from '#lib/core/time/civil.ts'
import { costOf } from '#lib/core/tariff/cost.ts'
import { peakIntervals, priceAt } from '#lib/core/tariff/price.ts'
import type { Tariff } from '#lib/core/tariff/types.ts'
import { readUrdb } from '#lib/core/tariff/urdb-import.ts'
import e19 from '../../fixtures/tariff/pge-e19-2019.urdb.json' with { type: 'json' }
import noPrice from '../../fixtures/tariff/no-price.urdb.json' with { type: 'json' }

const OPTIONS = { currency: 'USD', minorPerMajor: 100, effectiveFrom: '2019-01-01' }
const ZONE = 'America/Los_Angeles'
const tariffOf = (record: unknown, zone = ZONE): Tariff => {
  const outcome = readUrdb(record, OPTIONS)
  if (outcome.status !== 'read') throw new Error(outcome.problems[0]?.message)
  return { zone, versions: [outcome.version] }
}
const at = (day: string, hour: number, zone = ZONE) => instantOf(day, hour * 60, zone)
const priceOf = (tariff: Tariff, day: string, hour: number) => {
  const outcome = priceAt(tariff, at(day, hour))
  return outcome.status === 'priced' ? outcome.priceMinorPerKwh : null
}

/** Night 0 (00–06) at 0.10, day 1 at 0.25. */
const NIGHT = {
  name: 'night',
  energyratestructure: [[{ rate: 0.1 }], [{ rate: 0.25 }]],
  energyweekdayschedule: Array.from({ length: 12 }, () => Array.from({ length: 24 }, (_, hour) => (hour < 6 ? 0 : 1))),
  energyweekendschedule: Array.from({ length: 12 }, () => Array.from({ length: 24 }, (_, hour) => (hour < 6 ? 0 : 1))),
}

describe('readUrdb', () => {
  it('reads the published E-19 record with its three summer prices and both demand charges', () => {
    const { versions } = tariffOf(e19)
    expect(versions[0]).toMatchObject({ utility: 'Pacific Gas & Electric Co', effectiveFrom: '2019-05-01', fixed: { per: 'day' } })
    expect(versions[0]?.energyPeriods.map((tiers) => tiers[0]?.priceMinorPerKwh)).toEqual(
      [9.593, 11.253, 8.837, 11.883, 16.484].map((value) => expect.closeTo(value, 6)),
    )
    expect(versions[0]?.periodDemand?.tiersByPeriod[3]?.[0]?.priceMinorPerKw).toBeCloseTo(2097, 6)
    expect(versions[0]?.flatDemand?.tiersByStructure[0]?.[0]?.priceMinorPerKw).toBeCloseTo(1953, 6)
  })
  it('refuses a real record that has no price, naming the field', () => {
    const outcome = readUrdb(noPrice, OPTIONS)
    expect(outcome).toMatchObject({ status: 'refused', problems: [{ field: 'energyratestructure[0][0].rate' }] })
  })
  it.each([
    [{ ...NIGHT, energyweekdayschedule: [] }, 'energyweekdayschedule'],
    [{ ...NIGHT, flatdemandstructure: [[{ rate: 3 }]], flatdemandmonths: Array(12).fill(0), flatdemandunit: 'hp' }, 'flatdemandunit'],
    [{ ...NIGHT, coincidentratestructure: [[{ rate: 3 }]] }, 'coincidentratestructure'],
    [{ ...NIGHT, energyratestructure: [[{ rate: 0.1, unit: 'therm' }], [{ rate: 0.2 }]] }, 'energyratestructure[0][0].unit'],
  ])('refuses what it cannot bill with the field named (%#)', (record, field) => {
    const outcome = readUrdb(record, OPTIONS)
    expect(outcome.status === 'refused' ? outcome.problems.map((problem) => problem.field) : []).toContain(field)
  })
  it.each([null, 3, 'x', [], {}, { items: [] }])('refuses %j with a message and no exception', (input) => {
    expect(readUrdb(input, OPTIONS).status).toBe('refused')
  })
})

describe('priceAt', () => {
  it('follows season, hour and weekend of the E-19 record', () => {
    const tariff = tariffOf(e19)
    expect(priceOf(tariff, '2026-07-01', 14)).toBeCloseTo(16.484, 6)
    expect(priceOf(tariff, '2026-07-01', 9)).toBeCloseTo(11.883, 6)
    expect(priceOf(tariff, '2026-07-04', 14)).toBeCloseTo(8.837, 6)
    expect(priceOf(tariff, '2026-12-02', 9)).toBeCloseTo(11.253, 6)
    expect(priceOf(tariff, '2026-12-02', 6)).toBeCloseTo(9.593, 6)
  })
  it('says so when no version is in force', () => {
    expect(priceAt(tariffOf(e19), at('2018-01-01', 1)).status).toBe('no-version')
  })
})

describe('peakIntervals', () => {
  it('is the dearest stretch of each local day and nothing on a day with one price', () => {
    const tariff = tariffOf(e19)
    const [peak, ...more] = peakIntervals(tariff, { startsAtMs: at('2026-07-01', 0), endsAtMs: at('2026-07-02', 0) })
    expect(more).toEqual([])
    expect(peak).toMatchObject({ startsAtMs: at('2026-07-01', 12), endsAtMs: at('2026-07-01', 18) })
    expect(peakIntervals(tariff, { startsAtMs: at('2026-07-04', 0), endsAtMs: at('2026-07-05', 0) })).toEqual([])
  })
})

describe('costOf', () => {
  it('bills 1 kW through New York’s March 2026 as 743 kWh, 185 of them at night: 158.00 of energy', () => {
    // 743 h in the month: 31 × 6 night hours less the one that is missing on 8 March.
    const zone = 'America/New_York'
    const month = monthBounds('2026-03', zone)
    const outcome = costOf(tariffOf(NIGHT, zone), [{ ...month, powerW: 1_000 }])
    expect(outcome).toMatchObject({
      status: 'costed',
      energyKwh: expect.closeTo(743, 6),
      costMinor: expect.closeTo(185 * 10 + 558 * 25, 3),
      peakKwh: expect.closeTo(558, 6),
    })
  })
  it('splits a run at the price boundary', () => {
    const outcome = costOf(tariffOf(NIGHT), [{ startsAtMs: at('2026-12-02', 5.5), endsAtMs: at('2026-12-02', 7), powerW: 2_000 }])
    expect(outcome).toMatchObject({ status: 'costed', costMinor: expect.closeTo(1 * 10 + 2 * 25, 6), peakKwh: expect.closeTo(2, 6) })
  })
  it('never costs less under a dearer tariff', () => {
    fc.assert(
      fc.property(
        fc.integer({ min: 0, max: 1439 }),
        fc.integer({ min: 1, max: 600 }),
        fc.double({ min: 0, max: 1, noNaN: true }),
        (start, minutes, more) => {
          const load = [
            {
              startsAtMs: instantOf('2026-10-25', start, 'Europe/London'),
              endsAtMs: instantOf('2026-10-25', start, 'Europe/London') + minutes * 60_000,
              powerW: 3_000,
            },
          ]
          const dearer = { ...NIGHT, energyratestructure: [[{ rate: 0.1 + more }], [{ rate: 0.25, adj: more }]] }
          const cost = (record: unknown) => {
            const outcome = costOf(tariffOf(record, 'Europe/London'), load)
            return outcome.status === 'costed' ? outcome.costMinor : Number.NaN
          }
          expect(cost(dearer)).toBeGreaterThanOrEqual(cost(NIGHT) - 1e-9)
        },
      ),
      { numRuns: 40 },
    )
  })
})
