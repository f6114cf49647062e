import { describe, expect, it } from 'vitest'
import fc from 'fast-check'
import { restartRoster, type RestartInput } from '#lib/core/plan/restart-roster.ts'

const supply = (limitKw: number, baseKw = 1) => [{ id: 'service', limitKw, baseKw: new Array<number>(96).fill(baseKw) }]
const cold = (count: number, powerKw: number, worstSlots: number) =>
  Array.from({ length: count }, (_, place) => ({ unitId: `unit ${place + 1}`, powerKw, limitKw: [powerKw], worstSlots }))

function rostered(input: RestartInput) {
  const outcome = restartRoster(input)
  if (outcome.status !== 'rostered') throw new Error(JSON.stringify(outcome.faults))
  return outcome
}

describe('restartRoster', () => {
  it('starts ten equal units in turns of three where three fit, and is done after four turns, which nothing beats', () => {
    const { lines, lastReadySlot, lastReadyAtLeastSlot, unserved } = rostered({
      slotMin: 5,
      slots: 96,
      units: cold(10, 4.5, 12),
      limits: supply(15),
      seed: 1,
    })
    expect(unserved).toEqual([])
    expect(lines.map(({ order }) => order)).toEqual([1, 2, 3, 4, 5, 6, 7, 8, 9, 10])
    // Ten runs, three at a time, twelve slots each: four turns by counting.
    expect(lastReadySlot).toBe(48)
    expect(lastReadyAtLeastSlot).toBeLessThanOrEqual(48)
    expect(lines.slice(0, 9).map(({ startSlot }) => startSlot)).toEqual([0, 0, 0, 12, 12, 12, 24, 24, 24])
  })

  it('starts everybody at once where the service carries them', () => {
    const { lastReadySlot, lastReadyAtLeastSlot } = rostered({ slotMin: 5, slots: 96, units: cold(4, 3, 10), limits: supply(13), seed: 1 })
    expect([lastReadySlot, lastReadyAtLeastSlot]).toEqual([10, 10])
  })

  it('names who has no place within the horizon, with the reason', () => {
    const units = [...cold(1, 3, 10), { unitId: 'sauna', powerKw: 20, limitKw: [20], worstSlots: 4 }]
    const { lines, unserved } = rostered({ slotMin: 5, slots: 96, units, limits: supply(13), seed: 1 })
    expect(lines.map(({ unitId }) => unitId)).toEqual(['unit 1'])
    expect(unserved).toEqual([{ unitId: 'sauna', reason: 'too-large-alone' }])
  })

  it('answers an empty building with an empty roster', () => {
    expect(rostered({ slotMin: 5, slots: 96, units: [], limits: supply(13), seed: 1 })).toMatchObject({
      lines: [],
      lastReadySlot: 0,
      lastReadyAtLeastSlot: 0,
    })
  })

  it('keeps the limit in every slot and is never done before it says it could be', () => {
    const unit = fc.record({ powerKw: fc.constantFrom(2, 3, 3.8, 4.5), worstSlots: fc.integer({ min: 2, max: 12 }) })
    fc.assert(
      fc.property(fc.array(unit, { maxLength: 9 }), fc.integer({ min: 6, max: 16 }), (raw, limitKw) => {
        const units = raw.map((each, place) => ({ ...each, unitId: `unit ${place}`, limitKw: [each.powerKw] }))
        const { lines, lastReadySlot, lastReadyAtLeastSlot, unserved } = rostered({
          slotMin: 5,
          slots: 96,
          units,
          limits: supply(limitKw),
          seed: 2,
        })
        expect(lines.length + unserved.length).toBe(units.length)
        for (let slot = 0; slot < 96; slot++) {
          const on = lines.filter(({ startSlot, readySlot }) => startSlot <= slot && slot < readySlot)
          const kw = 1 + on.reduce((sum, { unitId }) => sum + (units.find((each) => each.unitId === unitId)?.powerKw ?? NaN), 0)
          // A milliwatt: rounding of sums.
          expect(on.length === 0 || kw <= limitKw + 1e-6).toBe(true)
        }
        expect(lastReadySlot).toBe(Math.max(0, ...lines.map(({ readySlot }) => readySlot)))
        expect(lastReadyAtLeastSlot).toBeLessThanOrEqual(lastReadySlot)
      }),
      { numRuns: 40, seed: 12, endOnFailure: true },
    )
  })
})
