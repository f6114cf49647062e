/** The planner beside the page: it plans, and answers what a move does, so that dragging never waits for either. */
import { type Board, moveEffect, openBoard } from '#lib/core/plan/board.ts'
import { figuresOf } from '#lib/plan/compare.ts'
import { findPlans } from '#lib/plan/find-plan.ts'
import type { PlanQuestion } from '#lib/plan/types.ts'
import { waterAt } from '#lib/plan/water.ts'
import type { Answered, Asked } from '#lib/plan/worker-messages.ts'

let question: PlanQuestion | null = null
let board: Board | null = null

const answer = (message: Answered): void => self.postMessage(message)

self.addEventListener('message', ({ data }: MessageEvent<Asked>) => {
  switch (data.kind) {
    case 'plan':
      question = data.question
      for (const found of findPlans(question, data.pins)) {
        if (found.kind === 'found') board = openBoard(question.problem, found.found.starts)
        answer(found)
      }
      return
    case 'lay':
      question = data.question ?? question
      if (!question) return
      board = openBoard(question.problem, data.starts)
      answer({ kind: 'figures', ticket: data.ticket, figures: figuresOf(question, data.starts) })
      return
    case 'try':
      answer({ kind: 'effect', ticket: data.ticket, effect: board && moveEffect(board, data.runId, data.slot) })
      return
    case 'water':
      answer({
        kind: 'verdict',
        ticket: data.ticket,
        verdict: waterAt(data.week, { readyByAtMs: data.readyByAtMs, starts: new Map(data.starts) }),
      })
  }
})
