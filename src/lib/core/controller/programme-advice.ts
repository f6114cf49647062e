/** The programmes of a time switch that are on long enough before the water is needed, the nearest to today's first. */
import { MIN_PER_DAY } from '../units.ts'
import type { Weekday } from '../time/types.ts'
import { MOST_SUGGESTIONS, none, type PartsAdvice, type RunNeed, type Suggestion } from './advice.ts'
import { clockWords } from './describe.ts'
import { runDuration } from './run-duration.ts'
import { runSource } from './run-source.ts'
import type { SwitchStep, TimeSwitchController } from './types.ts'

/** A step is not begun more than this earlier: past it the heater, not the programme, is at fault (common practice, no source). */
const MOST_EARLIER_MIN = 720

/** 2024-01-01 was a Monday; any week without a clock change will do. */
const DAY_OF: Readonly<Record<Weekday, string>> = {
  0: '2024-01-01',
  1: '2024-01-02',
  2: '2024-01-03',
  3: '2024-01-04',
  4: '2024-01-05',
  5: '2024-01-06',
  6: '2024-01-07',
}

type ReadyBy = NonNullable<RunNeed['readyBy']>

export function programmeAdvice(controller: TimeSwitchController, need: RunNeed): PartsAdvice {
  const { readyBy } = need
  if (!readyBy) return none('It is not known when the water has to be ready, so no programme can be checked.')
  const suggestions: Suggestion[] = []
  for (const { what, programme } of candidates(controller, readyBy)) {
    // Whoever changes a programme sets the clock in the same visit.
    const changed: TimeSwitchController = { ...controller, programme, driftMin: 0 }
    const onMin = surelyOnMin(changed, readyBy)
    if (onMin < need.minMin) continue
    suggestions.push({
      controller: changed,
      what,
      duration: runDuration(changed, []),
      reason: `It is then on for ${Math.floor(onMin)} min before ${clockWords(readyBy.minuteOfDay)}, half a step of ${controller.stepMin} min taken off; ${Math.ceil(need.minMin)} min are needed.`,
    })
    if (suggestions.length === MOST_SUGGESTIONS) break
  }
  if (suggestions.length > 0) return { status: 'found', suggestions }
  return none(
    `No programme that begins up to ${MOST_EARLIER_MIN / 60} h earlier is on for ${Math.ceil(need.minMin)} min before ${clockWords(readyBy.minuteOfDay)}.`,
  )
}

/** Minutes of the last on-interval before the moment, as the model has it, with its start as late as it may be. */
export function surelyOnMin(controller: TimeSwitchController, { weekday, minuteOfDay }: ReadyBy): number {
  const source = runSource(controller, {
    day: DAY_OF[weekday],
    duration: runDuration(controller, []),
    toElapsedMin: (minute) => minute,
    aheadAtStartMin: 0,
  })
  if (source.kind !== 'clocked') return 0
  const before = source.onIntervals.filter((on) => on.startMin < minuteOfDay).at(-1)
  return before ? Math.min(before.endMin, minuteOfDay) - before.startMin - source.uncertaintyMin : 0
}

interface Candidate {
  readonly what: string
  readonly programme: readonly SwitchStep[]
}

function* candidates({ programme, stepMin, driftMin }: TimeSwitchController, readyBy: ReadyBy): Generator<Candidate> {
  if (driftMin !== 0) yield { what: 'Set its clock right', programme }
  const index = lastStepBefore(programme, readyBy)
  const step = programme[index]
  for (let earlierMin = stepMin; earlierMin <= MOST_EARLIER_MIN; earlierMin += stepMin) {
    if (step) {
      // A step that ended before the water is needed is also made to last until then.
      const offMin = Math.max(step.offMin, Math.floor(readyBy.minuteOfDay / stepMin) * stepMin)
      for (const until of offMin > step.offMin ? [step.offMin, offMin] : [step.offMin]) {
        const changed = wrapped({ ...step, onMin: step.onMin - earlierMin, offMin: until })
        if (changed.offMin > 2 * MIN_PER_DAY) continue
        const last = until === step.offMin ? '' : ` and off at ${clockWords(until)}`
        yield {
          what: `Switch on at ${clockWords(changed.onMin)}${last}, ${earlierMin} min earlier than ${clockWords(step.onMin)}`,
          programme: programme.map((other, at) => (at === index ? changed : other)),
        }
      }
    } else {
      const offMin = Math.floor(readyBy.minuteOfDay / stepMin) * stepMin
      const added = wrapped({ weekday: null, onMin: offMin - earlierMin, offMin })
      yield { what: `Switch on from ${clockWords(added.onMin)} to ${clockWords(offMin)} daily`, programme: [...programme, added] }
    }
  }
}

/** The step of that weekday that begins last before the moment. */
function lastStepBefore(programme: readonly SwitchStep[], { weekday, minuteOfDay }: ReadyBy): number {
  let best = -1
  programme.forEach((step, index) => {
    const begun = (step.weekday === null || step.weekday === weekday) && step.onMin < minuteOfDay
    if (begun && step.onMin > (programme[best]?.onMin ?? -1)) best = index
  })
  return best
}

/** A step that would begin before midnight belongs to the day before. */
function wrapped(step: SwitchStep): SwitchStep {
  if (step.onMin >= 0) return step
  const weekday = step.weekday === null ? null : (((step.weekday + 6) % 7) as Weekday)
  return { weekday, onMin: step.onMin + MIN_PER_DAY, offMin: step.offMin + MIN_PER_DAY }
}
