/**
 * The planner: needs and limits in, starts with their proven bound out, and for whoever is not served the reason and the
 * smallest change. Pure and deterministic. Rounds are bounded, so time and memory grow with the number of starts.
 */
import { openBoard } from './board.ts'
import { changesOnBoard } from './changes.ts'
import { checkProblem } from './check-problem.ts'
import { evaluatePlan } from './evaluate.ts'
import { buildModel, type Model } from './model.ts'
import { seededRandom } from './random.ts'
import { chooseServed, type Service } from './serve.ts'
import { settle } from './settle.ts'
import type { PlannedRun, PlanOptions, PlanOutcome, PlanProblem, UnservedNeed } from './types.ts'

export function planRuns(problem: PlanProblem, options: PlanOptions): PlanOutcome {
  const faults = checkProblem(problem, options)
  if (faults.length > 0) return { status: 'invalid', faults }
  const model = buildModel(problem)
  const random = seededRandom(options.seed)
  const service = chooseServed(model, random, options.effort)
  const settled = settle({ model, ...service, random, targetGapFraction: options.targetGapFraction, effort: options.effort })
  const starts = startsOf(model, settled.loads.chosen)
  const { cost } = evaluatePlan(problem, starts)
  const slack = cost.totalMinor - settled.bound
  return {
    status: 'planned',
    starts,
    unserved: unservedOf(model, service, starts),
    cost,
    bound: {
      costAtLeastMinor: settled.bound,
      // Where prices are negative the cost may be too; the gap is measured against its size.
      gapFraction: slack <= 0 ? 0 : slack / Math.max(Math.abs(cost.totalMinor), 1e-12),
      unservedAtLeast: service.unservedAtLeast,
    },
  }
}

function startsOf(model: Model, chosen: Int32Array): PlannedRun[] {
  return model.runs.flatMap((run) => {
    const candidate = chosen[run.index]!
    return candidate < 0 ? [] : [{ runId: run.source.id, startSlot: run.starts[candidate]! }]
  })
}

function unservedOf(model: Model, service: Service, starts: readonly PlannedRun[]): UnservedNeed[] {
  if (service.isIn.every((isIn) => isIn === 1)) return []
  const board = openBoard(model.problem, starts)
  return model.problem.needs.flatMap((need, place) =>
    service.isIn[place] === 1
      ? []
      : [
          {
            needId: need.id,
            unitId: need.unitId,
            reason: service.excluded.get(place) ?? 'service-full',
            changes: changesOnBoard(board, need.id),
          },
        ],
  )
}
