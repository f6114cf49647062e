/** The runs of a week: what is counted on, for promises, and what is expected, for energy and temperature. */
import type { MinuteInterval } from '../time/types.ts'
import { type Chain, type Course, settle } from './chain.ts'
import { type Cycle, drawsOf, earliestMin, needEndMin } from './cycle.ts'
import { type RequiredRuns, type RunShape, runsOf } from './required-run.ts'
import { simulate, type TankState } from './simulate.ts'
import { latestStart, type StartChoice } from './start-by.ts'
import type { UnitDay } from './types.ts'

/** The state at a cycle's start, the on-intervals, and each need's start where a person starts it. */
export interface Plan {
  readonly state: TankState
  readonly on: readonly MinuteInterval[]
  readonly choices: readonly (StartChoice | undefined)[]
}

export interface WeekPlans {
  readonly promised: readonly Plan[]
  readonly expected: Course
}

interface WeekCase {
  readonly days: readonly UnitDay[]
  readonly chain: Chain
  readonly required: RequiredRuns
}

/**
 * Pressed runs are promised from the coldest state that still works: the tank as the shortest sufficient run leaves it. What
 * a longer run heats after the shower is a bonus that the promise does not lean on, so skipping a day cannot break it.
 */
export function plansOf({ days, chain, required }: WeekCase): WeekPlans {
  const counted = settle(chain, (cycle, index) => {
    const { runs } = days[index] as UnitDay
    return runs.kind === 'clocked' ? runs.onIntervals : countedRuns(cycle, required, runs.guaranteedMin)
  })
  const promised = chain.cycles.map((cycle, index): Plan => {
    const { runs } = days[index] as UnitDay
    const state = counted.before[index] as TankState
    if (runs.kind === 'clocked') return { state, on: counted.on[index] ?? [], choices: cycle.needs.map(() => undefined) }
    const choices = chooseStarts({ cycle, state, durationMin: runs.guaranteedMin })
    return { state, on: pressed(choices, runs.guaranteedMin), choices }
  })
  const expected = settle(
    chain,
    (_, index) => {
      const { runs } = days[index] as UnitDay
      return runs.kind === 'clocked' ? runs.onIntervals : pressed(promised[index]?.choices ?? [], runs.expectedMin)
    },
    counted.before[0],
  )
  return { promised, expected }
}

/** The runs that leave the promised state: the longest of the required ones, or the run that can be counted on if that is less. */
function countedRuns(cycle: Cycle, required: RequiredRuns, guaranteedMin: number): readonly MinuteInterval[] {
  let longest: RunShape = { durationMin: 0, endFraction: 0 }
  for (const shape of required.flat()) {
    const { durationMin, endFraction } = shape ?? { durationMin: guaranteedMin, endFraction: 0 }
    if (durationMin > longest.durationMin) longest = { durationMin, endFraction }
  }
  return runsOf(cycle, { ...longest, durationMin: Math.min(guaranteedMin, longest.durationMin) })
}

const pressed = (choices: readonly (StartChoice | undefined)[], durationMin: number): readonly MinuteInterval[] =>
  choices.flatMap((choice) => (choice ? [{ startMin: choice.startMin, endMin: choice.startMin + durationMin }] : []))

interface Starts {
  readonly cycle: Cycle
  readonly state: TankState
  readonly durationMin: number
}

/** The latest start of each need in turn, each from the state that the one before leaves; `undefined` when a run still on covers it. */
function chooseStarts({ cycle, state: first, durationMin }: Starts): readonly (StartChoice | undefined)[] {
  let state = first
  let earlier: readonly MinuteInterval[] = []
  return cycle.needs.map((need, index) => {
    const covered = earlier.some((on) => on.endMin >= needEndMin(need))
    const choice = covered ? undefined : latestStart({ cycle, index, state, durationMin, earlier })
    const on = choice ? [...earlier, ...pressed([choice], durationMin)] : earlier
    if (index < cycle.needs.length - 1) {
      state = simulate(cycle.tank, state, { startMin: earliestMin(cycle, index), endMin: needEndMin(need), on, draws: drawsOf(need) }).end
      earlier = on
    }
    return choice
  })
}
