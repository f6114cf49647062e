/** Readiness by law and by published rules of thumb: what is ready, what is short, and by how much. */
import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { assessReadiness } from '#lib/core/tank/week.ts'
import type { ShowerNeed, TankSpec, UnitDay } from '#lib/core/tank/types.ts'

const TANK: TankSpec = {
  nominalVolumeL: 151,
  actualVolumeL: null,
  heightM: null,
  loss: { kind: 'uef', uef: 0.92, drawPattern: 'medium' },
  upperElement: { ratedPowerW: 4_500, ratedVoltageV: 240 },
  lowerElement: { ratedPowerW: 4_500, ratedVoltageV: 240 },
  shareAboveUpperFraction: 1 / 4,
  setPointC: 60,
  deadBandK: 5.6,
  ambientC: 20,
  mixingValveC: null,
}
const need = (patch: Partial<ShowerNeed> = {}): ShowerNeed => ({
  readyByMin: 420,
  count: 1,
  minutesEach: 8,
  gapMin: 5,
  flowLPerMin: 7.57,
  useTemperatureC: 41.5,
  ...patch,
})
const day = (patch: Partial<UnitDay> = {}): UnitDay => ({
  tank: TANK,
  supplyVoltageV: 240,
  inletC: 15,
  runs: { kind: 'pressed', guaranteedMin: 60, expectedMin: 62, longestMin: 65 },
  needs: [need()],
  willing: [],
  start: { kind: 'periodic' },
  ...patch,
})
const pressed = (guaranteedMin: number): UnitDay['runs'] => ({
  kind: 'pressed',
  guaranteedMin,
  expectedMin: guaranteedMin,
  longestMin: guaranteedMin,
})
const first = (unit: UnitDay) => {
  const outcome = assessReadiness(unit).needs[0]
  if (!outcome) throw new Error('the day has a need')
  return outcome
}

describe('assessReadiness', () => {
  it('serves an 8-minute shower of 7.57 L/min from a cold 40 gal tank within 45 min of switching on at 4.5 kW (OCHRE 12-node table: 8 of 8 minutes)', () => {
    const outcome = first(day({ start: { kind: 'cold' }, runs: pressed(53), needs: [need({ useTemperatureC: 40.56 })] }))
    expect(outcome.status).toBe('ready')
    expect(outcome.startByMin).toBeGreaterThanOrEqual(420 - 46)
  })
  it('does not serve it from cold after 15 min in a 50 gal tank (same table: 0 minutes, top at 39.2 °C)', () => {
    const outcome = first(day({ tank: { ...TANK, nominalVolumeL: 189 }, start: { kind: 'cold' }, runs: pressed(15) }))
    expect(outcome.status).toBe('short')
    expect(outcome.minutesServed).toBeLessThan(4)
  })
  it('names the shortfall as the required run less the run that can be counted on', () => {
    const outcome = first(day({ runs: pressed(20) }))
    expect(outcome.status).toBe('short')
    expect(outcome.shortfallMin).toBe((outcome.requiredRunMin ?? 0) - 20)
    expect(outcome.reason).toContain(`${outcome.shortfallMin} min short`)
  })
  it('is ready exactly from its own required run on', () => {
    const required = first(day()).requiredRunMin ?? 0
    expect(first(day({ runs: pressed(required) })).status).toBe('ready')
    expect(first(day({ runs: pressed(required - 3) })).status).toBe('short')
  })
  it('keeps its promise from the start-by and from any earlier start in the window', () => {
    const outcome = first(day())
    expect(outcome.startByMin ?? 999).toBeLessThanOrEqual(420)
    expect(outcome.startByMin ?? 0).toBeGreaterThanOrEqual(420 - (outcome.requiredRunMin ?? 0) - 1)
    expect(outcome.runWindow?.earliestStartMin ?? 999).toBeLessThan(outcome.startByMin ?? 0)
  })
  it('calls a set point below the use temperature impossible, whatever the run', () => {
    const outcome = first(day({ tank: { ...TANK, setPointC: 38 } }))
    expect(outcome).toMatchObject({ status: 'impossible', requiredRunMin: null, shortfallMin: 0 })
    expect(outcome.reason).toContain('38')
  })
  it('reads a clock whose hours are too few as short', () => {
    const runs: UnitDay['runs'] = {
      kind: 'clocked',
      onIntervals: [
        { startMin: -990, endMin: -970 },
        { startMin: 450, endMin: 470 },
      ],
      uncertaintyMin: 7,
    }
    const outcome = first(day({ runs }))
    expect(outcome.status).toBe('short')
    expect(outcome.shortfallMin).toBeGreaterThanOrEqual(1)
  })
  it('reads a clock that is on long enough before the need as ready, with its own start as start-by', () => {
    const runs: UnitDay['runs'] = { kind: 'clocked', onIntervals: [{ startMin: 300, endMin: 390 }], uncertaintyMin: 7 }
    expect(first(day({ runs }))).toMatchObject({ status: 'ready', startByMin: 300, chosenRunMin: 90 })
  })
  it('needs nothing on a day without showers', () => {
    expect(assessReadiness(day({ needs: [] })).status).toBe('no-need')
  })
  it('needs a longer run for more minutes, colder mains and less voltage', () => {
    fc.assert(
      fc.property(fc.integer({ min: 5, max: 12 }), fc.integer({ min: 5, max: 18 }), (minutesEach, inlet) => {
        const base = first(day({ needs: [need({ minutesEach })], inletC: inlet })).requiredRunMin ?? Infinity
        expect(
          first(day({ needs: [need({ minutesEach: minutesEach + 2 })], inletC: inlet })).requiredRunMin ?? Infinity,
        ).toBeGreaterThanOrEqual(base)
        expect(first(day({ needs: [need({ minutesEach })], inletC: inlet - 3 })).requiredRunMin ?? Infinity).toBeGreaterThanOrEqual(base)
        expect(
          first(day({ needs: [need({ minutesEach })], inletC: inlet, supplyVoltageV: 208 })).requiredRunMin ?? Infinity,
        ).toBeGreaterThanOrEqual(base)
      }),
      { numRuns: 15 },
    )
  })
  it('books a settled day whose energy in is delivered and lost', () => {
    const { energyInKwh, energyDeliveredKwh, energyLostKwh } = assessReadiness(day())
    // Settled to 0.05 K a node: 0.008 kWh in 136 L.
    expect(Math.abs(energyInKwh - energyDeliveredKwh - energyLostKwh)).toBeLessThan(0.2)
    expect(energyDeliveredKwh).toBeGreaterThan(1.5)
  })
})
