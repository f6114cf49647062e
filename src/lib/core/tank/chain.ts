/** Days in a row as a tank lives them: each begins with what the one before leaves, and the first follows the last of its period. */
import type { MinuteInterval } from '../time/types.ts'
import { MIN_PER_DAY } from '../units.ts'
import { changeK, type Cycle, cycleEndMin, cycleOf, firstState, run } from './cycle.ts'
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
  return { cycles: days.map((day, index) => cycleOf(day, cycleEndMin(days[(index > 0 ? index : period) - 1] ?? day))), period }
}

/** A programme: the on-intervals of each cycle, in its own minutes. */
export type RunsOf = (cycle: Cycle, index: number) => readonly MinuteInterval[]

/** Repeats the period until it repeats itself, from a guess where one is known; a day whose start is told begins from that. */
export function settle({ cycles, period }: Chain, runsOf: RunsOf, guess?: TankState): Course {
  const first = cycles[0]
  if (!first) return { before: [], on: [], simulations: [] }
  let left: Left = { state: guess ?? firstState(first), stillOn: [] }
  const turns = first.start.kind === 'periodic' ? Math.ceil(MOST_DAYS / period) : 1
  for (let turn = 1; turn <= turns; turn++) {
    const from = left.state
    const course = follow(cycles, runsOf, { left, count: period })
    left = course.left
    if (turn === turns || changeK(from, left.state) < SETTLED_K)
      return cycles.length === period ? course : joined(course, follow(cycles, runsOf, { left, count: cycles.length, from: period }))
  }
  throw new Error('a period has at least one turn')
}

interface Left {
  readonly state: TankState
  readonly stillOn: readonly MinuteInterval[]
}
interface Stretch {
  readonly left: Left
  readonly from?: number
  /** Exclusive end. */
  readonly count: number
}

function follow(cycles: readonly Cycle[], runsOf: RunsOf, { left, from = 0, count }: Stretch): Course & { readonly left: Left } {
  let { state, stillOn } = left
  const course = { before: [] as TankState[], on: [] as (readonly MinuteInterval[])[], simulations: [] as Simulation[] }
  for (let index = from; index < count; index++) {
    const cycle = cycles[index] as Cycle
    if (cycle.start.kind !== 'periodic') {
      state = firstState(cycle)
      stillOn = []
    }
    const own = runsOf(cycle, index)
    const on = stillOn.length > 0 ? [...stillOn, ...own] : own
    const simulation = run(cycle, state, on)
    course.before.push(state)
    course.on.push(on)
    course.simulations.push(simulation)
    state = simulation.end
    stillOn = tailOf(cycle, on)
  }
  return { ...course, left: { state, stillOn } }
}

const joined = (one: Course, other: Course): Course => ({
  before: [...one.before, ...other.before],
  on: [...one.on, ...other.on],
  simulations: [...one.simulations, ...other.simulations],
})

const NONE: readonly MinuteInterval[] = []

/** Runs that go on past a cycle's end or begin after it, in the minutes of the day after. */
function tailOf(cycle: Cycle, on: readonly MinuteInterval[]): readonly MinuteInterval[] {
  if (!on.some((interval) => interval.endMin > cycle.endMin)) return NONE
  return on
    .filter((interval) => interval.endMin > cycle.endMin)
    .map(({ startMin, endMin }) => ({ startMin: Math.max(cycle.endMin, startMin) - MIN_PER_DAY, endMin: endMin - MIN_PER_DAY }))
}
