/** How long a run lasts and when a clock is on: ranges that hold each other, stalls, stop-watch readings, clocks that are off. */
import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { runDuration } from '#lib/core/controller/run-duration.ts'
import { runSource } from '#lib/core/controller/run-source.ts'
import type { CapacitorLeakage, OneShotRcController } from '#lib/core/controller/types.ts'

const TIMER: OneShotRcController = {
  kind: 'one-shot-rc',
  resistanceOhm: 10e6,
  resistanceToleranceFraction: 0.02,
  capacitanceF: 330e-6,
  capacitanceToleranceFraction: 0.1,
  supplyV: 12,
  icFamily: 'cmos',
  leakage: { kind: 'resistance', leakageOhm: 400e6 },
}

describe('runDuration', () => {
  it('brackets the nominal time between guaranteed limits and never lets leakage shorten it', () => {
    const outcome = runDuration(TIMER, [])
    expect(outcome.timesOut).toBe('always')
    expect(outcome.nominalMin).toBeCloseTo((10e6 * 330e-6 * Math.log(3)) / 60, 6)
    expect(outcome.guaranteed.minMin).toBeLessThan(outcome.typical.minMin)
    expect(outcome.guaranteed.maxMin ?? 0).toBeGreaterThan(outcome.typical.maxMin ?? Infinity)
  })
  it('says that a bipolar timer with an electrolytic at its leakage limit may never stop', () => {
    const outcome = runDuration({ ...TIMER, icFamily: 'bipolar', leakage: { kind: 'series', series: 'electrolytic', ratedV: 25 } }, [])
    expect(outcome.timesOut).not.toBe('always')
    expect(outcome.guaranteed.maxMin).toBeNull()
  })
  it('lets a stop-watch override the parts, and repeated readings give the spread', () => {
    const readings = [58, 61, 60].map((durationMin) => ({ durationMin, measuredAtMs: 0 }))
    const outcome = runDuration(TIMER, readings)
    expect(outcome.source).toBe('measured')
    expect(outcome.guaranteed).toEqual({ minMin: 58, maxMin: 61 })
  })
  it('does not take two readings that happen to agree for certainty, and trusts more of them more', () => {
    const widths = [1, 2, 3, 6].map((count) => {
      const { minMin, maxMin } = runDuration(
        TIMER,
        Array.from({ length: count }, () => ({ durationMin: 60, measuredAtMs: 0 })),
      ).guaranteed
      return (maxMin ?? Infinity) - minMin
    })
    widths.forEach((width, index) => expect(width).toBeLessThan(widths[index - 1] ?? Infinity))
    expect(Math.min(...widths)).toBeGreaterThan(0)
  })
})

const leakages = fc.oneof<fc.Arbitrary<CapacitorLeakage>[]>(
  fc.constant({ kind: 'unknown' }),
  fc.double({ min: 1e6, max: 1e11, noNaN: true }).map((ohm) => ({ kind: 'resistance', leakageOhm: ohm })),
  fc.double({ min: 0, max: 1e-6, noNaN: true }).map((leakageA) => ({ kind: 'current', leakageA })),
  fc
    .constantFrom('electrolytic' as const, 'low-leakage' as const, 'film-polyester' as const, 'film-polypropylene' as const)
    .map((series) => ({ kind: 'series', series, ratedV: 25 })),
)
const timers: fc.Arbitrary<OneShotRcController> = fc.record({
  kind: fc.constant('one-shot-rc' as const),
  resistanceOhm: fc.double({ min: 1e5, max: 2e7, noNaN: true }),
  resistanceToleranceFraction: fc.double({ min: 0, max: 0.8, noNaN: true }),
  capacitanceF: fc.double({ min: 1e-6, max: 1e-3, noNaN: true }),
  capacitanceToleranceFraction: fc.double({ min: 0, max: 0.8, noNaN: true }),
  supplyV: fc.double({ min: 5, max: 15, noNaN: true }),
  icFamily: fc.constantFrom('bipolar', 'cmos'),
  leakage: leakages,
})

describe('laws of runDuration', () => {
  it('guaranteed holds typical, and typical holds nominal, whatever the parts', () => {
    const seen = { always: 0, typically: 0, never: 0 }
    fc.assert(
      fc.property(timers, (timer) => {
        const { nominalMin, typical, guaranteed, timesOut } = runDuration(timer, [])
        seen[timesOut]++
        // 1e-9 min is 60 ns: rounding.
        expect(guaranteed.minMin).toBeLessThanOrEqual(typical.minMin + 1e-9)
        expect(typical.minMin).toBeLessThanOrEqual((nominalMin ?? 0) + 1e-9)
        if (typical.maxMin !== null) expect(typical.maxMin).toBeGreaterThanOrEqual((nominalMin ?? 0) - 1e-9)
        if (guaranteed.maxMin !== null) expect(guaranteed.maxMin).toBeGreaterThanOrEqual((typical.maxMin ?? Infinity) - 1e-9)
        // One signal: no end is guaranteed exactly when it does not always time out.
        expect(guaranteed.maxMin === null).toBe(timesOut !== 'always')
        if (timesOut === 'never') expect(typical.maxMin).toBeNull()
      }),
      { numRuns: 2000 },
    )
    for (const count of Object.values(seen)) expect(count).toBeGreaterThan(100)
  })
  it('leakage only lengthens: with more of it the shortest run stays and the longest never shrinks', () => {
    fc.assert(
      fc.property(
        timers,
        fc.double({ min: 1e6, max: 1e11, noNaN: true }),
        fc.double({ min: 1, max: 100, noNaN: true }),
        (timer, ohm, factor) => {
          const withLeak = (leakageOhm: number) => runDuration({ ...timer, leakage: { kind: 'resistance', leakageOhm } }, [])
          const [tight, leaky] = [withLeak(ohm), withLeak(ohm / factor)]
          expect(leaky.guaranteed.minMin).toBe(tight.guaranteed.minMin)
          expect(leaky.typical.minMin).toBe(tight.typical.minMin)
          expect(leaky.guaranteed.maxMin ?? Infinity).toBeGreaterThanOrEqual((tight.guaranteed.maxMin ?? Infinity) * (1 - 1e-12))
        },
      ),
    )
  })
  it('says so when the resistor is above the makers’ rule, and not below it', () => {
    // TI SLFS022 note 2 gives 10 MΩ at 15 V.
    const at = (resistanceOhm: number) =>
      runDuration({ ...TIMER, icFamily: 'bipolar', supplyV: 15, resistanceOhm }, []).reasons.some((reason) => reason.includes('makers'))
    expect([at(9.9e6), at(10.1e6)]).toEqual([false, true])
  })
  it('does not turn a dial past the end of its scale', () => {
    const dial = { kind: 'dial', settingMin: 90, scaleMaxMin: 60, toleranceFraction: 0.1 } as const
    expect(runDuration(dial, []).guaranteed).toEqual({ minMin: 54, maxMin: 66 })
  })
})

describe('runSource', () => {
  const day = { day: '2026-12-02', duration: runDuration(TIMER, []), toElapsedMin: (minute: number) => minute, aheadAtStartMin: 0 }
  it('gives the on-intervals of a weekday programme, yesterday included, shifted by a clock that is fast', () => {
    const source = runSource(
      {
        kind: 'time-switch',
        stepMin: 15,
        followsClockChange: false,
        driftMin: 20,
        powerReserveH: null,
        programme: [
          { weekday: 2, onMin: 300, offMin: 420 },
          { weekday: 1, onMin: 1380, offMin: 1500 },
          { weekday: 4, onMin: 300, offMin: 420 },
        ],
      },
      day,
    )
    // 2 December 2026 is a Wednesday; Tuesday's step runs over midnight.
    expect(source).toMatchObject({
      kind: 'clocked',
      onIntervals: [
        { startMin: -80, endMin: 40 },
        { startMin: 280, endMin: 400 },
      ],
    })
  })
  it('runs an hour early when a switch that does not follow the clock change is still on summer time', () => {
    const base = {
      kind: 'time-switch',
      stepMin: 15,
      driftMin: 0,
      powerReserveH: null,
      programme: [{ weekday: null, onMin: 300, offMin: 360 }],
    } as const
    const winter = { ...day, aheadAtStartMin: 60 }
    const starts = (followsClockChange: boolean) => {
      const source = runSource({ ...base, followsClockChange }, winter)
      return source.kind === 'clocked' ? source.onIntervals.find((on) => on.startMin >= 0)?.startMin : null
    }
    expect(starts(false)).toBe(240)
    expect(starts(true)).toBe(300)
  })
  it('counts on through the change where a clock does not follow it, on that day too', () => {
    // Spring in London, 29 March 2026 (IANA tz database): 01:00 is followed by 02:00, so wall minutes from 60 on have an hour less behind them.
    const spring = {
      day: '2026-03-29',
      duration: runDuration(TIMER, []),
      toElapsedMin: (minute: number) => (minute < 60 ? minute : minute - 60),
      aheadAtStartMin: 0,
    }
    const starts = (followsClockChange: boolean) => {
      const source = runSource(
        {
          kind: 'time-switch',
          stepMin: 15,
          driftMin: 0,
          powerReserveH: null,
          followsClockChange,
          programme: [
            { weekday: null, onMin: 30, offMin: 45 },
            { weekday: null, onMin: 300, offMin: 360 },
          ],
        },
        spring,
      )
      return source.kind === 'clocked' ? source.onIntervals.map((on) => on.startMin).filter((minute) => minute >= 0 && minute < 1380) : []
    }
    // Following, 05:00 comes after four hours; not following, after five: an hour late by the wall. What is before the change is alike.
    expect(starts(true)).toEqual([30, 240])
    expect(starts(false)).toEqual([30, 300])
  })
  it('starts tomorrow’s first step tonight when the clock is fast, so that some day owns it', () => {
    const base = {
      kind: 'time-switch',
      stepMin: 15,
      powerReserveH: null,
      followsClockChange: true,
      programme: [{ weekday: null, onMin: 30, offMin: 240 }],
    } as const
    const source = runSource({ ...base, driftMin: 60 }, day)
    const owned = source.kind === 'clocked' ? source.onIntervals.filter((on) => on.startMin >= 0 && on.startMin < 1440) : []
    expect(owned).toEqual([{ startMin: 1410, endMin: 1620 }])
  })
})
