/** The tank model by law, over random tanks and days, and against a plain one-second Euler loop of the same equations. */
import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { mixInversions } from '#lib/core/tank/column.ts'
import type { TankModel } from '#lib/core/tank/model.ts'
import { type MixedDraw, type Programme, simulate, type TankState, uniformState } from '#lib/core/tank/simulate.ts'
import { CERTIFICATION_C } from '../../fixtures/tank/certification.data.ts'
import { certificationDraws } from '../../support/certification-day.ts'
import { eulerDay } from '../../support/euler-tank.ts'
import { meanOf, modelOf } from '../../support/tank-cases.ts'

/** Every law below, its tolerance and why that wide. */
const TOLERANCE = {
  /** Share of the energy moved: the product's own bound. Rounding and the cut power series leave about 1e-9. */
  balance: 1e-6,
  /**
   * K: what is the same motion may be cut at other moments, each cut a series to 2e-6 K, which moves the phase of a thermostat
   * that cycles all day. Of 3,000 random days the farthest was 1e-4 K from steps two hundred times shorter.
   */
  sameMotionK: 1e-3,
  /** K: a longer run can end in another phase of the thermostat's dead band, which conducts a little differently. */
  longerRunK: 1e-3,
} as const

const tankArb = fc
  .record({
    actualVolumeL: fc.double({ min: 30, max: 400, noNaN: true }),
    heightM: fc.option(fc.double({ min: 0.5, max: 1.8, noNaN: true })),
    loss: fc.record({ kind: fc.constant('ua' as const), lossWPerK: fc.double({ min: 0.2, max: 4, noNaN: true }) }),
    powerW: fc.integer({ min: 1_000, max: 6_000 }),
    share: fc.constantFrom(1 / 4, 1 / 3, 1 / 2),
    below: fc.constantFrom(0, 1 / 12, 1 / 6),
    elements: fc.constantFrom('both', 'upper', 'lower'),
    setPointC: fc.integer({ min: 45, max: 75 }),
    deadBandK: fc.double({ min: 1, max: 11, noNaN: true }),
    ambientC: fc.integer({ min: 5, max: 30 }),
    inletC: fc.integer({ min: 2, max: 25 }),
  })
  .map(({ powerW, share, below, elements, inletC, ...patch }): TankModel => {
    const rated = { ratedPowerW: powerW, ratedVoltageV: 240 }
    return modelOf(
      {
        ...patch,
        upperElement: elements === 'lower' ? null : rated,
        lowerElement: elements === 'upper' ? null : rated,
        shareAboveUpperFraction: share,
        shareBelowLowerFraction: below,
      },
      inletC,
    )
  })
const stateArb = fc
  .array(fc.double({ min: 2, max: 75, noNaN: true }), { minLength: 12, maxLength: 12 })
  .map((nodesC): TankState => ({ nodesC: [...nodesC].sort((one, other) => other - one), upperCalls: true, lowerCalls: true }))
const windowsArb = fc
  .array(fc.integer({ min: 0, max: 1_440 }), { minLength: 0, maxLength: 6 })
  .map((edges) => [...edges].sort((one, other) => one - other))
  .map((edges) =>
    edges.flatMap((startMin, index) =>
      index % 2 === 0 && edges[index + 1] !== undefined ? [{ startMin, endMin: edges[index + 1]! }] : [],
    ),
  )
const drawsArb = fc
  .array(
    fc.record({
      atMin: fc.integer({ min: 0, max: 1_300 }),
      minutes: fc.integer({ min: 1, max: 60 }),
      flowLPerMin: fc.double({ min: 0.5, max: 20, noNaN: true }),
      useTemperatureC: fc.option(fc.integer({ min: 36, max: 60 })),
    }),
    { maxLength: 4 },
  )
  .map((draws) => {
    let free = 0
    return [...draws]
      .sort((one, other) => one.atMin - other.atMin)
      .map(({ atMin, minutes, ...draw }): MixedDraw => {
        const startMin = Math.max(atMin, free)
        free = startMin + minutes
        return { startMin, endMin: free, ...draw }
      })
  })
const programmeArb = fc
  .record({ on: windowsArb, draws: drawsArb })
  .map(({ on, draws }): Programme => ({ startMin: 0, endMin: 1_440, on, draws }))

const storedJ = (tank: TankModel, nodesC: readonly number[]): number => meanOf(nodesC) * nodesC.length * tank.nodeHeatJPerK
const farthestK = (one: readonly number[], other: readonly number[]): number =>
  Math.max(...one.map((value, node) => Math.abs(value - (other[node] ?? NaN))))

describe('simulate', () => {
  it('closes the energy balance of every day to 1e-6 of the energy moved', () => {
    fc.assert(
      fc.property(tankArb, stateArb, programmeArb, (tank, start, programme) => {
        const { end, energyInJ, energyDeliveredJ, energyLostJ } = simulate(tank, start, programme)
        const moved = energyInJ + Math.abs(energyDeliveredJ) + Math.abs(energyLostJ)
        const open = energyInJ - energyDeliveredJ - energyLostJ - storedJ(tank, end.nodesC) + storedJ(tank, start.nodesC)
        expect(Math.abs(open)).toBeLessThanOrEqual(TOLERANCE.balance * Math.max(moved, 3.6e6))
      }),
      { numRuns: 150 },
    )
  })
  it('closes it in draws of twice the tank, in an hour and in a minute (HPWHsim’s own unit test)', () => {
    fc.assert(
      fc.property(tankArb, stateArb, fc.constantFrom(1, 60), (tank, start, minutes) => {
        const draws = [{ startMin: 10, endMin: 10 + minutes, flowLPerMin: (2 * tank.volumeL) / minutes, useTemperatureC: null }]
        const { end, energyInJ, energyDeliveredJ, energyLostJ } = simulate(tank, start, {
          startMin: 0,
          endMin: 120,
          on: [{ startMin: 0, endMin: 120 }],
          draws,
        })
        const moved = energyInJ + Math.abs(energyDeliveredJ) + Math.abs(energyLostJ)
        const open = energyInJ - energyDeliveredJ - energyLostJ - storedJ(tank, end.nodesC) + storedJ(tank, start.nodesC)
        expect(Math.abs(open)).toBeLessThanOrEqual(TOLERANCE.balance * Math.max(moved, 3.6e6))
      }),
      { numRuns: 100 },
    )
  })
  it('heats only while the power is on, one element at a time, and books just that', () => {
    fc.assert(
      fc.property(tankArb, stateArb, programmeArb, (tank, start, programme) => {
        const { energyInJ, heating } = simulate(tank, start, programme)
        const bookedJ = heating.reduce((sum, span) => sum + span.powerW * (span.endMin - span.startMin) * 60, 0)
        expect(Math.abs(bookedJ - energyInJ)).toBeLessThanOrEqual(1e-6 * Math.max(1, energyInJ))
        heating.forEach((span, index) => {
          expect(span.startMin).toBeGreaterThanOrEqual((heating[index - 1]?.endMin ?? 0) - 1e-6)
          const powered = programme.on.reduce(
            (sum, on) => sum + Math.max(0, Math.min(on.endMin, span.endMin) - Math.max(on.startMin, span.startMin)),
            0,
          )
          expect(powered).toBeGreaterThanOrEqual(span.endMin - span.startMin - 1e-6)
        })
      }),
      { numRuns: 150 },
    )
  })
  it('never leaves warmer water below colder, never heats past the set point, never cools below what surrounds it', () => {
    fc.assert(
      fc.property(tankArb, stateArb, programmeArb, (tank, start, programme) => {
        const { nodesC } = simulate(tank, start, programme).end
        for (let node = 1; node < nodesC.length; node++) expect(nodesC[node]! - nodesC[node - 1]!).toBeLessThan(1e-5)
        const hottest = Math.max(tank.setPointC, ...start.nodesC, tank.inletC, tank.ambientC)
        const coldest = Math.min(...start.nodesC, tank.inletC, tank.ambientC)
        for (const temperatureC of nodesC) {
          expect(temperatureC).toBeLessThan(hottest + 1e-4)
          expect(temperatureC).toBeGreaterThan(coldest - 1e-4)
        }
      }),
      { numRuns: 100 },
    )
  })
  it('is the same whether told at once or in two parts cut where nothing is drawn', () => {
    fc.assert(
      fc.property(tankArb, stateArb, windowsArb, fc.integer({ min: 1, max: 1_439 }), (tank, start, on, cutMin) => {
        const whole = simulate(tank, start, { startMin: 0, endMin: 1_440, on, draws: [] })
        const first = simulate(tank, start, { startMin: 0, endMin: cutMin, on, draws: [] })
        const second = simulate(tank, first.end, { startMin: cutMin, endMin: 1_440, on, draws: [] })
        expect(farthestK(whole.end.nodesC, second.end.nodesC)).toBeLessThan(TOLERANCE.sameMotionK)
      }),
      { numRuns: 80 },
    )
  })
  it('is the same whether it is watched or not', () => {
    fc.assert(
      fc.property(tankArb, stateArb, programmeArb, (tank, start, programme) => {
        let seen = 0
        const watched = simulate(tank, start, { ...programme, sampleEveryMin: 7, sample: () => seen++ })
        expect(seen).toBe(Math.floor(1_440 / 7) + 1)
        expect(farthestK(watched.end.nodesC, simulate(tank, start, programme).end.nodesC)).toBeLessThan(TOLERANCE.sameMotionK)
      }),
      { numRuns: 60 },
    )
  })
  it('never makes water colder by a longer run', () => {
    fc.assert(
      fc.property(tankArb, stateArb, fc.integer({ min: 0, max: 300 }), fc.integer({ min: 0, max: 60 }), (tank, start, minutes, more) => {
        const after = (runMin: number) =>
          simulate(tank, start, { startMin: 0, endMin: 360, on: [{ startMin: 0, endMin: runMin }], draws: [] }).end.nodesC
        expect(meanOf(after(minutes + more))).toBeGreaterThanOrEqual(meanOf(after(minutes)) - TOLERANCE.longerRunK)
      }),
      { numRuns: 80 },
    )
  })
  it('never makes water colder by hotter water before', () => {
    fc.assert(
      fc.property(tankArb, stateArb, fc.double({ min: 0, max: 10, noNaN: true }), (tank, start, moreK) => {
        const warmer = { ...start, nodesC: start.nodesC.map((temperatureC) => temperatureC + moreK) }
        const rest = { startMin: 0, endMin: 600, on: [], draws: [] }
        const cold = simulate(tank, start, rest).end.nodesC
        simulate(tank, warmer, rest).end.nodesC.forEach((temperatureC, node) =>
          expect(temperatureC).toBeGreaterThanOrEqual(cold[node]! - 1e-4),
        )
      }),
      { numRuns: 60 },
    )
  })
})

describe('simulate beside a plain Euler loop', () => {
  const days = 6
  it.each(Array.from({ length: days }, (_, index) => index))('is what the loop tends to as its step shrinks (random day %d)', (index) => {
    const [tank, start, programme] = fc.sample(fc.tuple(tankArb, stateArb, programmeArb), { seed: 20 + index, numRuns: 1 })[0]!
    const exact = simulate(tank, start, programme)
    const at = (stepS: number) => eulerDay(tank, start, programme, stepS)
    const coarse = farthestK(exact.end.nodesC, Array.from(at(2).nodesC))
    const fine = farthestK(exact.end.nodesC, Array.from(at(0.25).nodesC))
    // First order in the step: an eighth of the step, an eighth of the error; a quarter allows for its thermostat's whole steps.
    expect(fine).toBeLessThanOrEqual(Math.max(0.02, coarse / 4))
  })
  it('differs from the one-second loop by less than 0.1 K at the top and 0.5 % of the heat on a certification day with two power windows', () => {
    const tank = modelOf({ setPointC: CERTIFICATION_C.setPointC, ambientC: CERTIFICATION_C.ambientC }, CERTIFICATION_C.inletC)
    const programme: Programme = {
      startMin: 300,
      endMin: 1_740,
      on: [
        { startMin: 330, endMin: 510 },
        { startMin: 990, endMin: 1_170 },
      ],
      draws: certificationDraws('medium', 420),
    }
    const start = uniformState(tank.setPointC, 12)
    const exact = simulate(tank, start, programme)
    const loop = eulerDay(tank, start, programme)
    expect(Math.abs((exact.end.nodesC[0] ?? NaN) - (loop.nodesC[0] ?? NaN))).toBeLessThan(0.1)
    expect(Math.abs(exact.energyDeliveredJ / loop.energyDeliveredJ - 1)).toBeLessThan(0.005)
  })
})

describe('hot share of a shower', () => {
  it('is none, and the shower served, where the mains are as warm as the shower or warmer (a hot summer)', () => {
    for (const mainsC of [30, 32, 35]) {
      const tank = modelOf({}, mainsC)
      const draws = [{ startMin: 10, endMin: 18, flowLPerMin: 7.57, useTemperatureC: 30 }]
      const { energyDeliveredJ, servedMin } = simulate(tank, uniformState(60, 12), { startMin: 0, endMin: 60, on: [], draws })
      expect(energyDeliveredJ).toBe(0)
      expect(servedMin[0]).toBeCloseTo(8, 9)
    }
  })
  it('is served by such mains though the tank stands colder', () => {
    const draws = [{ startMin: 10, endMin: 18, flowLPerMin: 7.57, useTemperatureC: 30 }]
    const { servedMin } = simulate(modelOf({}, 32), uniformState(20, 12), { startMin: 0, endMin: 60, on: [], draws })
    expect(servedMin[0]).toBeCloseTo(8, 9)
  })
})

describe('mixInversions', () => {
  it('keeps the heat, orders the column, and leaves an ordered one alone', () => {
    fc.assert(
      fc.property(fc.array(fc.double({ min: 0, max: 90, noNaN: true }), { minLength: 1, maxLength: 20 }), (nodesC) => {
        const t = Float64Array.from(nodesC)
        mixInversions(t, t.length)
        expect(meanOf(Array.from(t))).toBeCloseTo(meanOf(nodesC), 9)
        for (let node = 1; node < t.length; node++) expect(t[node]!).toBeLessThanOrEqual(t[node - 1]! + 1e-12)
        const again = Float64Array.from(t)
        mixInversions(again, again.length)
        expect(farthestK(Array.from(again), Array.from(t))).toBeLessThan(1e-12)
      }),
    )
  })
})
