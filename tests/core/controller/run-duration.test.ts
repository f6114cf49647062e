/** Timer durations against the published law's values, an independent transient solver and the datasheets' limits. */
import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { leakageOhm, rcDuration } from '#lib/core/controller/one-shot-rc.ts'
import { runDuration } from '#lib/core/controller/run-duration.ts'
import { runSource } from '#lib/core/controller/run-source.ts'
import type { OneShotRcController } from '#lib/core/controller/types.ts'
import timeouts from '../../fixtures/controller/timeouts.json' with { type: 'json' }
import { transientDurationS } from '../../support/rc-transient.ts'

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
/** 0.1 %: the published rows carry five significant digits. */
const TOLERANCE_FRACTION = 1e-3

describe('rcDuration', () => {
  it.each(timeouts.rows)('gives $t s for R $R, C $C, leakage $RL, bias $Ib at $Vcc V', ({ R, C, RL, Ib, Vcc, t }) => {
    const outcome = rcDuration({ resistanceOhm: R, capacitanceF: C, leakageOhm: RL, biasA: Ib, supplyV: Vcc })
    if (t === null) expect(outcome.status).toBe('never')
    else expect(Math.abs((outcome.status === 'ends' ? outcome.durationS : 0) / t - 1)).toBeLessThan(TOLERANCE_FRACTION)
  })
  it('exercises rows that end and rows that never do', () => {
    expect(timeouts.rows.filter((row) => row.t === null).length).toBeGreaterThanOrEqual(4)
    expect(timeouts.rows.filter((row) => row.t !== null).length).toBeGreaterThanOrEqual(10)
  })
  it.each([
    [10e6, 330e-6, 400e6, 1e-9],
    [4.7e6, 470e-6, 14.2e6, 20e-9],
    [8.2e6, 100e-6, null, 400e-9],
    [8.2e6, 100e-6, null, 480e-9],
  ])('agrees with a stepped transient for R %d, C %d, leakage %d, bias %d', (resistanceOhm, capacitanceF, leakage, biasA) => {
    const circuit = { resistanceOhm, capacitanceF, leakageOhm: leakage, biasA, supplyV: 12 }
    const outcome = rcDuration(circuit)
    const judge = transientDurationS(circuit, 40 * resistanceOhm * capacitanceF)
    expect(outcome.status).toBe('ends')
    expect(Math.abs((outcome.status === 'ends' ? outcome.durationS : 0) / (judge ?? 0) - 1)).toBeLessThan(TOLERANCE_FRACTION)
  })
  it('stalls exactly when R_L ≤ 2 R without bias, and R ≥ V / (3 I_b) without leakage', () => {
    fc.assert(
      fc.property(fc.double({ min: 1e5, max: 1e8, noNaN: true }), fc.double({ min: 0.5, max: 4, noNaN: true }), (resistanceOhm, ratio) => {
        fc.pre(Math.abs(ratio - 2) > 1e-6)
        const leaky = rcDuration({ resistanceOhm, capacitanceF: 1e-5, leakageOhm: ratio * resistanceOhm, biasA: 0, supplyV: 9 })
        expect(leaky.status).toBe(ratio <= 2 ? 'never' : 'ends')
        const biased = rcDuration({
          resistanceOhm,
          capacitanceF: 1e-5,
          leakageOhm: null,
          biasA: (9 / (3 * resistanceOhm)) * (ratio / 2),
          supplyV: 9,
        })
        expect(biased.status).toBe(ratio >= 2 ? 'never' : 'ends')
      }),
    )
  })
})

describe('leakageOhm', () => {
  it.each([
    // Published limits: 0.01 CV or 3 µA, 0.002 CV or 0.2 µA (makers' datasheets of the classes named in the code).
    ['electrolytic', 1000e-6, 25, 25 / 250e-6],
    ['electrolytic', 2200e-6, 35, 35 / 770e-6],
    ['low-leakage', 100e-6, 25, 25 / 5e-6],
  ] as const)('holds the %s limit for %d F at %d V', (series, capacitanceF, ratedV, ohm) => {
    expect(leakageOhm({ kind: 'series', series, ratedV }, capacitanceF, 12).worstOhm).toBeCloseTo(ohm, -2)
  })
})

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
})

describe('runSource', () => {
  const day = { day: '2026-12-02', duration: runDuration(TIMER, []), toElapsedMin: (minute: number) => minute, clockOffsetMin: 0 }
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
    const winter = { ...day, clockOffsetMin: 60 }
    const starts = (followsClockChange: boolean) => {
      const source = runSource({ ...base, followsClockChange }, winter)
      return source.kind === 'clocked' ? source.onIntervals.find((on) => on.startMin >= 0)?.startMin : null
    }
    expect(starts(false)).toBe(240)
    expect(starts(true)).toBe(300)
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
