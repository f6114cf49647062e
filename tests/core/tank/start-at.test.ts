/** A start that is tried, and a start that was agreed: both by the model's own laws, over many units. */
import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { servedAt } from '#lib/core/tank/start-at.ts'
import type { UnitDay } from '#lib/core/tank/types.ts'
import { assessReadiness } from '#lib/core/tank/week.ts'
import '../../support/property-seed.ts'

/** Any tank that is sold, any hour, one need or two; pressed. */
const unitDay = fc
  .record({
    volumeL: fc.integer({ min: 80, max: 300 }),
    powerW: fc.constantFrom(2_000, 3_000, 4_500),
    runMin: fc.integer({ min: 40, max: 180 }),
    readyByMin: fc.integer({ min: 360, max: 600 }),
    count: fc.integer({ min: 1, max: 2 }),
    inletC: fc.integer({ min: 5, max: 20 }),
    evening: fc.boolean(),
  })
  .map(({ volumeL, powerW, runMin, readyByMin, count, inletC, evening }): UnitDay => {
    const need = { readyByMin, count, minutesEach: 8, gapMin: 5, flowLPerMin: 8, useTemperatureC: 40 }
    return {
      tank: {
        nominalVolumeL: volumeL,
        actualVolumeL: null,
        heightM: null,
        loss: { kind: 'ua', lossWPerK: 1.2 },
        upperElement: null,
        lowerElement: { ratedPowerW: powerW, ratedVoltageV: 230 },
        shareAboveUpperFraction: 1 / 3,
        setPointC: 60,
        deadBandK: 5,
        ambientC: 18,
        mixingValveC: null,
      },
      supplyVoltageV: 230,
      inletC,
      runs: { kind: 'pressed', guaranteedMin: runMin, expectedMin: runMin * 1.03, longestMin: runMin * 1.06 },
      needs: evening ? [need, { ...need, readyByMin: readyByMin + 660, count: 1 }] : [need],
      willing: [],
      start: { kind: 'periodic' },
    }
  })

describe('servedAt', () => {
  it('serves all at the start-by, and as a rule less when nothing is pressed before the shower is over', () => {
    let ready = 0
    let colder = 0
    fc.assert(
      fc.property(unitDay, (day) => {
        const [outcome] = assessReadiness(day).needs
        if (!outcome?.run || outcome.status !== 'ready') return
        ready++
        const at = (startMin: number) => servedAt([day], { day: 0, need: 0, startMin })
        expect(at(outcome.run.startMin)?.servesAll).toBe(true)
        if (at(outcome.need.readyByMin + 60)?.servesAll === false) colder++
      }),
      { numRuns: 60 },
    )
    expect(ready).toBeGreaterThan(20)
    // Tanks that hold two mornings' water need no run on the day itself; most of these do not.
    expect(colder).toBeGreaterThan(ready / 2)
  })
  it('has no answer where a clock switches, or for a need that is not there', () => {
    const [day] = fc.sample(unitDay, 1) as [UnitDay]
    expect(servedAt([day], { day: 0, need: 5, startMin: 0 })).toBeNull()
    const clocked: UnitDay = { ...day, runs: { kind: 'clocked', onIntervals: [], uncertaintyMin: 0 } }
    expect(servedAt([clocked], { day: 0, need: 0, startMin: 0 })).toBeNull()
  })
})

describe('assessReadiness with an agreed start', () => {
  it('holds it while nobody is colder for it, and falls back to the latest start where it would be', () => {
    let held = 0
    let fellBack = 0
    fc.assert(
      fc.property(unitDay, fc.integer({ min: -400, max: 60 }), (day, awayMin) => {
        const plain = assessReadiness(day)
        const [first] = plain.needs
        if (!first?.run) return
        const agreedMin = first.run.startMin + awayMin
        const agreed = assessReadiness({ ...day, agreedStartMin: day.needs.map((_, index) => (index === 0 ? agreedMin : null)) })
        // A second's rounding of what counts as served (1/60 min), as the model has it.
        expect(agreed.needs[0]?.minutesServed).toBeGreaterThanOrEqual(first.minutesServed - 1 / 60)
        if (agreed.needs[0]?.run?.startMin === agreedMin) held++
        else {
          fellBack++
          expect(agreed.needs[0]?.run?.startMin).toBe(first.run.startMin)
        }
      }),
      { numRuns: 80 },
    )
    expect(held).toBeGreaterThan(10)
    expect(fellBack).toBeGreaterThan(10)
  })
})
