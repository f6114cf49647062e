/** Stored water against published guidance and tables, and by law; nothing here is held against the code's own output. */
import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { assessHygiene } from '#lib/core/hygiene/assess-hygiene.ts'
import { decimalReductionMin } from '#lib/core/hygiene/kill.ts'
import { pasteurisingRun } from '#lib/core/hygiene/pasteurise.ts'
import { HYGIENE_POLICIES } from '#lib/core/hygiene/policies.ts'
import { assessScald, SCALD_LIMIT_C, SCALD_TABLE } from '#lib/core/hygiene/scald.ts'
import type { HygienePolicyId } from '#lib/core/hygiene/types.ts'
import type { TankSpec } from '#lib/core/tank/types.ts'
import { cFromF } from '#lib/core/units.ts'
import { BEYOND_MODEL, KILL_TIMES, POLICIES_PUBLISHED, SCALD_TIMES } from '../../fixtures/hygiene/published-rows.data.ts'
import { installed } from '../../support/installations.ts'

/** What a figure may differ by, and why. */
const TOLERANCE = {
  /** Relative: kill times are published to two digits. */
  killFraction: 0.01,
  /** Relative: heat capacity between 15 and 60 °C varies by 0.3 %, density by 1.6 %. */
  heatFraction: 0.02,
} as const

const used = new Set<unknown>()
const of = <Row>(row: Row): Row => {
  used.add(row)
  return row
}

describe('assessScald', () => {
  it.each(SCALD_TIMES)('shows at $temperatureF °F at most the $seconds s of $source', (row) => {
    const { temperatureF, seconds } = of(row)
    expect(assessScald(cFromF(temperatureF), null).secondsToBurn ?? Infinity).toBeLessThanOrEqual(seconds)
  })
  it('shows the shortest of the times published for a temperature, and no other', () => {
    for (const { temperatureF, seconds } of SCALD_TABLE) {
      const times = SCALD_TIMES.filter((row) => row.temperatureF === temperatureF).map((row) => row.seconds)
      expect(Math.min(...times), `${temperatureF} °F`).toBe(seconds)
    }
  })
  it('never shows a longer time for hotter water', () => {
    fc.assert(
      fc.property(fc.integer({ min: 30, max: 90 }), fc.integer({ min: 0, max: 20 }), (setPointC, moreK) => {
        const seconds = (temperatureC: number) => assessScald(temperatureC, null).secondsToBurn ?? Infinity
        expect(seconds(setPointC + moreK)).toBeLessThanOrEqual(seconds(setPointC))
      }),
    )
  })
  it('counts what reaches the tap: a mixing valve limits it, a valve set too hot does not make it safe', () => {
    expect(assessScald(60, 45)).toMatchObject({ atRisk: false, secondsToBurn: null, atTapC: 45 })
    expect(assessScald(60, 60).atRisk).toBe(true)
    expect(assessScald(SCALD_LIMIT_C, null).atRisk).toBe(false)
    expect(assessScald(SCALD_LIMIT_C + 1, null).atRisk).toBe(true)
  })
})

describe('decimalReductionMin', () => {
  it.each(KILL_TIMES)('is $minutes min at $temperatureC °C ($source)', (row) => {
    const { temperatureC, minutes } = of(row)
    expect(Math.abs((decimalReductionMin(temperatureC) ?? NaN) / minutes - 1)).toBeLessThan(TOLERANCE.killFraction)
  })
  it('says nothing below 50 °C, where growth competes, and at 50 °C no less than was measured', () => {
    const { temperatureC, measuredMin } = of(BEYOND_MODEL)
    expect(decimalReductionMin(temperatureC - 1)).toBeNull()
    expect(decimalReductionMin(temperatureC) ?? 0).toBeGreaterThanOrEqual(measuredMin.least)
  })
})

const SAMPLE_MIN = 15
const dayOf = (temperatureC: number) => Array<number>(96).fill(temperatureC)
/** A day at one temperature with a hot stretch of so many samples from a sample on. */
const hotFor = (samples: number, from = 20, restC = 30, hotC = 60) =>
  dayOf(restC).map((temperatureC, index) => (index >= from && index < from + samples ? hotC : temperatureC))
/** A mixed tank: its coldest water is its hottest. */
const mixed = (day: readonly number[]) => ({ coldestC: day, hottestC: day })
const assess = (days: readonly (readonly number[])[], policy: HygienePolicyId = 'store-60-daily-hour', setPointC = 60) => {
  const finding = assessHygiene({ days: days.map(mixed), sampleMin: SAMPLE_MIN, setPointC, policy })
  if (finding.status !== 'assessed') throw new Error(finding.reason)
  return finding
}

describe('assessHygiene', () => {
  it.each(POLICIES_PUBLISHED)('follows $policy as published: $temperatureC °C for $holdMin min ($source)', (row) => {
    const { policy, temperatureC, holdMin } = of(row)
    expect(HYGIENE_POLICIES[policy]).toMatchObject({ temperatureC, holdMin })
    const needed = holdMin / SAMPLE_MIN + 1
    expect(assess([hotFor(needed, 20, 15, temperatureC)], policy).keepsGuidance).toBe(true)
    expect(assess([hotFor(needed, 20, 15, temperatureC - 1)], policy).keepsGuidance).toBe(false)
    if (holdMin > 0) expect(assess([hotFor(needed - 1, 20, 15, temperatureC)], policy).keepsGuidance).toBe(false)
  })
  it('counts an hour from its first sample to its last: five quarter hours, not four', () => {
    expect(assess([hotFor(4)]).sincePasteurisedH).toBeNull()
    // Samples 20 to 24 are hot; the last of the day is 95: 71 quarter hours later.
    expect(assess([hotFor(5)]).sincePasteurisedH).toBe(17.75)
  })
  it('counts a hold that goes on over midnight, and over the end of the cycle', () => {
    const evening = hotFor(3, 93)
    const morning = hotFor(2, 0)
    expect(assess([evening, morning]).sincePasteurisedH).toBe((94 * SAMPLE_MIN) / 60)
    expect(assess([morning, evening]).daysHeld).toBe(1)
  })
  it('holds a daily rule against every day', () => {
    const week = [...Array.from({ length: 6 }, () => hotFor(5)), dayOf(30)]
    expect(assess(week)).toMatchObject({ daysHeld: 6, dayCount: 7, keepsGuidance: false })
    expect(assess(week).sincePasteurisedH).toBe(17.75 + 24)
  })
  it('does not call water pasteurised for the 49 °C of the guidance against scalds', () => {
    expect(assess([dayOf(49)], 'scald-49', 49)).toMatchObject({ keepsGuidance: true, sincePasteurisedH: null })
  })
  // HSE: 20 to 45 °C, ends included.
  it.each([
    [19.9, 0],
    [20, 24],
    [32, 24],
    [45, 24],
    [45.1, 0],
  ])('counts %d °C for %d h of the growth range', (temperatureC, hours) => {
    expect(assess([dayOf(temperatureC)]).growthRangeHours).toBe(hours)
  })
  it('counts the layers between a cold bottom and a hot top, which pass through the range though neither is in it', () => {
    const layered = (coldC: number, hotC: number) =>
      assessHygiene({ days: [{ coldestC: dayOf(coldC), hottestC: dayOf(hotC) }], sampleMin: SAMPLE_MIN, setPointC: 60, policy: 'store-60' })
    expect(layered(12, 60)).toMatchObject({ growthRangeHours: 0, someWaterHours: 24 })
    expect(layered(12, 19)).toMatchObject({ growthRangeHours: 0, someWaterHours: 0 })
    expect(layered(46, 60)).toMatchObject({ growthRangeHours: 0, someWaterHours: 0 })
  })
  it('is not known without temperatures, and never keeps any guidance then', () => {
    for (const days of [[], [[]], [dayOf(60), []], [dayOf(NaN)]])
      expect(assessHygiene({ days: days.map(mixed), sampleMin: SAMPLE_MIN, setPointC: 60, policy: 'store-60' }).status).toBe('not-known')
    const halfKnown = [{ coldestC: dayOf(60), hottestC: [] }]
    expect(assessHygiene({ days: halfKnown, sampleMin: SAMPLE_MIN, setPointC: 60, policy: 'store-60' }).status).toBe('not-known')
  })
  it('says when the thermostat itself is below the guidance, and never says compliant or safe', () => {
    expect(assess([dayOf(45)], 'store-60', 50).reason).toContain('The thermostat is set to 50 °C')
    for (const policy of Object.keys(HYGIENE_POLICIES) as HygienePolicyId[])
      for (const days of [[dayOf(60)], [dayOf(30)]]) {
        const { reason, sources } = assess(days, policy)
        expect([reason, ...sources].join(' ')).not.toMatch(/complian|\bsafe\b|certif/i)
      }
  })
  it('never gives less growth-range time or a more recent hold for water that is colder above the range', () => {
    const curve = fc.array(fc.integer({ min: 46, max: 70 }), { minLength: 8, maxLength: 96 })
    fc.assert(
      fc.property(curve, fc.integer({ min: 0, max: 40 }), (warm, lessK) => {
        const [before, after] = [assess([warm]), assess([warm.map((temperatureC) => Math.max(20, temperatureC - lessK))])]
        expect(after.growthRangeHours).toBeGreaterThanOrEqual(before.growthRangeHours)
        expect(after.sincePasteurisedH ?? Infinity).toBeGreaterThanOrEqual(before.sincePasteurisedH ?? Infinity)
        if (after.keepsGuidance) expect(before.keepsGuidance).toBe(true)
      }),
    )
  })
})

describe('pasteurisingRun', () => {
  const tankOf = (patch: Partial<TankSpec>): TankSpec => ({ ...installed().load.tank, setPointC: 65, ...patch })
  const run = (patch: Partial<TankSpec> = {}, inletC = 15) => pasteurisingRun({ tank: tankOf(patch), supplyVoltageV: 240, inletC })
  const heated = (patch: Partial<TankSpec> = {}, inletC?: number) => run(patch, inletC).heatedPartMin ?? NaN

  it('takes at least the heat of what it warms at full power and the hour of hold', () => {
    // 170.3 L by 45 K with 4.5 kW is 118 min mixed and without loss (water-property arithmetic); the unheated bottom takes none.
    const wholeMin = (0.9 * 189 * 4.15 * 45) / 4.5 / 60
    const found = heated()
    expect(found).toBeGreaterThan(60 + wholeMin * (10 / 12) * (1 - TOLERANCE.heatFraction))
    expect(found).toBeLessThan(60 + wholeMin * 1.2)
  })
  it('does not do it with a thermostat below 60 °C, or without an element, and says so', () => {
    expect(run({ setPointC: 55 })).toMatchObject({ wholeTankMin: null, heatedPartMin: null })
    expect(run({ setPointC: 55 }).reason).toContain('no run reaches 60 °C')
    expect(run({ lowerElement: null })).toMatchObject({ wholeTankMin: null, heatedPartMin: null })
  })
  it('takes longer for a larger tank, colder water and a weaker element', () => {
    expect(heated({ nominalVolumeL: 250 })).toBeGreaterThan(heated())
    expect(heated({}, 5)).toBeGreaterThan(heated())
    expect(heated({ lowerElement: { ratedPowerW: 3_000, ratedVoltageV: 240 } })).toBeGreaterThan(heated())
  })
  it('never says that the whole tank is done before its heated part', () => {
    const { wholeTankMin } = run()
    expect(wholeTankMin ?? Infinity).toBeGreaterThanOrEqual(heated())
  })
})

describe('the published rows', () => {
  it.each([
    ['scald times', SCALD_TIMES, 19],
    ['kill times', KILL_TIMES, 5],
    ['guidance', POLICIES_PUBLISHED, 3],
    ['beyond the model', [BEYOND_MODEL], 1],
  ] as const)('of %s are all there and all checked', (_name, rows, printed) => {
    expect(rows).toHaveLength(printed)
    expect((rows as readonly unknown[]).filter((row) => !used.has(row))).toEqual([])
  })
})
