/**
 * The shortest run that serves each need of a week. A timer runs equally long at every press, so the question is asked of the
 * whole week at once: every need gets one such run, and the state that each begins from is what those runs leave.
 */
import type { MinuteInterval } from '../time/types.ts'
import { type Chain, type Course, settle } from './chain.ts'
import { type Cycle, earliestMin, needEndMin, servedByNeed, servesAll } from './cycle.ts'
import { LONGEST_RUN_MIN } from './defaults.ts'
import { cannotEver } from './need-outcome.ts'
import type { TankState } from './simulate.ts'
import type { UnitDay } from './types.ts'

/** A run of a length that ends at a share of its need: 0 as the first shower begins, 1 as the last one ends. */
export interface RunShape {
  readonly durationMin: number
  readonly endFraction: number
}

/**
 * Ends that are tried. Heat before the need serves it best, so 0 comes first; heat during it is what a tank needs that is full
 * before it begins and too small.
 */
export const END_FRACTIONS = [0, 0.5, 1] as const

export const endOfRun = (need: Cycle['needs'][number], endFraction: number): number =>
  need.readyByMin + endFraction * (needEndMin(need) - need.readyByMin)

/** One run a need; none before the need before it is over, none while the run before it is on (a press then does nothing). */
export function runsOf(cycle: Cycle, { durationMin, endFraction }: RunShape): readonly MinuteInterval[] {
  const runs: MinuteInterval[] = []
  cycle.needs.forEach((need, index) => {
    const from = Math.max(earliestMin(cycle, index), runs.at(-1)?.endMin ?? -Infinity)
    const startMin = Math.max(from, endOfRun(need, endFraction) - durationMin)
    if (startMin < needEndMin(need)) runs.push({ startMin, endMin: startMin + durationMin })
  })
  return runs
}

/** Finer than the whole minutes that are told, so that the state it leaves, and start-by with it, moves smoothly with the season. */
const RESOLUTION_MIN = 0.5
/** A run that ends elsewhere is preferred when it is shorter by this. */
const LEAST_GAIN_MIN = 1
const FIRST_TRY_MIN = 30

/** Of each cycle, of each need: `null` when even the longest run does not serve it. */
export type RequiredRuns = readonly (readonly (RunShape | null)[])[]

export function requiredRuns(days: readonly UnitDay[], chain: Chain): RequiredRuns {
  const serves = weeksUnder(chain)
  return chain.cycles.map((cycle, day) =>
    cycle.needs.map((one, need) => {
      if (cannotEver(days[day] as UnitDay, one)) return null
      let best: RunShape | null = null
      for (const endFraction of END_FRACTIONS) {
        const by = (durationMin: number) => serves({ durationMin, endFraction }, { day, need })
        const durationMin: number | null = best ? shorter(by, best.durationMin - LEAST_GAIN_MIN) : shortest(by)
        if (durationMin !== null) best = { durationMin, endFraction }
      }
      return best
    }),
  )
}

interface Place {
  readonly day: number
  readonly need: number
}

/** Whether a need is served in the week of a shape of run; each week is settled once, from where the one before it settled. */
function weeksUnder(chain: Chain): (shape: RunShape, place: Place) => boolean {
  const known = new Map<number, Course>()
  let guess: TankState | undefined
  const courseOf = (shape: RunShape): Course => {
    const key = shape.durationMin * 8 + shape.endFraction * 4
    const found = known.get(key)
    if (found) return found
    const course = settle(chain, (cycle) => runsOf(cycle, shape), guess)
    guess = course.simulations[chain.period - 1]?.end
    known.set(key, course)
    return course
  }
  return (shape, { day, need }) => {
    const cycle = chain.cycles[day]!
    return servesAll(cycle.needs[need]!, servedByNeed(cycle, courseOf(shape).simulations[day]!)[need] ?? 0)
  }
}

/** By doubling and halving; `null` when the longest run does not serve. */
function shortest(serves: (durationMin: number) => boolean): number | null {
  let low = -RESOLUTION_MIN
  let high = FIRST_TRY_MIN
  while (!serves(high)) {
    if (high >= LONGEST_RUN_MIN) return null
    low = high
    high = Math.min(LONGEST_RUN_MIN, high * 2)
  }
  return between(serves, low, high)
}

/** An end that does better is seldom better by much: the bracket grows downwards. */
function shorter(serves: (durationMin: number) => boolean, mostMin: number): number | null {
  if (mostMin < 0 || !serves(mostMin)) return null
  let high = mostMin
  let step = LEAST_GAIN_MIN
  while (high - step >= 0 && serves(high - step)) {
    high -= step
    step *= 2
  }
  return between(serves, Math.max(-RESOLUTION_MIN, high - step), high)
}

function between(serves: (durationMin: number) => boolean, from: number, to: number): number {
  let [low, high] = [from, to]
  while (high - low > RESOLUTION_MIN) {
    const middle = Math.floor((low + high) / (2 * RESOLUTION_MIN)) * RESOLUTION_MIN
    if (serves(middle)) high = middle
    else low = middle
  }
  return high
}
