/** Heating in minutes of a day against the core's cost at instants, and against a sum done by hand. */
import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { costOf } from '#lib/core/tariff/cost.ts'
import { readUrdb } from '#lib/core/tariff/urdb-import.ts'
import type { Tariff } from '#lib/core/tariff/types.ts'
import { PORT_ALDANE_RATE } from '#lib/demo/rates.ts'
import { dayContext } from '#lib/evaluation/day-context.ts'
import { energyCost } from '#lib/evaluation/energy-cost.ts'

const zone = 'America/Los_Angeles'
const read = readUrdb(PORT_ALDANE_RATE, { currency: 'USD', minorPerMajor: 100, effectiveFrom: '2025-01-01' })
if (read.status !== 'read') throw new Error('The rate of this test was refused.')
const tariff: Tariff = { zone, versions: [read.version] }
const climate = { kind: 'months', inletC: Array.from({ length: 12 }, () => 10) } as const

describe('energyCost', () => {
  it('bills each side of a price boundary at its own price and rounds once', () => {
    const { prices } = dayContext({ zone, climate, tariff }, '2026-12-02')
    // 06:30 to 07:30 at 4 kW: 2 kWh at 12.10 c and 2 kWh at 29.36 c are 82.92 c, 58.72 c of them on-peak.
    expect(energyCost([{ startMin: 390, endMin: 450, powerW: 4_000 }], prices)).toEqual({ costMinor: 83, peakKwh: 2, peakMinor: 59 })
  })
  it('agrees with the instant-by-instant cost, on clock-change days too', () => {
    const days = ['2026-12-02', '2026-12-05', '2026-03-08', '2026-11-01']
    const contexts = days.map((day) => dayContext({ zone, climate, tariff }, day))
    fc.assert(
      fc.property(fc.nat(3), fc.integer({ min: -700, max: 1_300 }), fc.integer({ min: 1, max: 300 }), (index, startMin, lengthMin) => {
        const context = contexts[index]
        if (!context) return
        const startsAtMs = context.startsAtMs + startMin * 60_000
        const slow = costOf(tariff, [{ startsAtMs, endsAtMs: startsAtMs + lengthMin * 60_000, powerW: 3_380 }])
        const fast = energyCost([{ startMin, endMin: startMin + lengthMin, powerW: 3_380 }], context.prices)
        expect(slow.status).toBe('costed')
        if (slow.status !== 'costed' || fast.costMinor === null) throw new Error('One of the two has no price.')
        // Half a cent is the rounding.
        expect(Math.abs(fast.costMinor - slow.costMinor)).toBeLessThanOrEqual(0.5 + 1e-6)
        expect(fast.peakKwh).toBeCloseTo(slow.peakKwh, 6)
      }),
      { numRuns: 60 },
    )
  })
  it('has no cost without a tariff', () => {
    expect(energyCost([{ startMin: 0, endMin: 60, powerW: 1_000 }], null)).toEqual({ costMinor: null, peakKwh: 0, peakMinor: 0 })
  })
  it('prices the first day of a tariff, and nothing that begins before it', () => {
    const { prices } = dayContext(
      { zone, climate, tariff: { zone, versions: [{ ...read.version, effectiveFrom: '2026-12-02' }] } },
      '2026-12-02',
    )
    expect(energyCost([{ startMin: 390, endMin: 450, powerW: 4_000 }], prices).costMinor).toBe(83)
    expect(energyCost([{ startMin: -30, endMin: 30, powerW: 4_000 }], prices).costMinor).toBeNull()
  })
})
