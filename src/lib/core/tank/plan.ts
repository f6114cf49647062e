/** The runs of a week: what is counted on, for promises, and what is expected, for energy and temperature. */
import type { MinuteInterval } from '../time/types.ts'
import { type Course, settle } from './chain.ts'
import { type Cycle, drawsOf, earliestMin, needEndMin, servesAll } from './cycle.ts'
import { type Kept, keep, servedNeeds, servesEvery, type Week } from './kept.ts'
import { type RequiredRuns, type RunShape, runsByNeed, runsOf } from './required-run.ts'
import { countedShape, servingShape } from './serves-week.ts'
import { simulate, type TankState } from './simulate.ts'
import { agreedStart, latestStart, type StartChoice } from './start-by.ts'
import type { UnitDay } from './types.ts'

/** The state at a cycle's start, the on-intervals, and each need's start where a person starts it. */
export interface Plan {
  readonly state: TankState
  /** The coldest state for which its starts were chosen. */
  readonly coldestState: TankState
  readonly on: readonly MinuteInterval[]
  readonly choices: Choices
  /** Minutes served of each need when the whole week's runs are kept. */
  readonly served: readonly number[]
}

export interface WeekPlans {
  readonly promised: readonly Plan[]
  readonly expected: Course
}

type Choices = readonly (StartChoice | undefined)[]
interface Told {
  /** Of each day. */
  readonly choices: readonly Choices[]
  readonly kept: Kept
  /** At each cycle's start, where the choices were made from. */
  readonly states: readonly TankState[]
}

export function plansOf(week: Week, required: RequiredRuns): WeekPlans {
  const { days, chain } = week
  const told = tell(week, required)
  const { before, on } = told.kept.course
  const promised = chain.cycles.map((_, day): Plan => ({
    state: before[day] as TankState,
    coldestState: told.states[day] as TankState,
    on: on[day] ?? [],
    choices: told.choices[day] ?? [],
    served: told.kept.served[day] ?? [],
  }))
  const expected = settle(
    chain,
    (_, index) => {
      const { runs } = days[index] as UnitDay
      return runs.kind === 'clocked' ? runs.onIntervals : pressed(told.choices[index] ?? [], runs.expectedMin)
    },
    before[0],
  )
  return { promised, expected }
}

/** How often starts are chosen anew from the tank that the last choice left. */
const MOST_CHOICES = 3

/**
 * Pressed runs are chosen for the coldest state that still works: the tank as the shortest sufficient run leaves it. What a longer
 * run heats after the shower is a bonus that a start does not lean on, so skipping a day seldom breaks it. What is then promised
 * is what those very starts serve when they are kept all week; where that is not all, other starts are tried.
 */
function tell(week: Week, required: RequiredRuns): Told {
  const first = chosenFrom(week, sufficient(week, required))
  if (servesEvery(week, first.kept) || week.days.every(({ runs }) => runs.kind === 'clocked')) return first
  const shape = servingShape(week, first.kept.course.before[0])
  if (shape) return { choices: shapedChoices(week, shape.endFraction), kept: shape.kept, states: shape.kept.course.before }
  let best = first
  for (let again = 1; again < MOST_CHOICES && breaksItsWord(week, best); again++) {
    const other = chosenFrom(week, best.kept.course.before)
    if (servedNeeds(week, other.kept) <= servedNeeds(week, best.kept)) break
    best = other
  }
  return best
}

/** State at each cycle's start as the longest of the required runs leaves it, or the run that can be counted on if that is less. */
function sufficient({ days, chain }: Week, required: RequiredRuns): readonly TankState[] {
  return settle(chain, (cycle, index) => {
    const { runs } = days[index] as UnitDay
    return runs.kind === 'clocked' ? runs.onIntervals : runsOf(cycle, longestRequired(required, runs.guaranteedMin))
  }).before
}

function longestRequired(required: RequiredRuns, guaranteedMin: number): RunShape {
  let longest: RunShape = { durationMin: 0, endFraction: 0 }
  for (const shape of required.flat()) {
    const { durationMin, endFraction } = shape ?? { durationMin: guaranteedMin, endFraction: 0 }
    if (durationMin > longest.durationMin) longest = { durationMin, endFraction }
  }
  return { ...longest, durationMin: Math.min(guaranteedMin, longest.durationMin) }
}

function chosenFrom(week: Week, states: readonly TankState[]): Told {
  const durationMin = (index: number): number => countedShape(week.days[index] as UnitDay, 0).durationMin
  const choices = week.chain.cycles.map((cycle, index) => {
    if (week.days[index]?.runs.kind === 'clocked') return cycle.needs.map(() => undefined)
    const { willing, agreedStartMin: agreed = [] } = week.days[index] as UnitDay
    return chooseStarts({ cycle, state: states[index] as TankState, durationMin: durationMin(index), willing, agreed })
  })
  return { choices, kept: keep(week, (_, index) => pressed(choices[index] ?? [], durationMin(index)), states[0]), states }
}

/** Whether a start was chosen that serves its need, and does not in the week as those starts leave it. */
const breaksItsWord = ({ chain }: Week, { choices, kept }: Told): boolean =>
  choices.some((day, index) =>
    day.some((choice, at) => choice?.serves && !servesAll(chain.cycles[index]!.needs[at]!, kept.served[index]?.[at] ?? 0)),
  )

/** The starts of runs that are shaped alike; how much earlier each may be is not known. */
const shapedChoices = ({ days, chain }: Week, endFraction: number): readonly Choices[] =>
  chain.cycles.map((cycle, index) =>
    runsByNeed(cycle, countedShape(days[index] as UnitDay, endFraction)).map(
      (own, at) =>
        own && {
          startMin: own.startMin,
          latestStartMin: own.startMin,
          servedMin: servedWhole(cycle, at),
          serves: true,
          earliestStartMin: () => own.startMin,
          servesAsMuch: (startMin: number) => startMin === own.startMin,
        },
    ),
  )

const servedWhole = (cycle: Cycle, at: number): number => (cycle.needs[at]?.count ?? 0) * (cycle.needs[at]?.minutesEach ?? 0)

const pressed = (choices: Choices, durationMin: number): readonly MinuteInterval[] =>
  choices.flatMap((choice) => (choice ? [{ startMin: choice.startMin, endMin: choice.startMin + durationMin }] : []))

interface Starts {
  readonly cycle: Cycle
  readonly state: TankState
  readonly durationMin: number
  readonly willing: readonly MinuteInterval[]
  /** In step with the needs. */
  readonly agreed: readonly (number | null)[]
}

/** The agreed or latest start of each need in turn, each from the state that the one before leaves; `undefined` when a run still on covers it, or nobody presses. */
function chooseStarts({ cycle, state: first, durationMin, willing, agreed }: Starts): Choices {
  let state = first
  let earlier: readonly MinuteInterval[] = []
  return cycle.needs.map((need, index) => {
    const covered = earlier.some((on) => on.endMin >= needEndMin(need))
    const latest = covered ? undefined : latestStart({ cycle, index, state, durationMin, earlier, willing })
    const choice = latest && agreedStart(latest, agreed[index])
    const on = choice ? [...earlier, ...pressed([choice], durationMin)] : earlier
    if (index < cycle.needs.length - 1) {
      state = simulate(cycle.tank, state, { startMin: earliestMin(cycle, index), endMin: needEndMin(need), on, draws: drawsOf(need) }).end
      earlier = on
    }
    return choice
  })
}
