/** The tank model against published values and the law of energy; each check names its source. */
import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { inletC } from '#lib/core/tank/inlet.ts'
import { DRAW_PATTERN_GAL, lossWPerK } from '#lib/core/tank/loss.ts'
import { tankModel } from '#lib/core/tank/model.ts'
import { mixInversions, simulate, uniformState } from '#lib/core/tank/simulate.ts'
import type { TankSpec } from '#lib/core/tank/types.ts'
import { fFromC, L_PER_US_GAL, W_PER_K_PER_BTU_PER_H_F } from '#lib/core/units.ts'

/** 50 US gal nominal, 170.34 L actual, 4.5 kW at 240 V, UA 1.147 W/K, 1.22 m: the case of NREL's OCHRE runs. */
const OCHRE: TankSpec = {
  nominalVolumeL: 189.3,
  actualVolumeL: 170.34,
  heightM: 1.22,
  loss: { kind: 'ua', lossWPerK: 1.147 },
  upperElement: { ratedPowerW: 4_500, ratedVoltageV: 240 },
  lowerElement: { ratedPowerW: 4_500, ratedVoltageV: 240 },
  shareAboveUpperFraction: 1 / 4,
  setPointC: 60,
  deadBandK: 5.56,
  ambientC: 20,
  mixingValveC: null,
}
const model = (patch: Partial<TankSpec> = {}, inlet = 15, volts = 240) =>
  tankModel({ ...OCHRE, ...patch }, { supplyVoltageV: volts, inletC: inlet })
const mean = (nodesC: readonly number[]) => nodesC.reduce((sum, value) => sum + value, 0) / nodesC.length
const heatFor = (minutes: number, tank = model(), from = 15) =>
  simulate(tank, uniformState(from, 12), { startMin: 0, endMin: minutes, on: [{ startMin: 0, endMin: minutes }], draws: [] })

describe('lossWPerK', () => {
  it('gives 2.175 Btu/(h·°F) for UEF 0.93 in the medium pattern (Maguire and Roberts 2020, worked)', () => {
    expect(lossWPerK({ kind: 'uef', uef: 0.93, drawPattern: 'medium' }, 170) / W_PER_K_PER_BTU_PER_H_F).toBeCloseTo(2.175, 2)
  })
  it('gives 86.0 W at 45 K for class C at 200 L (Regulation (EU) 812/2013)', () => {
    expect(lossWPerK({ kind: 'class', label: 'C' }, 200) * 45).toBeCloseTo(86.0, 1)
  })
  it('gives 1.11 W/K for 1.2 kWh in 24 h at 45 K (SANS 151 rating)', () => {
    expect(lossWPerK({ kind: 'kwh-per-day', lossKwhPerDay: 1.2, testDeltaK: 45 }, 150)).toBeCloseTo(1.11, 2)
  })
  it('knows the daily volumes of the certification patterns (10 CFR 430 B App. E)', () => {
    expect(DRAW_PATTERN_GAL).toEqual({ 'very-small': 10, low: 38, medium: 55, high: 84 })
  })
})

describe('inletC', () => {
  // Burch and Christensen 2007, mean 50 °F, swing 45 °F: worked months, °F.
  it.each([
    ['2026-02-14', 45.7],
    ['2026-05-15', 56.0],
    ['2026-08-13', 66.3],
    ['2026-11-11', 56.5],
  ])('is %s at %d °F', (day, expectedF) => {
    const c = inletC({ kind: 'climate', meanAirC: 10, swingAirK: 25, hemisphere: 'north' }, day)
    expect(Math.abs(fFromC(c) - expectedF)).toBeLessThan(0.25)
  })
  it('has its cold season half a year later in the south', () => {
    const at = (hemisphere: 'north' | 'south', day: string) => inletC({ kind: 'climate', meanAirC: 10, swingAirK: 25, hemisphere }, day)
    expect(at('south', '2026-08-13')).toBeLessThan(at('south', '2026-02-14'))
    expect(at('north', '2026-08-13')).toBeGreaterThan(at('north', '2026-02-14'))
  })
})

describe('simulate', () => {
  it('warms the quarter above the upper element from 15 to 60 °C in 30 min (OCHRE 12-node run; closed form 29.7)', () => {
    const upperDone = [28, 29, 30, 31].find((minutes) => (heatFor(minutes).end.nodesC[0] ?? 0) >= 59.9)
    expect(upperDone).toBeGreaterThanOrEqual(29)
    expect(upperDone).toBeLessThanOrEqual(31)
  })
  it('has the top at 37.7 °C after 15 min and the mean at 37.7 °C after 60 (OCHRE)', () => {
    expect(Math.abs((heatFor(15).end.nodesC[0] ?? 0) - 37.7)).toBeLessThan(0.5)
    // Constant ρc instead of OCHRE's 4.183 MJ/(m³·K): 0.9 %.
    expect(Math.abs(mean(heatFor(60).end.nodesC) - 37.7)).toBeLessThan(0.5)
  })
  it('heats the whole mixed tank with a bottom element in 118 min (mixed tank without loss, closed form ±1 %)', () => {
    const minutes = (170.34 * 4_146.9 * 45) / 4_500 / 60
    expect(minutes).toBeGreaterThan(116)
    const end = heatFor(minutes, model({ upperElement: null, loss: { kind: 'ua', lossWPerK: 0.0001 } })).end
    expect(Math.abs(mean(end.nodesC) - 60)).toBeLessThan(0.3)
  })
  it.each([
    [1, 59.77],
    [8, 58.19],
    [24, 54.82],
    [48, 50.32],
  ])('cools from 60 °C to the OCHRE mean after %d h', (hours, expectedC) => {
    const end = simulate(model(), uniformState(60, 12), { startMin: 0, endMin: hours * 60, on: [], draws: [] }).end
    expect(Math.abs(mean(end.nodesC) - expectedC)).toBeLessThan(0.1)
  })
  it('gives 3380 W and 4131 W at 208 V for 4500 W and 5500 W rated at 240 V (maker’s down-rating statement)', () => {
    expect(model({}, 15, 208).upper?.powerW).toBeCloseTo(3_380, 0)
    expect(model({ upperElement: { ratedPowerW: 5_500, ratedVoltageV: 240 } }, 15, 208).upper?.powerW).toBeCloseTo(4_131.1, 0)
  })
  it('tempers a shower to the use temperature: 41 °C from 60 °C with 15 °C mains takes 0.578 hot water', () => {
    const draw = { startMin: 0, endMin: 1, flowLPerMin: 10, useTemperatureC: 41 }
    const { energyDeliveredJ } = simulate(model(), uniformState(60, 12), { startMin: 0, endMin: 1, on: [], draws: [draw] })
    expect(energyDeliveredJ / (10 * 4_146.9 * 45)).toBeCloseTo(0.578, 3)
  })
  it('closes the energy balance to 1e-6 of the energy moved, in draws of twice the tank too', () => {
    fc.assert(
      fc.property(
        fc.array(fc.double({ min: 10, max: 70, noNaN: true }), { minLength: 12, maxLength: 12 }),
        fc.integer({ min: 1, max: 60 }),
        fc.integer({ min: 1, max: 400 }),
        (start, minutes, litres) => {
          const nodesC = [...start].sort((one, other) => other - one)
          const draws = [{ startMin: 20, endMin: 20 + minutes, flowLPerMin: litres / minutes, useTemperatureC: 60 }]
          const tank = model()
          const result = simulate(
            tank,
            { nodesC, upperCalls: true, lowerCalls: true },
            { startMin: 0, endMin: 1440, on: [{ startMin: 0, endMin: 700 }], draws },
          )
          const storedJ = (mean(result.end.nodesC) - mean(nodesC)) * 12 * tank.nodeHeatJPerK
          // Delivered heat is counted above the inlet temperature, as the stored heat of the water that replaced it is.
          const moved = result.energyInJ + Math.abs(result.energyDeliveredJ) + Math.abs(result.energyLostJ)
          expect(Math.abs(result.energyInJ - result.energyDeliveredJ - result.energyLostJ - storedJ)).toBeLessThan(1e-6 * moved)
        },
      ),
      { numRuns: 60 },
    )
  })
  it('never makes water colder by a longer run', () => {
    fc.assert(
      fc.property(fc.integer({ min: 0, max: 200 }), fc.integer({ min: 0, max: 60 }), (minutes, more) => {
        const short = simulate(model(), uniformState(20, 12), {
          startMin: 0,
          endMin: 300,
          on: [{ startMin: 0, endMin: minutes }],
          draws: [],
        })
        const long = simulate(model(), uniformState(20, 12), {
          startMin: 0,
          endMin: 300,
          on: [{ startMin: 0, endMin: minutes + more }],
          draws: [],
        })
        expect(mean(long.end.nodesC)).toBeGreaterThanOrEqual(mean(short.end.nodesC) - 0.01) // thermostat steps fall differently: under 0.01 K
      }),
      { numRuns: 40 },
    )
  })
})

describe('mixInversions', () => {
  it('mixes 28…39 °C rising downwards to 33.5 everywhere (OCHRE test values)', () => {
    const t = Float64Array.from([28, 29, 30, 31, 32, 33, 34, 35, 36, 37, 38, 39])
    mixInversions(t, 12)
    for (const value of t) expect(value).toBeCloseTo(33.5, 6)
  })
  it('mixes only what is inverted (OCHRE test values)', () => {
    const t = Float64Array.from([34, 35, 34, 33, 32, 31, 32, 33, 32, 31, 30, 30])
    mixInversions(t, 12)
    expect([t[0], t[2], t[5], t[7], t[11]]).toEqual([34.5, 34, 32, 32, 30])
  })
})

describe('reference cases', () => {
  it('scales its volume from US gallons exactly (NIST SP 811)', () => {
    expect(45 * L_PER_US_GAL).toBeCloseTo(170.34, 2)
  })
})
