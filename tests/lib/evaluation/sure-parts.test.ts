/** A timer that may never stop: the flag names parts with which it surely does. */
import { describe, expect, it } from 'vitest'
import { newId, type HardwareRecordId } from '#db/ids.ts'
import { runDuration } from '#lib/core/controller/run-duration.ts'
import { british, ONE_SHOT_THAT_MAY_NEVER_STOP } from '#lib/demo/installations.ts'
import { sureParts } from '#lib/evaluation/sure-parts.ts'

const hardware = (controller: typeof ONE_SHOT_THAT_MAY_NEVER_STOP) => ({
  recordId: newId<HardwareRecordId>(),
  installation: british(controller, 120),
  measured: [],
  recordedAtMs: 0,
})

describe('sureParts', () => {
  it('aims at the run it was meant for where nothing is asked of it', () => {
    // R C ln 3: 1.5 MΩ and 470 µF are meant for 12.9 min.
    const timer = { ...ONE_SHOT_THAT_MAY_NEVER_STOP, resistanceOhm: 1.5e6 } as typeof ONE_SHOT_THAT_MAY_NEVER_STOP
    const lines = sureParts(hardware(timer), runDuration(timer, []), [])
    expect(lines.length).toBe(2)
    for (const line of lines) {
      expect(line.kind).toBe('fix')
      const [, least, most] = /at least (\d+) min, at most (\d+) min/.exec(line.value) ?? []
      expect(Number(least)).toBeGreaterThanOrEqual(12)
      expect(Number(most)).toBeLessThanOrEqual(33)
    }
  })
  it('says why where no stocked part surely does', () => {
    const lines = sureParts(hardware(ONE_SHOT_THAT_MAY_NEVER_STOP), runDuration(ONE_SHOT_THAT_MAY_NEVER_STOP, []), [])
    expect(lines).toHaveLength(1)
    expect(lines[0]?.value).toMatch(/Stocked parts spread too widely|No stocked resistor and capacitor/)
  })
})
