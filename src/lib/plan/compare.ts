/** What a set of starts comes to beside the starts as they stand: the same figures in the browser and where a plan is accepted. Pure. */
import { evaluatePlan } from '#lib/core/plan/evaluate.ts'
import type { Evaluation, LimitLoad, PlannedRun } from '#lib/core/plan/types.ts'
import { type MovableRun, type PlanQuestion, startMsOf, todayStarts } from './types.ts'

export interface Figures {
  /** Energy of all runs, those that stay too; `null` without a price, as the two below. Not rounded. */
  readonly energyMinor: number | null
  /** What the runs add to the months' demand charges. */
  readonly demandMinor: number | null
  readonly standingLossMinor: number | null
  readonly costMinor: number | null
  /** What the planner minimises: the cost, habit and evenness in their weights. */
  readonly weighedMinor: number
  readonly peakKw: number
  readonly peakSlot: number
  readonly limitKw: number
  readonly overSlots: readonly number[]
  /** A value a slot, for the curves. */
  readonly worstKw: readonly number[]
  readonly expectedKw: readonly number[]
  readonly notAllowed: readonly string[]
}

export function figuresOf(question: PlanQuestion, starts: readonly PlannedRun[]): Figures {
  const evaluation = evaluatePlan(question.problem, starts)
  const { cost } = evaluation
  const service = serviceOf(evaluation)
  const priced = (amountMinor: number) => (question.isPriced ? amountMinor : null)
  return {
    energyMinor: priced(cost.energyMinor + question.fixedEnergyMinor),
    demandMinor: priced(cost.demandMinor),
    standingLossMinor: priced(cost.standingLossMinor),
    costMinor: priced(cost.energyMinor + question.fixedEnergyMinor + cost.demandMinor + cost.standingLossMinor),
    weighedMinor: cost.totalMinor,
    peakKw: service.peakKw,
    peakSlot: service.peakSlot,
    limitKw: service.limitKw,
    overSlots: service.overSlots,
    worstKw: service.worstKw,
    expectedKw: evaluation.expectedKw,
    notAllowed: evaluation.notAllowed,
  }
}

function serviceOf({ limits }: Evaluation): LimitLoad {
  const [service] = limits
  if (!service) throw new RangeError('a planning problem has the service as its limit')
  return service
}

/** Nobody's hot water is withheld: who has no start under the limit keeps the one that stands. */
export function everyStart(question: PlanQuestion, starts: readonly PlannedRun[]): readonly PlannedRun[] {
  const planned = new Map(starts.map(({ runId, startSlot }) => [runId, startSlot]))
  return todayStarts(question).map(({ runId, startSlot }) => ({ runId, startSlot: planned.get(runId) ?? startSlot }))
}

export interface Moved {
  readonly run: MovableRun
  readonly startsAtMs: number
}

/** Who has to change, in the order in which they start as things stand. */
export function movedRuns(question: PlanQuestion, starts: readonly PlannedRun[]): readonly Moved[] {
  const planned = new Map(starts.map(({ runId, startSlot }) => [runId, startSlot]))
  return question.runs
    .flatMap((run): Moved[] => {
      const slot = planned.get(run.id)
      const startsAtMs = slot === undefined ? run.todayMs : startMsOf(question.grid, run, slot)
      return startsAtMs === run.todayMs ? [] : [{ run, startsAtMs }]
    })
    .sort((one, other) => one.run.todayMs - other.run.todayMs)
}

/** A plan may leave the limit passed where it is passed already, never pass it by more. */
export const passesMore = (before: Figures, after: Figures): boolean =>
  after.overSlots.length > 0 && after.peakKw > Math.max(after.limitKw, before.peakKw) + 1e-6

/** Units with a start outside what their tank allows: no warm water is promised to them. */
export const unitsOutside = (changes: readonly Moved[]): number =>
  new Set(changes.filter(({ run, startsAtMs }) => startsAtMs > run.latestMs || startsAtMs < run.earliestMs).map(({ run }) => run.unitId))
    .size
