/** Parts advice: whatever it names does what it promises by the model, comes from stock, and a refusal says why. */
import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import type { RunNeed } from '#lib/core/controller/advice.ts'
import { CAPACITOR_SERIES } from '#lib/core/controller/capacitors.ts'
import { publishedMaxOhm } from '#lib/core/controller/max-resistance.ts'
import { partsAdvice } from '#lib/core/controller/parts-advice.ts'
import { E12, E24, E6, isE12, valuesBetween } from '#lib/core/controller/preferred-values.ts'
import { runDuration } from '#lib/core/controller/run-duration.ts'
import { runSource } from '#lib/core/controller/run-source.ts'
import type { Controller, OneShotRcController, TimeSwitchController } from '#lib/core/controller/types.ts'
import preferred from '../../fixtures/controller/preferred-values.json' with { type: 'json' }

const RC: OneShotRcController = {
  kind: 'one-shot-rc',
  resistanceOhm: 8.2e6,
  resistanceToleranceFraction: 0.05,
  capacitanceF: 330e-6,
  capacitanceToleranceFraction: 0.2,
  supplyV: 12,
  icFamily: 'cmos',
  leakage: { kind: 'unknown' },
}
const need = (minMin: number, limitMin = 2 * minMin): RunNeed => ({ minMin, limitMin, readyBy: null })
const suggestionsOf = (controller: Controller, asked: RunNeed) => {
  const advice = partsAdvice(controller, asked)
  return advice.status === 'found' ? advice.suggestions : []
}
const reasonOf = (controller: Controller, asked: RunNeed) => {
  const advice = partsAdvice(controller, asked)
  return advice.status === 'none' ? advice.reason : ''
}

describe('preferred values', () => {
  it('are those of IEC 60063', () => {
    expect(E6).toEqual(preferred.E6)
    expect(E12).toEqual(preferred.E12)
    expect(E24).toEqual(preferred.E24)
  })
  it('differ from the rounded geometric series in eight values of E24 only', () => {
    const geometric = E24.map((_, index) => Math.round(10 * 10 ** (index / 24)))
    expect(E24.filter((value, index) => value !== geometric[index])).toEqual(preferred.notGeometric)
  })
  it('fill decades without rounding dust, ends included', () => {
    expect(valuesBetween(E6, { from: 4.7e-6, to: 47e-6 })).toEqual([4.7e-6, 6.8e-6, 1e-5, 1.5e-5, 2.2e-5, 3.3e-5, 4.7e-5])
    expect([8.2e6, 9.1e6, 1.2e6, 330e3, 360e3].map(isE12)).toEqual([true, false, true, true, false])
  })
})

/** The one-shots that an enclosure is found with. */
const installed: fc.Arbitrary<OneShotRcController> = fc.record({
  kind: fc.constant('one-shot-rc' as const),
  resistanceOhm: fc.constantFrom(1e6, 3.3e6, 4.7e6, 8.2e6, 12e6),
  resistanceToleranceFraction: fc.constantFrom(0.01, 0.05),
  capacitanceF: fc.constantFrom(47e-6, 100e-6, 330e-6, 470e-6),
  capacitanceToleranceFraction: fc.constantFrom(0.05, 0.1, 0.2),
  supplyV: fc.constantFrom(5, 9, 12, 15),
  icFamily: fc.constantFrom('bipolar', 'cmos'),
  leakage: fc.constantFrom<OneShotRcController['leakage'][]>(
    { kind: 'unknown' },
    { kind: 'resistance', leakageOhm: 400e6 },
    { kind: 'series', series: 'film-polypropylene', ratedV: 450 },
    { kind: 'series', series: 'low-leakage', ratedV: 25 },
  ),
})

describe('partsAdvice for a resistor and capacitor', () => {
  it('names only what the model confirms: always ends, reaches the minutes, stays in the limit, keeps the makers’ rule', () => {
    const seen = { found: 0, none: 0 }
    fc.assert(
      fc.property(installed, fc.integer({ min: 2, max: 120 }), fc.constantFrom(1.4, 2, 3), (timer, minMin, spread) => {
        const asked = need(minMin, minMin * spread)
        const advice = partsAdvice(timer, asked)
        seen[advice.status]++
        if (advice.status === 'none') {
          expect(advice.reason.length).toBeGreaterThan(20)
          return
        }
        for (const { controller, duration, what, reason } of advice.suggestions) {
          expect(runDuration(controller, [])).toEqual(duration)
          expect(duration.timesOut).toBe('always')
          expect(duration.guaranteed.minMin).toBeGreaterThanOrEqual(asked.minMin)
          expect(duration.guaranteed.maxMin ?? Infinity).toBeLessThanOrEqual(asked.limitMin)
          if (controller.kind !== 'one-shot-rc') throw new Error('a one-shot stays a one-shot')
          expect(controller.resistanceOhm).toBeLessThanOrEqual(publishedMaxOhm(controller) * (1 + 1e-9))
          expect(controller).not.toEqual(timer)
          expect(what).toMatch(/^Fit /)
          expect(reason).toContain('at least')
        }
      }),
      { numRuns: 150 },
    )
    expect(Math.min(seen.found, seen.none)).toBeGreaterThan(20)
  })
  it('takes resistors of E24 and capacitors of E6 in stocked sizes, one to four pieces', () => {
    for (const minMin of [3, 5, 10, 15, 20, 25])
      for (const { controller } of suggestionsOf(RC, need(minMin))) {
        if (controller.kind !== 'one-shot-rc' || controller.leakage.kind !== 'series') continue
        if (controller.resistanceOhm !== RC.resistanceOhm)
          expect(valuesBetween(E24, { from: 1e5, to: 22e6 })).toContain(controller.resistanceOhm)
        const { stock } = CAPACITOR_SERIES[controller.leakage.series]
        const sizes = valuesBetween(E6, { from: stock.fromF, to: stock.toF })
        const pieces = sizes.flatMap((each) => [1, 2, 3, 4].map((count) => Number((count * each).toPrecision(6))))
        expect(pieces).toContain(controller.capacitanceF)
      }
  })
  it('changes the resistor alone where that does, before anything else', () => {
    const tight = { ...RC, capacitanceToleranceFraction: 0.1, leakage: { kind: 'resistance', leakageOhm: 400e6 } } as const
    const [first] = suggestionsOf(tight, need(60))
    expect(first?.what).toContain('keep the 330 µF capacitor')
    expect(first?.controller).toMatchObject({ capacitanceF: 330e-6, leakage: tight.leakage })
  })
  it('never trusts an electrolytic with a run that its limit cannot surely end: 0.01 CV beyond 55 s, 0.002 CV beyond 275 s', () => {
    // RC < 50 s and < 250 s, so t < 54.9 s and < 274.7 s: 100 s and 500 s of self-time-constant over 2 ln 3, before any tolerance.
    for (const minMin of [1, 2, 3, 4, 5, 8, 12, 20])
      for (const { controller } of suggestionsOf(RC, need(minMin))) {
        const series = controller.kind === 'one-shot-rc' && controller.leakage.kind === 'series' ? controller.leakage.series : null
        if (series === 'electrolytic') expect(minMin).toBeLessThan(0.92)
        if (series === 'low-leakage') expect(minMin).toBeLessThan(4.58)
      }
  })
  it('says what the longest sure pair is when none is long enough, and what to fit instead', () => {
    const reason = reasonOf(RC, need(240))
    expect(reason).toMatch(/No stocked resistor and capacitor surely run 240 min/)
    expect(reason).toMatch(/at least \d+ min, at most \d+ min/)
    expect(reason).toContain('Fit a timer of fixed length')
  })
  it('offers a CMOS chip in place of a bipolar one with the caution about its drive, never the other way', () => {
    const chips = suggestionsOf({ ...RC, icFamily: 'bipolar' }, need(25)).filter(
      ({ controller }) => controller.kind === 'one-shot-rc' && controller.icFamily === 'cmos',
    )
    expect(chips.length).toBeGreaterThan(0)
    for (const { reason } of chips) expect(reason).toContain('drives the coil')
    for (const { controller } of suggestionsOf(RC, need(25))) expect(controller).toMatchObject({ icFamily: 'cmos' })
  })
})

describe('partsAdvice for a setting', () => {
  const dial = { kind: 'dial', settingMin: 30, scaleMaxMin: 120, toleranceFraction: 0.1 } as const
  it('gives the shortest setting whose guaranteed run is long enough, by the tolerance', () => {
    // 0.9 · 75 = 67.5 is over 65, 0.9 · 70 = 63 is not.
    expect(suggestionsOf(dial, need(65))[0]).toMatchObject({ what: 'Set the dial to 75 min', controller: { settingMin: 75 } })
  })
  it('says that the scale is too short where it is', () => {
    expect(reasonOf(dial, need(115))).toContain('longer scale')
  })
  it('says that the tolerance is too wide where the limit is near', () => {
    expect(reasonOf(dial, need(60, 65))).toContain('tolerance of 10 % is too wide')
  })
  it('answers with a reason for a supplier’s contactor and for a limit below the need', () => {
    expect(reasonOf({ kind: 'supplier-contactor', windows: [] }, need(60))).toContain('supplier')
    expect(reasonOf(dial, need(60, 50))).toContain('at most 50 min')
  })
})

describe('partsAdvice for a programme', () => {
  const SWITCH: TimeSwitchController = {
    kind: 'time-switch',
    stepMin: 15,
    programme: [{ weekday: null, onMin: 330, offMin: 390 }],
    followsClockChange: true,
    driftMin: 0,
    powerReserveH: null,
  }
  const asked = (minMin: number, minuteOfDay: number, weekday: 0 | 2 | 6 = 2): RunNeed => ({
    minMin,
    limitMin: 1440,
    readyBy: { weekday, minuteOfDay },
  })

  it('begins earlier by whole steps until it is surely on long enough', () => {
    // 06:30 less 90 min less half a step is 04:52:30: the step before it is 04:45.
    expect(suggestionsOf(SWITCH, asked(90, 390))[0]).toMatchObject({
      controller: { programme: [{ weekday: null, onMin: 285, offMin: 390 }] },
    })
  })
  it('moves a step over midnight to the evening before, weekday and all', () => {
    const early = { ...SWITCH, programme: [{ weekday: 0, onMin: 30, offMin: 120 }] } as const
    expect(suggestionsOf(early, asked(180, 120, 0))[0]).toMatchObject({
      controller: { programme: [{ weekday: 6, onMin: 1365, offMin: 1560 }] },
    })
  })
  it('adds a step where there is none before the water is needed', () => {
    const [first] = suggestionsOf({ ...SWITCH, programme: [] }, asked(60, 420))
    expect(first?.what).toBe('Switch on from 05:45 to 07:00 daily')
  })
  it('sets a clock right first where that alone does', () => {
    const [first] = suggestionsOf({ ...SWITCH, driftMin: -40, programme: [{ weekday: null, onMin: 300, offMin: 390 }] }, asked(60, 390))
    expect(first?.what).toBe('Set its clock right')
  })
  it('is on for the minutes it promises, on its own grid, whatever the programme', () => {
    const step = fc
      .tuple(fc.integer({ min: 0, max: 95 }), fc.integer({ min: 1, max: 20 }), fc.constantFrom(null, 0 as const, 2 as const))
      .map(([on, length, weekday]) => ({ weekday, onMin: on * 15, offMin: (on + length) * 15 }))
    let found = 0
    fc.assert(
      fc.property(
        fc.array(step, { maxLength: 4 }),
        fc.integer({ min: 20, max: 300 }),
        fc.integer({ min: 240, max: 1380 }),
        (programme, minMin, minuteOfDay) => {
          for (const { controller } of suggestionsOf({ ...SWITCH, programme }, asked(minMin, minuteOfDay))) {
            found++
            // 7 January 2026 was a Wednesday.
            const source = runSource(controller, {
              day: '2026-01-07',
              duration: runDuration(controller, []),
              toElapsedMin: (minute) => minute,
              aheadAtStartMin: 0,
            })
            if (source.kind !== 'clocked' || controller.kind !== 'time-switch') throw new Error('a switch stays a switch')
            const on = source.onIntervals.filter((one) => one.startMin < minuteOfDay).at(-1)
            expect(Math.min(on?.endMin ?? 0, minuteOfDay) - (on?.startMin ?? 0) - source.uncertaintyMin).toBeGreaterThanOrEqual(minMin)
            for (const one of controller.programme) {
              expect([one.onMin % 15, one.offMin % 15]).toEqual([0, 0])
              expect(one.onMin).toBeGreaterThanOrEqual(0)
              expect(one.onMin).toBeLessThan(1440)
              expect(one.offMin).toBeLessThanOrEqual(2880)
            }
          }
        },
      ),
    )
    expect(found).toBeGreaterThan(100)
  })
  it('says that it cannot check a programme without a time', () => {
    expect(reasonOf(SWITCH, need(60))).toContain('not known when')
  })
})
