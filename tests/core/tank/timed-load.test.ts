/** Other timed loads by arithmetic and by law. */
import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { assessTimedLoad, type TimedLoad } from '#lib/core/tank/timed-load.ts'

const charger: TimedLoad = { kind: 'energy', energyKwh: 10, efficiencyFraction: 0.9, powerW: 3_700 }
const dryer: TimedLoad = {
  kind: 'programme',
  phases: [
    { durationMin: 60, powerW: 2_400 },
    { durationMin: 20, powerW: 300 },
  ],
}
const pressed = (guaranteedMin: number) =>
  ({ kind: 'pressed', guaranteedMin, expectedMin: guaranteedMin, longestMin: guaranteedMin }) as const

describe('assessTimedLoad', () => {
  it('needs the energy over the efficiency over the power: 10 kWh at 0.9 and 3.7 kW are 180.2 min', () => {
    const outcome = assessTimedLoad({ load: charger, runs: pressed(240), readyByMin: 420 })
    expect(outcome).toMatchObject({ status: 'ready', requiredRunMin: 181, startByMin: 239, energyMissingKwh: 0 })
    expect(outcome.energyInKwh).toBeCloseTo(10 / 0.9, 9)
  })
  it('names what is missing when the run is too short', () => {
    const outcome = assessTimedLoad({ load: charger, runs: pressed(120), readyByMin: 420 })
    expect(outcome).toMatchObject({ status: 'short', shortfallMin: 61 })
    expect(outcome.energyInKwh + outcome.energyMissingKwh).toBeCloseTo(10 / 0.9, 9)
  })
  it('adds a clock’s hours up for energy, and wants one of them whole for a programme', () => {
    const runs = {
      kind: 'clocked',
      uncertaintyMin: 0,
      onIntervals: [
        { startMin: 60, endMin: 120 },
        { startMin: 180, endMin: 320 },
      ],
    } as const
    expect(assessTimedLoad({ load: charger, runs, readyByMin: 420 }).status).toBe('ready')
    expect(assessTimedLoad({ load: dryer, runs, readyByMin: 420 })).toMatchObject({ status: 'ready', startByMin: 240 })
    expect(assessTimedLoad({ load: dryer, runs: { ...runs, onIntervals: [runs.onIntervals[0]] }, readyByMin: 420 }).status).toBe('short')
  })
  it('is impossible for a load that draws nothing', () => {
    expect(assessTimedLoad({ load: { ...charger, powerW: 0 }, runs: pressed(60), readyByMin: 420 }).status).toBe('impossible')
  })
  it('never gets less done by a longer run', () => {
    fc.assert(
      fc.property(
        fc.integer({ min: 0, max: 300 }),
        fc.integer({ min: 0, max: 60 }),
        fc.constantFrom(charger, dryer),
        (minutes, more, load) => {
          const by = (guaranteedMin: number) => assessTimedLoad({ load, runs: pressed(guaranteedMin), readyByMin: 420 })
          expect(by(minutes + more).energyInKwh).toBeGreaterThanOrEqual(by(minutes).energyInKwh - 1e-9)
          expect(by(minutes + more).shortfallMin).toBeLessThanOrEqual(by(minutes).shortfallMin)
        },
      ),
    )
  })
})
