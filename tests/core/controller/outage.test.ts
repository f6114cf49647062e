/** What a power cut leaves behind: a reserve either outlasts it or does not. */
import { describe, expect, it } from 'vitest'
import { afterOutage } from '#lib/core/controller/outage.ts'
import type { TimeSwitchController } from '#lib/core/controller/types.ts'

const SWITCH: TimeSwitchController = {
  kind: 'time-switch',
  stepMin: 15,
  programme: [],
  followsClockChange: true,
  driftMin: 0,
  powerReserveH: 100,
}

describe('afterOutage', () => {
  it('keeps the time to the last minute of the reserve, and loses what is beyond it', () => {
    expect(afterOutage(SWITCH, 100 * 60).status).toBe('keeps')
    expect(afterOutage(SWITCH, 100 * 60 + 25)).toMatchObject({ status: 'set-clock', slowByMin: 25 })
    expect(afterOutage({ ...SWITCH, powerReserveH: 0 }, 90)).toMatchObject({ status: 'set-clock', slowByMin: 90 })
  })
  it('does not call a reserve that nobody wrote down enough', () => {
    expect(afterOutage({ ...SWITCH, powerReserveH: null }, 1).status).toBe('not-known')
  })
  it('ends the run of a one-shot, and says that one of parts may start by itself', () => {
    expect(afterOutage({ kind: 'one-shot-fixed', settingMin: 60, toleranceFraction: 0.05 }, 5).status).toBe('run-lost')
  })
})
