import { describe, expect, it } from 'vitest'
import fc from 'fast-check'
import { changesToServe } from '#lib/core/plan/changes.ts'
import { evaluatePlan } from '#lib/core/plan/evaluate.ts'
import { planRuns } from '#lib/core/plan/plan-runs.ts'
import type { Need, PlanOptions, PlanProblem, ServingChange } from '#lib/core/plan/types.ts'
import { brokenRules, costByTheMinute } from '../../support/plan-rules.ts'
import { problems } from './arbitrary.ts'

const options: PlanOptions = { seed: 7, targetGapFraction: 0.01, effort: 0.1 }
const small = problems({ mostNeeds: 8, slots: 48 })
const larger = problems({ mostNeeds: 40, slots: 96 })

function planned(problem: PlanProblem, effort = options.effort) {
  const outcome = planRuns(problem, { ...options, effort })
  if (outcome.status !== 'planned') throw new Error(JSON.stringify(outcome.faults))
  return outcome
}

/** The problem with a change carried out: what the caller would do with the advice. */
function changed(problem: PlanProblem, need: Need, change: ServingChange): PlanProblem {
  const withRuns = (alter: (run: Need['runs'][number]) => Need['runs'][number]) => ({
    ...problem,
    needs: problem.needs.map((each) => (each.id === need.id ? { ...each, runs: each.runs.map(alter) } : each)),
  })
  switch (change.kind) {
    case 'later-ready-by':
      return withRuns((run) => ({ ...run, latestStartSlot: run.latestStartSlot + change.laterSlots }))
    case 'shorter-run':
      return withRuns((run) => ({ ...run, worstSlots: Math.max(run.shortestWorstSlots, run.worstSlots - change.shorterSlots) }))
    case 'more-service':
      return {
        ...problem,
        limits: problem.limits.map((limit) => ({
          ...limit,
          limitKw: limit.limitKw + (change.limits.find(({ limitId }) => limitId === limit.id)?.moreKw ?? 0),
        })),
      }
  }
}

describe('planRuns', () => {
  it('breaks no rule in thousands of problems, with every run at its longest', () => {
    let served = 0
    fc.assert(
      fc.property(small, (problem) => {
        const { starts } = planned(problem)
        served += starts.length
        expect(brokenRules(problem, starts)).toEqual([])
      }),
      { numRuns: 2_000, seed: 4, endOnFailure: true },
    )
    expect(served).toBeGreaterThan(3_000)
  })

  it('breaks no rule where dozens of needs share the service', () => {
    fc.assert(
      fc.property(larger, (problem) => {
        expect(brokenRules(problem, planned(problem).starts)).toEqual([])
      }),
      { numRuns: 40, seed: 5, endOnFailure: true },
    )
  })

  it('names every need once: with all its starts, or with the reason why not', () => {
    fc.assert(
      fc.property(small, (problem) => {
        const { starts, unserved } = planned(problem)
        const left = new Set(unserved.map(({ needId }) => needId))
        const expected = problem.needs.filter(({ id }) => !left.has(id)).flatMap(({ runs }) => runs.map(({ id }) => id))
        expect(starts.map(({ runId }) => runId)).toEqual(expected)
      }),
      { numRuns: 300, seed: 6, endOnFailure: true },
    )
  })

  it('says the cost that the starts have when it is worked out minute by minute', () => {
    fc.assert(
      fc.property(small, (problem) => {
        const { starts, cost } = planned(problem)
        // A millionth of a minor unit: rounding of sums of a few hundred terms.
        expect(Math.abs(cost.totalMinor - costByTheMinute(problem, starts))).toBeLessThan(1e-6)
        expect(evaluatePlan(problem, starts).cost).toEqual(cost)
      }),
      { numRuns: 300, seed: 7, endOnFailure: true },
    )
  })

  it('says a bound that is no more than the cost, and no more left out than are', () => {
    fc.assert(
      fc.property(small, (problem) => {
        const { cost, bound, unserved } = planned(problem)
        expect(bound.costAtLeastMinor).toBeLessThanOrEqual(cost.totalMinor + 1e-6)
        expect(bound.unservedAtLeast).toBeLessThanOrEqual(unserved.length)
      }),
      { numRuns: 300, seed: 8, endOnFailure: true },
    )
  })

  it('answers the same problem and seed with the same plan, after a copy to a worker and back', () => {
    fc.assert(
      fc.property(larger, (problem) => {
        const first = planned(problem)
        expect(structuredClone(planned(structuredClone(problem)))).toEqual(first)
      }),
      { numRuns: 25, seed: 9, endOnFailure: true },
    )
  })

  it('advises changes that do serve the need beside everybody else, and none when one slot or 10 W less would do', () => {
    const kinds = new Map<string, number>()
    fc.assert(
      fc.property(small, (problem) => {
        const { starts, unserved } = planned(problem)
        for (const { needId, changes } of unserved)
          for (const change of changes) {
            kinds.set(change.kind, (kinds.get(change.kind) ?? 0) + 1)
            const need = problem.needs.find(({ id }) => id === needId)!
            expect(brokenRules(changed(problem, need, change), [...starts, ...change.starts])).toEqual([])
            const less: ServingChange =
              change.kind === 'later-ready-by'
                ? { ...change, laterSlots: change.laterSlots - 1 }
                : change.kind === 'shorter-run'
                  ? { ...change, shorterSlots: change.shorterSlots - 1 }
                  : { ...change, limits: change.limits.map((limit) => ({ ...limit, moreKw: limit.moreKw - 0.01 })) }
            if (change.kind === 'more-service' && change.limits.length > 1) continue
            const again = changesToServe(changed(problem, need, less), starts, needId)
            expect(again.some(({ kind }) => kind === change.kind)).toBe(true)
          }
      }),
      { numRuns: 600, seed: 10, endOnFailure: true },
    )
    for (const kind of ['later-ready-by', 'more-service', 'shorter-run']) expect(kinds.get(kind)).toBeGreaterThan(10)
  })
})
