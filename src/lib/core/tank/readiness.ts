/**
 * Whether a unit's water is ready for each need of a day, and the numbers that say why: required run, start-by, shortfall.
 * Pressed timers: one press a need, at its start-by, with the run that can be counted on. Clocked: the clock's own hours.
 * About 10 ms a day on one core.
 */
import type { MinuteInterval } from '../time/types.ts'
import { kwhFromJ } from '../units.ts'
import { type Cycle, cycleOf, earliestMin, needEndMin, run, servedByNeed, settledState, withTail } from './cycle.ts'
import { cannotEver, needOutcome } from './need-outcome.ts'
import { requiredRunMin, runsBefore } from './required-run.ts'
import type { TankState } from './simulate.ts'
import { latestStart, type StartChoice } from './start-by.ts'
import { traceOf } from './trace.ts'
import type { NeedOutcome, Readiness, UnitDay } from './types.ts'

export function assessReadiness(day: UnitDay): Readiness {
  const cycle = cycleOf(day)
  const required = cycle.needs.map((need, index) => (cannotEver(day, need) ? null : requiredRunMin(cycle, index)))
  const plan = planOf(day, cycle, required)
  const served = servedByNeed(cycle, run(cycle, plan.state, plan.on))
  const needs = cycle.needs.map((need, index) =>
    needOutcome({ day, cycle, index, need, served: served[index] ?? 0, required: required[index] ?? null, plan }),
  )
  const expected = expectedOf(day, cycle, plan)
  const simulation = run(cycle, expected.state, expected.on)
  return {
    status: statusOf(needs),
    needs,
    runs: expected.on.filter((on) => on.endMin > cycle.startMin && on.startMin < cycle.endMin),
    heating: simulation.heating,
    energyInKwh: kwhFromJ(simulation.energyInJ),
    energyDeliveredKwh: kwhFromJ(simulation.energyDeliveredJ),
    energyLostKwh: kwhFromJ(simulation.energyLostJ),
    trace: traceOf(cycle, expected.state, expected.on),
    endNodesC: simulation.end.nodesC,
  }
}

function statusOf(needs: readonly NeedOutcome[]): Readiness['status'] {
  if (needs.length === 0) return 'no-need'
  const statuses = needs.map((need) => need.status)
  return statuses.includes('impossible') ? 'impossible' : statuses.includes('short') ? 'short' : 'ready'
}

/** What is counted on: the state at the cycle's start, the on-intervals, and each need's start where a person starts it. */
export interface Plan {
  readonly state: TankState
  readonly on: readonly MinuteInterval[]
  readonly choices: readonly (StartChoice | undefined)[]
}

/**
 * Pressed runs are promised from the coldest state that still works: the tank as the shortest sufficient run leaves it. What
 * a longer run heats after the shower is a bonus that the promise does not lean on, so skipping a day cannot break it.
 */
function planOf(day: UnitDay, cycle: Cycle, required: readonly (number | null)[]): Plan {
  const { runs } = day
  if (runs.kind === 'clocked') {
    const on = runs.onIntervals
    return { state: settledState(cycle, on), on, choices: cycle.needs.map(() => undefined) }
  }
  const enoughMin = Math.max(0, ...required.map((durationMin) => durationMin ?? runs.guaranteedMin))
  const before = runsBefore(cycle, Math.min(runs.guaranteedMin, enoughMin))
  const state = settledState(cycle, before)
  const choices = chooseStarts(cycle, state, runs.guaranteedMin)
  return { state, on: pressed(choices, runs.guaranteedMin), choices }
}

/** What is expected, for energy and temperature: the same presses with the run's usual length, tails included, settled. */
function expectedOf({ runs }: UnitDay, cycle: Cycle, plan: Plan): Plan {
  if (runs.kind === 'clocked') return plan
  const starts = plan.choices.flatMap((choice) => (choice ? [choice] : []))
  const on = withTail(cycle, pressed(starts, runs.expectedMin))
  return { ...plan, on, state: settledState(cycle, on) }
}

const pressed = (choices: readonly StartChoice[], durationMin: number): readonly MinuteInterval[] =>
  choices.map(({ startMin }) => ({ startMin, endMin: startMin + durationMin }))

/** The latest start of each need in turn, each from the state that the one before leaves. */
function chooseStarts(cycle: Cycle, first: TankState, durationMin: number): readonly StartChoice[] {
  let state = first
  let earlier: readonly MinuteInterval[] = []
  return cycle.needs.map((need, index) => {
    const choice = latestStart({ cycle, index, state, durationMin, earlier })
    const on = [...earlier, ...pressed([choice], durationMin)]
    if (index < cycle.needs.length - 1) {
      const part: Cycle = { ...cycle, needs: [need], startMin: earliestMin(cycle, index), endMin: needEndMin(need) }
      state = run(part, state, on).end
      earlier = on
    }
    return choice
  })
}
