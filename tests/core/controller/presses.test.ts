/** Presses of a one-shot's button against the datasheets' sentences, and laws of any sequence of them. */
import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { runsOfPresses } from '#lib/core/controller/presses.ts'

const tap = (atMin: number) => ({ pressedAtMin: atMin, releasedAtMin: atMin + 0.01 })

describe('runsOfPresses', () => {
  it('a press during a run does not extend it (not retriggerable: TI LMC555, SNAS558N)', () => {
    expect(runsOfPresses([tap(0), tap(20), tap(39)], 40)).toEqual([{ startMin: 0, endMin: 40 }])
  })
  it('a press after its end begins another', () => {
    expect(runsOfPresses([tap(0), tap(40)], 40)).toEqual([
      { startMin: 0, endMin: 40 },
      { startMin: 40, endMin: 80 },
    ])
  })
  it('a held button keeps it on until it is let go (the sequence ends only if the trigger is high: TI SLFS022, 1992, p. 9)', () => {
    expect(runsOfPresses([{ pressedAtMin: 0, releasedAtMin: 55 }], 40)).toEqual([{ startMin: 0, endMin: 55 }])
    expect(runsOfPresses([tap(0), { pressedAtMin: 35, releasedAtMin: 50 }], 40)).toEqual([{ startMin: 0, endMin: 50 }])
  })
  it('a stuck button never ends', () => {
    expect(runsOfPresses([{ pressedAtMin: 5, releasedAtMin: Infinity }], 40)).toEqual([{ startMin: 5, endMin: Infinity }])
  })
  it('never gives a run shorter than the timer, overlapping, or longer without a button held past its end', () => {
    const press = fc
      .tuple(fc.double({ min: 0, max: 500, noNaN: true }), fc.double({ min: 0.001, max: 120, noNaN: true }))
      .map(([pressedAtMin, heldMin]) => ({ pressedAtMin, releasedAtMin: pressedAtMin + heldMin }))
    fc.assert(
      fc.property(fc.array(press, { maxLength: 12 }), fc.double({ min: 1, max: 90, noNaN: true }), (presses, durationMin) => {
        const runs = runsOfPresses(presses, durationMin)
        for (const [index, run] of runs.entries()) {
          expect(run.endMin).toBeGreaterThanOrEqual(run.startMin + durationMin)
          if (run.endMin > run.startMin + durationMin) expect(presses.some((one) => one.releasedAtMin === run.endMin)).toBe(true)
          expect(run.endMin).toBeLessThanOrEqual(runs[index + 1]?.startMin ?? Infinity)
        }
        // Whenever a button is down, the load is on.
        for (const { pressedAtMin, releasedAtMin } of presses)
          expect(runs.some((run) => run.startMin <= pressedAtMin && releasedAtMin <= run.endMin)).toBe(true)
      }),
    )
  })
})
