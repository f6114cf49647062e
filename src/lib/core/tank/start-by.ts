/**
 * Start-by for runs that a person starts: the latest start that serves a need with the run that can be counted on, heating going
 * on during the shower; and how much earlier the same run may be started. Inside that window no start serves less.
 */
import type { MinuteInterval } from '../time/types.ts'
import { MIN_PER_DAY } from '../units.ts'
import { type Cycle, drawsOf, earliestMin, needEndMin, servesAll } from './cycle.ts'
import { WINDOW_LENGTH_MIN } from './defaults.ts'
import { END_FRACTIONS, endOfRun } from './required-run.ts'
import { simulate, type TankState } from './simulate.ts'
import type { ShowerNeed } from './types.ts'

export interface StartChoice {
  readonly startMin: number
  /** Later than this it serves less; `startMin` itself unless an earlier one was agreed on. */
  readonly latestStartMin: number
  readonly servedMin: number
  readonly serves: boolean
  /** How early the same run may be started; worked out when asked, since a week asks for its last turn only. */
  readonly earliestStartMin: () => number
  /** Whether an earlier start serves as much, wherever it lies. */
  readonly servesAsMuch: (startMin: number) => boolean
}
type Chosen = Omit<StartChoice, 'earliestStartMin' | 'latestStartMin' | 'servesAsMuch'>

interface Before {
  readonly cycle: Cycle
  readonly index: number
  /** State at `earliestMin(cycle, index)`. */
  readonly state: TankState
  readonly durationMin: number
  /** Runs pressed before that may still be on: yesterday's last, or the one for the need before. */
  readonly earlier: readonly MinuteInterval[]
  /** Hours in which a person presses, the same every day; at any hour if empty. */
  readonly willing: readonly MinuteInterval[]
}

/** A shower short by less than a second is not short. */
const SAME_SERVED_MIN = 1 / 60

/** `undefined` when nobody presses between the need before and the end of this one. */
export function latestStart({ cycle, index, state, durationMin, earlier, willing }: Before): StartChoice | undefined {
  const need = cycle.needs[index] as ShowerNeed
  const from = earliestMin(cycle, index)
  const firstStart = Math.max(from, ...earlier.map((on) => on.endMin))
  const draws = drawsOf(need)
  const known = new Map<number, number>()
  const simulated = (startMin: number): number => {
    const on: readonly MinuteInterval[] = [...earlier, { startMin, endMin: startMin + durationMin }]
    const simulation = simulate(cycle.tank, state, { startMin: from, endMin: needEndMin(need), on, draws })
    return simulation.servedMin.reduce((sum, minutes) => sum + minutes, 0)
  }
  const served = (startMin: number): number => {
    const minutes = known.get(startMin) ?? simulated(startMin)
    known.set(startMin, minutes)
    return minutes
  }
  const outlastsMin = Math.ceil(needEndMin(need) - durationMin)
  const best = steady(choose({ need, firstStart, durationMin, served }), { firstStart, outlastsMin, served })
  const hours = hoursAround(best.startMin, { willing, firstStart, lastStart: Math.ceil(needEndMin(need)) - 1 })
  if (!hours) return undefined
  const chosen = hours.startMin === best.startMin ? best : chosenAt(need, hours.startMin, served)
  const fromMin = Math.max(firstStart, hours.fromMin)
  return {
    ...chosen,
    latestStartMin: chosen.startMin,
    earliestStartMin: () => earliest(chosen, { firstStart: fromMin, outlastsMin, served }),
    servesAsMuch: (startMin) =>
      startMin >= firstStart && startMin <= chosen.startMin && served(startMin) >= chosen.servedMin - SAME_SERVED_MIN,
  }
}

/** A start that was agreed on, while it serves as much: an agreement never leaves anybody cold. */
export const agreedStart = (latest: StartChoice, agreedMin: number | null | undefined): StartChoice =>
  agreedMin !== null && agreedMin !== undefined && latest.servesAsMuch(agreedMin) ? { ...latest, startMin: agreedMin } : latest

const chosenAt = (need: ShowerNeed, startMin: number, served: Search['served']): Chosen => {
  const servedMin = served(startMin)
  return { startMin, servedMin, serves: servesAll(need, servedMin) }
}

interface Hours {
  readonly willing: readonly MinuteInterval[]
  readonly firstStart: number
  readonly lastStart: number
}

/** The last minute at or before a start at which a person presses, or failing that the first after it, and from when on they do. */
function hoursAround(
  bestMin: number,
  { willing, firstStart, lastStart }: Hours,
): { readonly startMin: number; readonly fromMin: number } | null {
  if (willing.length === 0) return { startMin: bestMin, fromMin: -Infinity }
  const spans = [-MIN_PER_DAY, 0, MIN_PER_DAY].flatMap((by) =>
    willing.map(({ startMin, endMin }) => ({
      fromMin: Math.max(firstStart, startMin + by),
      lastMin: Math.min(lastStart, endMin + by - 1),
    })),
  )
  const open = spans.filter(({ fromMin, lastMin }) => fromMin <= lastMin)
  const before = open
    .filter(({ fromMin }) => fromMin <= bestMin)
    .map((span) => ({ fromMin: span.fromMin, startMin: Math.min(bestMin, span.lastMin) }))
  const after = open.filter(({ fromMin }) => fromMin > bestMin).map(({ fromMin }) => ({ fromMin, startMin: Math.ceil(fromMin) }))
  const nearest =
    before.sort((one, other) => other.startMin - one.startMin)[0] ?? after.sort((one, other) => one.startMin - other.startMin)[0]
  return nearest ?? null
}

/** Whether a person presses at a minute of the day or of the days next to it. */
export const isWilling = (willing: readonly MinuteInterval[], startMin: number): boolean =>
  willing.length === 0 ||
  [-MIN_PER_DAY, 0, MIN_PER_DAY].some((by) => willing.some((hours) => hours.startMin + by <= startMin && startMin < hours.endMin + by))

interface Search {
  readonly need: ShowerNeed
  readonly firstStart: number
  readonly durationMin: number
  readonly served: (startMin: number) => number
}

/** The latest start that serves all; where none does, the one of those tried that serves most, the latest of equals. */
function choose({ need, firstStart, durationMin, served }: Search): Chosen {
  const latest = Math.max(firstStart, need.readyByMin)
  let late = latest
  let best = { startMin: late, servedMin: served(late), serves: false }
  if (servesAll(need, best.servedMin)) return { ...best, serves: true }
  for (const endFraction of [...END_FRACTIONS].reverse()) {
    const startMin = Math.max(firstStart, Math.floor(endOfRun(need, endFraction) - durationMin))
    if (startMin >= late) continue
    const servedMin = served(startMin)
    if (servesAll(need, servedMin)) return { ...halve({ need, early: startMin, late, served }), serves: true }
    if (servedMin > best.servedMin + SAME_SERVED_MIN) best = { startMin, servedMin, serves: false }
    late = startMin
  }
  return best
}

/** Between a start that serves all and a later one that does not: the last whole minute that does. */
function halve({
  need,
  early,
  late,
  served,
}: Pick<Search, 'need' | 'served'> & { readonly early: number; readonly late: number }): Pick<StartChoice, 'startMin' | 'servedMin'> {
  let good = early
  let bad = late
  let servedMin = served(good)
  while (bad - good > 1) {
    const middle = good + Math.floor((bad - good) / 2)
    const minutes = served(middle)
    if (servesAll(need, minutes)) {
      good = middle
      servedMin = minutes
    } else bad = middle
  }
  return { startMin: good, servedMin }
}

/**
 * A run of fixed length that starts a little earlier can serve less: it ends a draw sooner, or a thermostat is satisfied at another
 * moment. Of 485 random cold units 3 % had such a stretch, within 30 minutes of the latest start. So far back every minute is tried.
 */
const UNSTEADY_MIN = 30
/** Beyond it an earlier run only cools for longer: tried every quarter hour. */
const WINDOW_STEP_MIN = 15

interface Earlier {
  readonly firstStart: number
  /** From this start on the run outlasts the need: one that starts earlier has only heated for longer. */
  readonly outlastsMin: number
  readonly served: (startMin: number) => number
}

/** Start-by is monotone: where starts a little before the latest serve less, the one before those is told, if it serves as much. */
function steady(chosen: Chosen, { firstStart, outlastsMin, served }: Earlier): Chosen {
  const least = chosen.servedMin - SAME_SERVED_MIN
  const from = Math.max(firstStart, chosen.startMin - UNSTEADY_MIN)
  let unsteadyMin: number | null = null
  for (let startMin = Math.min(chosen.startMin, outlastsMin) - 1; startMin >= from; startMin--)
    if (served(startMin) < least) unsteadyMin = startMin
  const startMin = unsteadyMin === null ? chosen.startMin : unsteadyMin - 1
  return startMin >= firstStart && served(startMin) >= least ? { ...chosen, startMin, servedMin: served(startMin) } : chosen
}

/** How early the run may start and still serve as much: a finite run that ends too soon lets the tank cool. */
function earliest({ startMin, servedMin }: Chosen, { firstStart, outlastsMin, served }: Earlier): number {
  const bound = Math.max(firstStart, startMin - WINDOW_LENGTH_MIN)
  let good = Math.max(bound, Math.min(startMin, outlastsMin))
  while (good > bound) {
    const next = Math.max(bound, good - (startMin - good < UNSTEADY_MIN ? 1 : WINDOW_STEP_MIN))
    if (served(next) < servedMin - SAME_SERVED_MIN) break
    good = next
  }
  return good
}
