import { describe, expect, it } from 'vitest'
import { planRuns } from '#lib/core/plan/plan-runs.ts'
import type { PlanProblem } from '#lib/core/plan/types.ts'
import { brokenRules } from '../../support/plan-rules.ts'
import fixture from '../../fixtures/plan/strip-packing.json' with { type: 'json' }

/** Rectangles as runs: the width is the time, the height the power; all that counts is the highest load. */
function levelling({ width, rectangles }: (typeof fixture.instances)[number]): PlanProblem {
  const nothing = new Array<number>(width).fill(0)
  return {
    slotMin: 5,
    slots: width,
    needs: rectangles.map(([length = NaN, height = NaN], place) => ({
      id: `need ${place}`,
      unitId: `unit ${place}`,
      runs: [
        {
          id: `run ${place}`,
          powerKw: height,
          limitKw: [],
          worstSlots: length,
          expectedMin: length * 5,
          startWindows: [{ from: 0, to: width }],
          earliestStartSlot: 0,
          latestStartSlot: width,
          startStep: 1,
          startOffset: 0,
          readyBySlot: 0,
          standingLossMinorPerH: 0,
          habitSlot: null,
          pinnedSlot: null,
          shortestWorstSlots: length,
        },
      ],
    })),
    limits: [],
    energyPriceMinorPerKwh: nothing,
    baseKw: nothing,
    demand: [],
    weights: { standingLoss: 0, habitMinorPerH: 0, evennessMinorPerKw: 1 },
  }
}

// Rectangles cut from one without waste: no load can be lower than its height, and that height can be reached (Burke, Kendall and Whitwell 2004).
describe.each(fixture.instances)('planRuns on rectangles cut without waste: $name', (instance) => {
  it('levels the load to within 2 % of the least, and proves it', () => {
    const problem = levelling(instance)
    const outcome = planRuns(problem, { seed: 1, targetGapFraction: 0.02, effort: 4 })
    if (outcome.status !== 'planned') throw new Error(JSON.stringify(outcome.faults))
    expect(outcome.unserved).toEqual([])
    expect(brokenRules(problem, outcome.starts)).toEqual([])
    expect(outcome.bound.costAtLeastMinor).toBeLessThanOrEqual(instance.height * (1 + 1e-9))
    // The mean load is a bound of its own, up to rounding.
    expect(outcome.bound.costAtLeastMinor).toBeGreaterThan(instance.height * (1 - 1e-9))
    expect(outcome.cost.totalMinor).toBeLessThanOrEqual(1.02 * instance.height)
  })
})
