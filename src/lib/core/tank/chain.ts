/** Days in a row as a tank lives them: each begins with what the one before leaves, and the first follows the last of its period. */
import type { MinuteInterval } from '../time/types.ts'
import { changeK, type Cycle, cycleOf, firstState, leftOverMin, run } from './cycle.ts'
import type { Simulation, TankState } from './simulate.ts'
import type { UnitDay } from './types.ts'

export interface Chain {
  readonly cycles: readonly Cycle[]
  /** So many of them repeat; those beyond follow the last one. */
  readonly period: number
}

/** What happened in each cycle of a chain under one programme. */
export interface Course {
  /** State at each cycle's start. */
  readonly before: readonly TankState[]
  /** On-intervals, with what an earlier cycle left on. */
  readonly on: readonly (readonly MinuteInterval[])[]
  readonly simulations: readonly Simulation[]
}

const DAYS_A_WEEK = 7
/** A node this near to where it began has settled: in 150 L it is worth 7 s of a 4.5 kW element. */
const SETTLED_K = 0.05
/** A day's draw renews most of a tank, so a week forgets its start; tanks hardly used need some more. */
const MOST_DAYS = 42

/** The first seven days repeat; a single day repeats itself. */
export function chainOf(days: readonly UnitDay[]): Chain {
  const period = Math.min(days.length, DAYS_A_WEEK)
  return { cycles: days.map((day, index) => cycleOf(day, leftOverMin(days[(index > 0 ? index : period) - 1] ?? day))), period }
}

/** A programme: the on-intervals of each cycle, in its own minutes. */
export type RunsOf = (cycle: Cycle, index: number) => readonly MinuteInterval[]

/**
 * Repeats the period until it repeats itself, from a guess where one is known; a day whose start is told begins from that. As soon
 * as a day begins as it did one period before, so do all that follow it.
 */
export function settle({ cycles, period }: Chain, runsOf: RunsOf, guess?: TankState): Course {
  const first = cycles[0]
  if (!first) return { before: [], on: [], simulations: [] }
  const course = emptyCourse()
  let left = follow(cycles, runsOf, { course, left: { state: guess ?? firstState(first), stillOn: NONE }, from: 0, until: period })
  const turns = first.start.kind === 'periodic' ? Math.ceil(MOST_DAYS / period) : 1
  settling: for (let turn = 1; turn < turns; turn++)
    for (let index = 0; index < period; index++) {
      if (changeK(course.before[index] as TankState, left.state) < SETTLED_K && (index > 0 || sameTail(course, left, first))) break settling
      left = follow(cycles, runsOf, { course, left, from: index, until: index + 1 })
    }
  if (cycles.length > period)
    follow(cycles, runsOf, { course, left: endOf(cycles, course, period - 1), from: period, until: cycles.length })
  return course
}

const emptyCourse = () => ({ before: [] as TankState[], on: [] as (readonly MinuteInterval[])[], simulations: [] as Simulation[] })

interface Left {
  readonly state: TankState
  readonly stillOn: readonly MinuteInterval[]
}
interface Stretch {
  /** What happened in each cycle, written over. */
  readonly course: ReturnType<typeof emptyCourse>
  readonly left: Left
  readonly from: number
  /** Exclusive end. */
  readonly until: number
}

function follow(cycles: readonly Cycle[], runsOf: RunsOf, { course, left, from, until }: Stretch): Left {
  let { state, stillOn } = left
  for (let index = from; index < until; index++) {
    const cycle = cycles[index] as Cycle
    if (cycle.start.kind !== 'periodic') {
      state = firstState(cycle)
      stillOn = NONE
    }
    const own = runsOf(cycle, index)
    const on = stillOn.length > 0 ? [...stillOn, ...own] : own
    course.before[index] = state
    course.on[index] = on
    const simulation = (course.simulations[index] = run(cycle, state, on))
    state = simulation.end
    stillOn = tailOf(cycle, on)
  }
  return { state, stillOn }
}

/** What a cycle of a course leaves. */
const endOf = (cycles: readonly Cycle[], { on, simulations }: Course, index: number): Left => ({
  state: (simulations[index] as Simulation).end,
  stillOn: tailOf(cycles[index] as Cycle, on[index] ?? NONE),
})

/** The very first day of a course began with nothing left on by a day before it. */
const sameTail = ({ on }: Course, { stillOn }: Left, { startMin }: Cycle): boolean =>
  stillOn.every((tail) => (on[0] ?? NONE).some((was) => was.startMin <= startMin && was.endMin === tail.endMin))

const NONE: readonly MinuteInterval[] = []

/** Runs that go on past a cycle's end or begin after it, in the minutes of the day after. */
export function tailOf(cycle: Cycle, on: readonly MinuteInterval[]): readonly MinuteInterval[] {
  if (!on.some((interval) => interval.endMin > cycle.endMin)) return NONE
  return on
    .filter((interval) => interval.endMin > cycle.endMin)
    .map(({ startMin, endMin }) => ({ startMin: Math.max(cycle.endMin, startMin) - cycle.lengthMin, endMin: endMin - cycle.lengthMin }))
}
