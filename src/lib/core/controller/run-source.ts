/** Turns a controller into what the tank model is given: a run that a person starts, or a clock's on-intervals of one day. */
import { MIN_PER_DAY } from '../units.ts'
import { addDays, weekdayOf } from '../time/civil.ts'
import type { Day, MinuteInterval } from '../time/types.ts'
import type { Controller, DurationOutcome, RunSource, SwitchStep } from './types.ts'

export interface RunSourceDay {
  readonly day: Day
  readonly duration: DurationOutcome
  /** Elapsed minutes from local midnight of a wall-clock minute; differs from it on clock-change days only. */
  readonly toElapsedMin: (minuteOfDay: number) => number
  /**
   * Minutes by which the clock of a switch that does not follow clock changes is ahead of local time at the day's first instant,
   * for that reason alone.
   */
  readonly aheadAtStartMin: number
}

export function runSource(controller: Controller, { day, duration, toElapsedMin, aheadAtStartMin }: RunSourceDay): RunSource {
  switch (controller.kind) {
    case 'one-shot-rc':
    case 'one-shot-fixed':
    case 'dial': {
      const { typical, guaranteed } = duration
      const expectedMin = typical.maxMin === null ? typical.minMin : (typical.minMin + typical.maxMin) / 2
      return { kind: 'pressed', guaranteedMin: guaranteed.minMin, expectedMin, longestMin: guaranteed.maxMin }
    }
    case 'time-switch': {
      const { programme: steps, followsClockChange, driftMin, stepMin } = controller
      // A clock that does not follow counts on through a change: on that day its minutes are elapsed ones.
      const clock = followsClockChange
        ? { aheadMin: driftMin, toElapsedMin }
        : { aheadMin: driftMin + aheadAtStartMin, toElapsedMin: (minute: number) => minute }
      return { kind: 'clocked', onIntervals: dayIntervals({ steps, day, ...clock }), uncertaintyMin: stepMin / 2 }
    }
    case 'supplier-contactor':
      return {
        kind: 'clocked',
        onIntervals: dayIntervals({ steps: controller.windows, day, aheadMin: 0, toElapsedMin }),
        uncertaintyMin: 0,
      }
  }
}

interface DaySteps {
  readonly steps: readonly SwitchStep[]
  readonly day: Day
  readonly aheadMin: number
  readonly toElapsedMin: (minuteOfDay: number) => number
}

/** On-intervals of the day, the day before it (negative minutes) and the one after, in order, merged: a fast clock starts tomorrow's first step tonight. */
function dayIntervals({ steps, day, aheadMin, toElapsedMin }: DaySteps): readonly MinuteInterval[] {
  const found: MinuteInterval[] = []
  for (const shift of [-1, 0, 1]) {
    const weekday = weekdayOf(addDays(day, shift))
    for (const step of steps) {
      if (step.weekday !== null && step.weekday !== weekday) continue
      // A clock that is ahead switches early.
      const onMin = step.onMin - aheadMin + shift * MIN_PER_DAY
      const offMin = step.offMin - aheadMin + shift * MIN_PER_DAY
      found.push({ startMin: elapsed(onMin, toElapsedMin), endMin: elapsed(offMin, toElapsedMin) })
    }
  }
  return merge(found)
}

const elapsed = (minute: number, toElapsedMin: (minuteOfDay: number) => number): number => (minute < 0 ? minute : toElapsedMin(minute))

function merge(intervals: readonly MinuteInterval[]): readonly MinuteInterval[] {
  const merged: MinuteInterval[] = []
  for (const next of [...intervals].sort((one, other) => one.startMin - other.startMin)) {
    const last = merged.at(-1)
    if (last && next.startMin <= last.endMin)
      merged[merged.length - 1] = { startMin: last.startMin, endMin: Math.max(last.endMin, next.endMin) }
    else merged.push(next)
  }
  return merged
}
