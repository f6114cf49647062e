/** Clock changes of named zones against the IANA database, and what they do to a switch that does not follow. */
import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { clockEffect, clockRound, nextClockChanges, visitWhen } from '#lib/core/controller/clock-change.ts'
import { runDuration } from '#lib/core/controller/run-duration.ts'
import { runSource } from '#lib/core/controller/run-source.ts'
import type { Controller, TimeSwitchController } from '#lib/core/controller/types.ts'
import { civilOf, dayBounds, elapsedOf } from '#lib/core/time/civil.ts'
import { offsetMin } from '#lib/core/time/zone.ts'
import published from '../../fixtures/controller/clock-changes.json' with { type: 'json' }

const SWITCH: TimeSwitchController = {
  kind: 'time-switch',
  stepMin: 15,
  programme: [{ weekday: null, onMin: 330, offMin: 390 }],
  followsClockChange: false,
  driftMin: 0,
  powerReserveH: null,
}
const changesOf = (zone: string, from: string) => nextClockChanges(zone, Date.parse(from))
const effects = (zone: string, from: string, controller: Controller = SWITCH) =>
  changesOf(zone, from).map((change) => ({ change, effect: clockEffect(controller, { zone, change, rightAtMs: Date.parse(from) }) }))

describe('nextClockChanges', () => {
  it.each(published.zones)('finds the next two of $zone', ({ zone, from, changes }) => {
    expect(changesOf(zone, from).map(({ atMs, shiftMin }) => ({ atUtc: new Date(atMs).toISOString(), shiftMin }))).toEqual(
      changes.map(({ atUtc, shiftMin }) => ({ atUtc: new Date(atUtc).toISOString(), shiftMin })),
    )
  })
  it('covers both hemispheres, half-hour zones, a half-hour change, and zones that never change', () => {
    const zones = published.zones.map(({ zone }) => zone)
    for (const zone of ['Europe/London', 'Australia/Sydney', 'Australia/Adelaide', 'Australia/Lord_Howe', 'Asia/Kolkata', 'Asia/Kathmandu'])
      expect(zones).toContain(zone)
  })
  it('says until when an unset switch stays wrong: the change after', () => {
    const [spring, autumn] = changesOf('Europe/London', '2026-01-15T00:00:00Z')
    expect(spring?.untilMs).toBe(autumn?.atMs)
    expect(new Date(autumn?.untilMs ?? 0).toISOString()).toBe('2027-03-28T01:00:00.000Z')
  })
})

describe('clockEffect', () => {
  it('a switch that does not follow is an hour late after spring, and right again after autumn', () => {
    expect(effects('Europe/London', '2026-01-15T00:00:00Z').map(({ effect }) => effect)).toEqual([
      { status: 'off', aheadMin: -60 },
      { status: 'right', because: 'comes-right', aheadMin: 0 },
    ])
  })
  it('a switch set in summer is an hour early after autumn, south of the equator in April', () => {
    expect(effects('Europe/London', '2026-07-01T00:00:00Z')[0]?.effect).toEqual({ status: 'off', aheadMin: 60 })
    const [first] = effects('Australia/Adelaide', '2026-01-15T00:00:00Z')
    expect(first?.effect).toEqual({ status: 'off', aheadMin: 60 })
    expect(civilOf(first?.change.atMs ?? 0, 'Australia/Adelaide').day).toBe('2026-04-05')
  })
  it('is off by half an hour where the clocks move by half an hour', () => {
    expect(effects('Australia/Lord_Howe', '2026-01-15T00:00:00Z')[0]?.effect).toEqual({ status: 'off', aheadMin: 30 })
  })
  it('adds what its clock has drifted, and calls it right where the change cancels that', () => {
    const drifted = (driftMin: number) => effects('Europe/London', '2026-01-15T00:00:00Z', { ...SWITCH, driftMin })[0]?.effect
    expect(drifted(-12)).toEqual({ status: 'off', aheadMin: -72 })
    expect(drifted(60)).toEqual({ status: 'right', because: 'comes-right', aheadMin: 0 })
  })
  it('asks the supplier about a contactor, and leaves alone what follows or has no clock', () => {
    const effectOf = (controller: Controller) => effects('Europe/London', '2026-01-15T00:00:00Z', controller)[0]?.effect
    expect(effectOf({ kind: 'supplier-contactor', windows: [] })).toEqual({ status: 'ask-supplier' })
    expect(effectOf({ ...SWITCH, followsClockChange: true })).toEqual({ status: 'right', because: 'follows' })
    expect(effectOf({ kind: 'one-shot-fixed', settingMin: 60, toleranceFraction: 0.05 })).toEqual({ status: 'right', because: 'no-clock' })
  })
  it('agrees with when the model switches the load on the day after the change', () => {
    const zones = published.zones.filter(({ changes }) => changes.length > 0)
    fc.assert(
      fc.property(
        fc.constantFrom(...zones),
        fc.integer({ min: -20, max: 20 }),
        fc.integer({ min: 8, max: 80 }),
        ({ zone, from }, driftMin, quarter) => {
          const programme = [{ weekday: null, onMin: quarter * 15, offMin: quarter * 15 + 15 }]
          for (const { change, effect } of effects(zone, from, { ...SWITCH, driftMin, programme })) {
            const { day } = civilOf(change.atMs + 36 * 3_600_000, zone)
            const controller = { ...SWITCH, driftMin, programme }
            const source = runSource(controller, {
              day,
              duration: runDuration(controller, []),
              toElapsedMin: (minute) => elapsedOf(day, minute, zone),
              aheadAtStartMin: offsetMin(Date.parse(from), zone) - offsetMin(dayBounds(day, zone).startsAtMs, zone),
            })
            const starts = source.kind === 'clocked' ? source.onIntervals.map((on) => on.startMin) : []
            const aheadMin = effect.status === 'off' ? effect.aheadMin : driftMin
            expect(starts).toContain(quarter * 15 - aheadMin)
          }
        },
      ),
    )
  })
})

describe('clockRound', () => {
  const round = (zone: string, over: Partial<TimeSwitchController> = {}, right = '2026-01-15T00:00:00Z') =>
    clockRound({ ...SWITCH, ...over }, { zone, nowMs: Date.parse('2026-01-15T00:00:00Z'), rightAtMs: Date.parse(right) }).map(
      ({ effect }) => effect,
    )

  it('asks for a visit at both changes: what is set at the first is off at the second', () => {
    expect(round('America/New_York')).toEqual([
      { status: 'off', aheadMin: -60 },
      { status: 'off', aheadMin: 60 },
    ])
    expect(round('Australia/Sydney')).toEqual([
      { status: 'off', aheadMin: 60 },
      { status: 'off', aheadMin: -60 },
    ])
  })
  it('leaves a switch alone that the last change put wrong and the next puts right, and lists it at the one after', () => {
    expect(round('Europe/London', {}, '2025-07-01T00:00:00Z')).toEqual([
      { status: 'right', because: 'comes-right', aheadMin: 0 },
      { status: 'off', aheadMin: 60 },
    ])
  })
  it('knows a switch that was set an hour ahead before the change as right after it', () => {
    expect(round('Europe/London', { driftMin: 60 })).toEqual([
      { status: 'right', because: 'comes-right', aheadMin: 0 },
      { status: 'off', aheadMin: 60 },
    ])
  })
  it('is empty where clocks never change, and never asks for a visit to what follows', () => {
    expect(round('Asia/Kolkata')).toEqual([])
    expect(round('Asia/Kathmandu')).toEqual([])
    for (const effect of round('Europe/London', { followsClockChange: true })) expect(effect.status).toBe('right')
  })
})

describe('visitWhen', () => {
  const when = (zone: string, from: string) => {
    const [first] = effects(zone, from)
    return first?.effect.status === 'off' ? visitWhen(first.effect, { zone, change: first.change }) : null
  }
  it('sends somebody on the day before where it would run late, and in the week after where early', () => {
    // 29 March 2026 and 25 October 2026 are the Sundays of the change.
    expect(when('Europe/London', '2026-01-15T00:00:00Z')).toEqual({ side: 'before', dueDay: '2026-03-28' })
    expect(when('Europe/London', '2026-07-01T00:00:00Z')).toEqual({ side: 'after', dueDay: '2026-11-01' })
  })
  it('takes the Saturday too where clocks change at midnight or on Saturday night', () => {
    // Havana goes forward at 00:00 on Sunday 8 March 2026; Nuuk at 24:00 less an hour on Saturday 28 March 2026 (IANA tz database).
    expect(when('America/Havana', '2026-01-15T00:00:00Z')).toEqual({ side: 'before', dueDay: '2026-03-07' })
    expect(when('America/Nuuk', '2026-01-15T00:00:00Z')).toEqual({ side: 'before', dueDay: '2026-03-28' })
  })
})
