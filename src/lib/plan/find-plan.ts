/** Asks the planner in two rounds, so that something is on the table soon and the better plan follows. Pure. */
import { planRuns } from '#lib/core/plan/plan-runs.ts'
import type { PlanOutcome, PlanProblem } from '#lib/core/plan/types.ts'
import { everyStart, figuresOf } from './compare.ts'
import { type PlanQuestion, todayStarts } from './types.ts'
import type { Answered, Pin } from './worker-messages.ts'

/** Near enough: a quarter of a percent of a day's cost is less than its prices are known by. */
export const NEAR_FRACTION = 0.0025
/** A tenth of the rounds: for 1,000 units a third of a second. */
const EFFORTS = [0.1, 1] as const
/** The same seed every time: the same records have the same plan. */
const SEED = 1

export const withPins = (problem: PlanProblem, pins: readonly Pin[]): PlanProblem => {
  const slotOf = new Map(pins.map(({ runId, slot }) => [runId, slot]))
  return {
    ...problem,
    needs: problem.needs.map((need) => ({
      ...need,
      runs: need.runs.map((run) => ({ ...run, pinnedSlot: slotOf.get(run.id) ?? null })),
    })),
  }
}

/** A generator, so that the worker can hand on the first plan before it looks for the second. */
export function* findPlans(question: PlanQuestion, pins: readonly Pin[]): Generator<Extract<Answered, { kind: 'found' | 'invalid' }>> {
  const problem = withPins(question.problem, pins)
  for (const effort of EFFORTS) {
    const outcome = planRuns(problem, { seed: SEED, targetGapFraction: NEAR_FRACTION, effort })
    if (outcome.status === 'invalid') {
      yield { kind: 'invalid', faults: outcome.faults }
      return
    }
    const isLast = effort === EFFORTS.at(-1) || outcome.bound.gapFraction <= NEAR_FRACTION
    yield { kind: 'found', isLast, found: foundOf(question, outcome) }
    if (isLast) return
  }
}

function foundOf(question: PlanQuestion, { starts, unserved, bound }: Extract<PlanOutcome, { status: 'planned' }>) {
  const all = everyStart(question, starts)
  return { starts: all, unserved, bound, figures: figuresOf(question, all), today: figuresOf(question, todayStarts(question)) }
}
