/** Which controllers run off after a zone's next clock changes: which way, by how much, from when, and until when if nobody sets them. */
import { addDays, civilOf } from '../time/civil.ts'
import type { Day, Zone } from '../time/types.ts'
import { type ClockChange, clockChangesIn, offsetMin } from '../time/zone.ts'
import type { Controller } from './types.ts'

/** A switch within this of the right time needs no visit for it: it is finer than what a pin or a dial can be set to. */
const RIGHT_WITHIN_MIN = 1

export type ClockEffect =
  /** Nothing to do: it has no clock, follows by itself, or the change makes it right again, to `aheadMin`. */
  | { readonly status: 'right'; readonly because: 'no-clock' | 'follows' }
  | { readonly status: 'right'; readonly because: 'comes-right'; readonly aheadMin: number }
  /** The supplier's clock; only they can say. */
  | { readonly status: 'ask-supplier' }
  /** Off after the change. `aheadMin` above 0: its clock is fast and it switches early; below 0: late. */
  | { readonly status: 'off'; readonly aheadMin: number }

export interface ChangeCase {
  readonly zone: Zone
  readonly change: ClockChange
  /** When its clock was last set right. */
  readonly rightAtMs: number
}

export function clockEffect(controller: Controller, { zone, change, rightAtMs }: ChangeCase): ClockEffect {
  switch (controller.kind) {
    case 'one-shot-rc':
    case 'one-shot-fixed':
    case 'dial':
      return { status: 'right', because: 'no-clock' }
    case 'supplier-contactor':
      return { status: 'ask-supplier' }
    case 'time-switch': {
      if (controller.followsClockChange) return { status: 'right', because: 'follows' }
      // Between being set and the change the wall clock may have moved already; what counts is where it is after it.
      const movedMin = offsetMin(rightAtMs, zone) - offsetMin(change.atMs, zone)
      const aheadMin = movedMin + controller.driftMin
      if (Math.abs(movedMin) < RIGHT_WITHIN_MIN || Math.abs(aheadMin) < RIGHT_WITHIN_MIN)
        return { status: 'right', because: 'comes-right', aheadMin }
      return { status: 'off', aheadMin }
    }
  }
}

/** On which side of the change a switch is best set, and the local day by which. */
export interface VisitWhen {
  readonly side: 'before' | 'after'
  readonly dueDay: Day
}

/** An early switch warms too soon and may reach into dearer hours: within the week (common practice, no source). */
const AFTER_WITHIN_DAYS = 7
/** Clocks change at night or at midnight: half a day earlier is the afternoon or noon of the day before. */
const HALF_DAY_MS = 43_200_000

/**
 * A switch that would run late leaves its tenants cold on the first morning, so it is set on the day before, and runs early for
 * that one night; one that would run early still warms in time, and is set in the week after.
 */
export function visitWhen(
  effect: Extract<ClockEffect, { readonly status: 'off' }>,
  { zone, change }: Pick<ChangeCase, 'zone' | 'change'>,
): VisitWhen {
  if (effect.aheadMin < 0) return { side: 'before', dueDay: civilOf(change.atMs - HALF_DAY_MS, zone).day }
  return { side: 'after', dueDay: addDays(civilOf(change.atMs, zone).day, AFTER_WITHIN_DAYS) }
}

export interface RoundChange extends ClockChange {
  /** The change after it, which puts an unset switch right again where the two cancel; `null` = none within two years. */
  readonly untilMs: number | null
}

/** Every zone that still changes its clocks does so within a year; two years hold two changes and the one that ends the second. */
const SEARCH_MS = 2 * 366 * 86_400_000

/** The next changes of a zone after an instant, at most two; empty where clocks are not changed. */
export function nextClockChanges(zone: Zone, fromMs: number): readonly RoundChange[] {
  const changes = clockChangesIn({ startsAtMs: fromMs, endsAtMs: fromMs + SEARCH_MS }, zone)
  return changes.slice(0, 2).map((change, index) => ({ ...change, untilMs: changes[index + 1]?.atMs ?? null }))
}

export interface RoundStep {
  readonly change: RoundChange
  readonly effect: ClockEffect
}

/**
 * What the next two changes do to one controller. The second is answered for a switch that was set after the first: whoever makes
 * the first round has to make the second too, and a switch that came right by itself goes off with it.
 */
export function clockRound(
  controller: Controller,
  { zone, nowMs, rightAtMs }: { readonly zone: Zone; readonly nowMs: number; readonly rightAtMs: number },
): readonly RoundStep[] {
  const steps: RoundStep[] = []
  let now = { controller, rightAtMs }
  for (const change of nextClockChanges(zone, nowMs)) {
    const effect = clockEffect(now.controller, { zone, change, rightAtMs: now.rightAtMs })
    steps.push({ change, effect })
    if (now.controller.kind === 'time-switch' && !now.controller.followsClockChange) {
      const driftMin = effect.status === 'right' && effect.because === 'comes-right' ? effect.aheadMin : 0
      now = { controller: { ...now.controller, driftMin }, rightAtMs: change.atMs }
    }
  }
  return steps
}
