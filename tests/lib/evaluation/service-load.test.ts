/** The coincident load against a count minute by minute, and the limit against the rule's own arithmetic. */
import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { type LoadRun, highestStep, loadSteps, overLimit, serviceLimitW } from '#lib/evaluation/service-load.ts'
import { overServiceFinding } from '#lib/evaluation/over-service.ts'

const MIN_MS = 60_000
const range = { startsAtMs: 0, endsAtMs: 600 * MIN_MS }
const run = (startMin: number, lengthMin: number, longerMin: number, powerW: number): LoadRun => ({
  startsAtMs: startMin * MIN_MS,
  endsAtMs: (startMin + lengthMin) * MIN_MS,
  longestEndsAtMs: (startMin + lengthMin + longerMin) * MIN_MS,
  powerW,
})
const runs = fc.array(
  fc.tuple(fc.integer({ min: -100, max: 650 }), fc.integer({ min: 1, max: 200 }), fc.nat(60), fc.integer({ min: 500, max: 6_000 })),
  { maxLength: 20 },
)

describe('loadSteps', () => {
  it('agrees with a count of every minute', () => {
    fc.assert(
      fc.property(runs, (tuples) => {
        const list = tuples.map(([start, length, longer, power]) => run(start, length, longer, power))
        const steps = loadSteps(list, { range, baseLoadW: 1_000, ends: 'longest' })
        expect(steps.reduce((sum, step) => sum + step.endsAtMs - step.startsAtMs, 0)).toBe(range.endsAtMs)
        for (let minute = 0; minute < 600; minute += 7) {
          const atMs = minute * MIN_MS
          const counted = list
            .filter((one) => one.startsAtMs <= atMs && atMs < (one.longestEndsAtMs ?? Infinity))
            .reduce((sum, one) => sum + one.powerW, 1_000)
          expect(steps.find((step) => step.startsAtMs <= atMs && atMs < step.endsAtMs)?.loadW).toBeCloseTo(counted, 6)
        }
      }),
      { numRuns: 60 },
    )
  })
  it('counts a run that may never end for a day', () => {
    const endless: LoadRun = { startsAtMs: 0, endsAtMs: 60 * MIN_MS, longestEndsAtMs: null, powerW: 3_000 }
    const steps = loadSteps([endless], { range: { startsAtMs: 0, endsAtMs: 2 * 1_440 * MIN_MS }, baseLoadW: 0, ends: 'longest' })
    expect(steps.map((step) => [step.endsAtMs / MIN_MS, step.loadW])).toEqual([
      [1_440, 3_000],
      [2_880, 0],
    ])
  })
})

describe('overLimit', () => {
  it('joins neighbours and keeps the highest', () => {
    const steps = loadSteps([run(10, 50, 0, 4_000), run(30, 10, 0, 4_000)], { range, baseLoadW: 0, ends: 'longest' })
    expect(highestStep(steps)?.loadW).toBe(8_000)
    expect(overLimit(steps, 3_000)).toEqual([{ startsAtMs: 10 * MIN_MS, endsAtMs: 60 * MIN_MS, loadW: 8_000, runs: 2 }])
    expect(overLimit(steps, 8_000)).toEqual([])
  })
})

const british = { supplyVoltageV: 230, phases: 1, serviceRatingA: 100, baseLoadW: 2_000, ruleProfile: 'gb-bs7671' } as const

describe('serviceLimitW', () => {
  it('is the full rating where devices carry it continuously', () => {
    expect(serviceLimitW(british)).toBe(23_000)
  })
  it('is the rating over 1.25 where a continuous load counts 125 % (NEC 422.13, applied to the service)', () => {
    // √3 · 208 V · 400 A = 144.1 kW; over 1.25 = 115.3 kW.
    const american = { ...british, supplyVoltageV: 208, phases: 3, serviceRatingA: 400, ruleProfile: 'us-nec-2023' } as const
    expect(serviceLimitW(american)).toBeCloseTo(115_286, -1)
  })
})

describe('overServiceFinding', () => {
  const evening = Date.UTC(2026, 11, 4, 18, 30)
  const eight = (count: number): readonly LoadRun[] =>
    Array.from({ length: count }, () => ({
      startsAtMs: evening,
      endsAtMs: evening + 60 * MIN_MS,
      longestEndsAtMs: evening + 66 * MIN_MS,
      powerW: 3_000,
    }))
  const asked = { service: british, zone: 'Europe/London', range: { startsAtMs: evening - 3_600_000, endsAtMs: evening + 7_200_000 } }
  it('names the hour and the load of the evening that passes the limit', () => {
    const finding = overServiceFinding({ ...asked, runs: eight(8) })
    expect(finding?.summary).toBe('26.0 kW against 23.0 kW on Fri 4 Dec 18:30')
    expect(finding?.evidence.lines.find((line) => line.label === 'Over the limit')?.value).toBe('Fri 4 Dec 18:30 to 19:36: up to 26.0 kW')
  })
  it('finds nothing at exactly the limit', () => {
    expect(overServiceFinding({ ...asked, runs: eight(7) })).toBeNull()
  })
  it('says what a service calculation may have counted, and takes nothing off for it (NEC 220.53: 75 %; 220.84, 8 to 10 units: 43 %)', () => {
    const american = { ...british, ruleProfile: 'us-nec-2023' } as const
    const of = (service: typeof british | typeof american) => overServiceFinding({ ...asked, service, runs: eight(8) })
    const counted = (service: typeof british | typeof american) =>
      of(service)
        ?.evidence.lines.filter((line) => /calculation may count|whole dwellings/.test(line.label))
        .map((line) => `${line.value.slice(0, 4)} ${/confirm/.test(line.from)}`)
    expect(counted(american)).toEqual(['75 % false', '43 % true'])
    expect(counted(british)).toEqual(['100  false'])
    expect(of(american)?.summary).toContain('26.0 kW')
  })
})
