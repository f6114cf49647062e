/**
 * The shortest run that serves each need of a week. A timer runs equally long at every press, so the question is asked of the
 * whole week at once: every need gets one such run, and the state that each begins from is what those runs leave.
 */
import type { MinuteInterval } from '../time/types.ts'
import { type Chain, type Course, settle } from './chain.ts'
import { type Cycle, earliestMin, needEndMin, servedByNeed, servesAll } from './cycle.ts'
import { LONGEST_RUN_MIN } from './defaults.ts'
import { cannotEver } from './cannot-ever.ts'
import type { TankState } from './simulate.ts'
import type { UnitDay } from './types.ts'

/** A run of a length that ends at a share of its need: 0 as the first shower begins, 1 as the last one ends. */
export interface RunShape {
  readonly durationMin: number
  readonly endFraction: number
  /** As a person presses, who reads a clock; in between otherwise, so that a search is smooth. */
  readonly atWholeMinutes?: boolean
}

/**
 * Ends that are tried. Heat before the need serves it best, so 0 comes first; heat during it is what a tank needs that is full
 * before it begins and too small.
 */
export const END_FRACTIONS = [0, 0.5, 1] as const

export const endOfRun = (need: Cycle['needs'][number], endFraction: number): number =>
  need.readyByMin + endFraction * (needEndMin(need) - need.readyByMin)

/**
 * One run a need; none before the need before it is over, none while the run before it is on (a press then does nothing), and
 * `undefined` where that one outlasts the need.
 */
export function runsByNeed(
  cycle: Cycle,
  { durationMin, endFraction, atWholeMinutes = false }: RunShape,
): readonly (MinuteInterval | undefined)[] {
  let onUntilMin = -Infinity
  return cycle.needs.map((need, index) => {
    const firstMin = Math.max(earliestMin(cycle, index), onUntilMin)
    const bestMin = endOfRun(need, endFraction) - durationMin
    const startMin = atWholeMinutes ? Math.max(Math.ceil(firstMin), Math.floor(bestMin)) : Math.max(firstMin, bestMin)
    if (startMin >= needEndMin(need)) return undefined
    onUntilMin = startMin + durationMin
    return { startMin, endMin: onUntilMin }
  })
}

export const runsOf = (cycle: Cycle, shape: RunShape): readonly MinuteInterval[] =>
  runsByNeed(cycle, shape).filter((own) => own !== undefined)

/** Finer than the whole minutes that are told, so that the state it leaves, and start-by with it, moves smoothly with the season. */
const RESOLUTION_MIN = 0.5
/** Lengths between which the first that serves is looked for. */
const FIRST_TRIES_MIN = [30, 60, 120, 240, 480, LONGEST_RUN_MIN] as const
/** A run that ends elsewhere is preferred when it is shorter by this; tried at whole multiples, which many needs share. */
const LEAST_GAIN_MIN = 1
const GAIN_STEP_MIN = 2

/** Of each cycle, of each need: `null` when even the longest run does not serve it. */
export type RequiredRuns = readonly (readonly (RunShape | null)[])[]

export function requiredRuns(days: readonly UnitDay[], chain: Chain): RequiredRuns {
  const weeks = weeksUnder(chain)
  const found: (RunShape | null)[][] = []
  for (const [day, cycle] of chain.cycles.entries())
    found.push(
      cycle.needs.map((one, need) => {
        if (cannotEver(days[day] as UnitDay, one)) return null
        const by: ByEnd = (endFraction) => (durationMin) => weeks.serves({ durationMin, endFraction }, { day, need })
        // One day's run is seldom far from that of the day before.
        const near = found[day - 1]?.[need]
        let best = (near && around(by(near.endFraction), near)) ?? first(by)
        for (const endFraction of END_FRACTIONS)
          if (best && endFraction !== best.endFraction) best = shorter(by(endFraction), { best, endFraction })
        return best
      }),
    )
  // Longer is not always warmer where runs push each other about: what was tried for another need may be shorter and serve this one.
  return found.map((shapes, day) => shapes.map((shape, need) => (shape ? weeks.shortestTried({ day, need }, shape) : null)))
}

interface Place {
  readonly day: number
  readonly need: number
}

interface Weeks {
  /** Whether a need is served in the week of a shape of run; each week is settled once, from where the one before it settled. */
  readonly serves: (shape: RunShape, place: Place) => boolean
  /** Of the shapes tried so far. */
  readonly shortestTried: (place: Place, atMost: RunShape) => RunShape
}

function weeksUnder(chain: Chain): Weeks {
  const known = new Map<number, { readonly shape: RunShape; readonly course: Course }>()
  let guess: TankState | undefined
  const courseOf = (shape: RunShape): Course => {
    const key = shape.durationMin * 8 + shape.endFraction * 4
    const found = known.get(key)
    if (found) return found.course
    const course = settle(chain, (cycle) => runsOf(cycle, shape), guess)
    guess = course.simulations[chain.period - 1]?.end
    known.set(key, { shape, course })
    return course
  }
  const servesIn = (course: Course, { day, need }: Place): boolean => {
    const cycle = chain.cycles[day]!
    return servesAll(cycle.needs[need]!, servedByNeed(cycle, course.simulations[day]!)[need] ?? 0)
  }
  return {
    serves: (shape, place) => servesIn(courseOf(shape), place),
    shortestTried: (place, atMost) => {
      let shortest = atMost
      for (const { shape, course } of known.values())
        if (shape.durationMin < shortest.durationMin && servesIn(course, place)) shortest = shape
      return shortest
    },
  }
}

type Serves = (durationMin: number) => boolean
type ByEnd = (endFraction: number) => Serves

/**
 * The first of the tried lengths that serves at some end, halved down. A longer run does not always serve more: it can end with
 * the tank full, and a full tank heats again only once its dead band is used up; so every end is asked at every length.
 */
function first(by: ByEnd): RunShape | null {
  let low = -RESOLUTION_MIN
  for (const high of FIRST_TRIES_MIN) {
    for (const endFraction of END_FRACTIONS)
      if (by(endFraction)(high)) return { durationMin: between(by(endFraction), low, high), endFraction }
    low = high
  }
  return null
}

/** In steps that double, from a shape that is likely near. */
function around(serves: Serves, { durationMin: nearMin, endFraction }: RunShape): RunShape | null {
  let step = RESOLUTION_MIN
  if (serves(nearMin)) {
    let high = nearMin
    for (; high - step >= 0 && serves(high - step); step *= 2) high -= step
    return { durationMin: between(serves, Math.max(-RESOLUTION_MIN, high - step), high), endFraction }
  }
  let low = nearMin
  for (; low + step < 2 * nearMin && !serves(low + step); step *= 2) low += step
  return serves(low + step) ? { durationMin: between(serves, low, low + step), endFraction } : null
}

/** A better end, where there is one; it is seldom better by much, so the bracket grows downwards. */
function shorter(serves: Serves, { best, endFraction }: { readonly best: RunShape; readonly endFraction: number }): RunShape {
  let high = Math.floor((best.durationMin - LEAST_GAIN_MIN) / GAIN_STEP_MIN) * GAIN_STEP_MIN
  if (high < 0 || !serves(high)) return best
  let step = GAIN_STEP_MIN
  for (; high - step >= 0 && serves(high - step); step *= 2) high -= step
  return { durationMin: between(serves, Math.max(-RESOLUTION_MIN, high - step), high), endFraction }
}

/** From a length that does not serve to one that does. */
function between(serves: Serves, from: number, to: number): number {
  let [low, high] = [from, to]
  while (high - low > RESOLUTION_MIN) {
    const middle = Math.floor((low + high) / (2 * RESOLUTION_MIN)) * RESOLUTION_MIN
    if (serves(middle)) high = middle
    else low = middle
  }
  return high
}
