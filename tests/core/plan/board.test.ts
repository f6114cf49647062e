import { describe, expect, it } from 'vitest'
import fc from 'fast-check'
import { boardStarts, moveEffect, moveRun, openBoard } from '#lib/core/plan/board.ts'
import { evaluatePlan } from '#lib/core/plan/evaluate.ts'
import { planRuns } from '#lib/core/plan/plan-runs.ts'
import { brokenRules } from '../../support/plan-rules.ts'
import { problems } from './arbitrary.ts'

const moves = fc.array(fc.record({ run: fc.nat(), slot: fc.integer({ min: -2, max: 50 }) }), { minLength: 1, maxLength: 6 })

describe('moveEffect', () => {
  it('says the difference between two full evaluations, and nothing is moved by asking', () => {
    let asked = 0
    fc.assert(
      fc.property(problems({ mostNeeds: 8, slots: 48 }), moves, (problem, wishes) => {
        const runs = problem.needs.flatMap((need) => need.runs)
        if (runs.length === 0) return
        const outcome = planRuns(problem, { seed: 1, targetGapFraction: 0.01, effort: 0.1 })
        if (outcome.status !== 'planned') throw new Error('a fault')
        const board = openBoard(problem, outcome.starts)
        for (const wish of wishes) {
          const run = runs[wish.run % runs.length]!
          const before = boardStarts(board)
          const effect = moveEffect(board, run.id, wish.slot)!
          expect(boardStarts(board)).toEqual(before)
          if (!moveRun(board, run.id, wish.slot)) {
            expect(effect.allowed).toBe(false)
            continue
          }
          asked++
          const after = evaluatePlan(problem, boardStarts(board))
          const was = evaluatePlan(problem, before)
          // A millionth of a minor unit: rounding of sums.
          for (const part of ['energyMinor', 'demandMinor', 'standingLossMinor', 'habitMinor', 'evennessMinor', 'totalMinor'] as const)
            expect(Math.abs(effect.costChange[part] - (after.cost[part] - was.cost[part]))).toBeLessThan(1e-6)
          for (const { limitId, overKw, atSlot } of effect.over) {
            const limit = after.limits.find((each) => each.limitId === limitId)!
            expect(limit.overSlots).toContain(atSlot)
            // A watt: the planner rounds loads up to it.
            expect(overKw).toBeGreaterThan(0)
          }
        }
      }),
      { numRuns: 300, seed: 13, endOnFailure: true },
    )
    expect(asked).toBeGreaterThan(300)
  })

  it('allows exactly the moves after which the run breaks no rule of its own or its unit', () => {
    let allowed = 0
    fc.assert(
      fc.property(problems({ mostNeeds: 8, slots: 48 }), moves, (problem, wishes) => {
        const unlimited = { ...problem, limits: problem.limits.map((limit) => ({ ...limit, limitKw: 1_000 })) }
        const runs = unlimited.needs.flatMap((need) => need.runs).filter(({ pinnedSlot }) => pinnedSlot === null)
        const outcome = planRuns(unlimited, { seed: 1, targetGapFraction: 0.01, effort: 0.1 })
        if (outcome.status !== 'planned') throw new Error('a fault')
        const board = openBoard(unlimited, outcome.starts)
        const placed = runs.filter(({ id }) => outcome.starts.some(({ runId }) => runId === id))
        for (const wish of wishes) {
          const run = placed[wish.run % placed.length]
          if (!run) return
          const starts = outcome.starts.map((each) => (each.runId === run.id ? { runId: run.id, startSlot: wish.slot } : each))
          const isAllowed = moveEffect(board, run.id, wish.slot)!.allowed
          if (isAllowed) allowed++
          expect(isAllowed).toBe(brokenRules(unlimited, starts).length === 0)
        }
      }),
      { numRuns: 300, seed: 14, endOnFailure: true },
    )
    expect(allowed).toBeGreaterThan(100)
  })
})
