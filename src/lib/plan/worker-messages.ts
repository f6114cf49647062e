/** What the page and the planner's worker say to each other. Plain data; answers carry the ticket of what they answer. */
import type { MoveEffect, PlannedRun, PlanBound, ProblemFault, UnservedNeed } from '#lib/core/plan/types.ts'
import type { Figures } from './compare.ts'
import type { PlanQuestion } from './types.ts'
import type { WaterVerdict, WaterWeek } from './water.ts'

export interface Pin {
  readonly runId: string
  readonly slot: number
}

export type Asked =
  /** Takes the question in and plans it around the pins. */
  | { readonly kind: 'plan'; readonly question: PlanQuestion; readonly pins: readonly Pin[] }
  /** Lays starts on the table; answers their figures. Needs no plan before it. */
  | { readonly kind: 'lay'; readonly ticket: number; readonly question: PlanQuestion | null; readonly starts: readonly PlannedRun[] }
  /** What moving one run would change; nothing is moved. */
  | { readonly kind: 'try'; readonly ticket: number; readonly runId: string; readonly slot: number }
  | {
      readonly kind: 'water'
      readonly ticket: number
      readonly week: WaterWeek
      readonly readyByAtMs: number
      /** Ready-by and start of the unit's needs that are planned, instants. */
      readonly starts: readonly (readonly [number, number])[]
    }

export interface FoundPlan {
  /** Nobody left out: who has no start under the limit keeps the one that stands. */
  readonly starts: readonly PlannedRun[]
  readonly unserved: readonly UnservedNeed[]
  readonly bound: PlanBound
  readonly figures: Figures
  readonly today: Figures
}

export type Answered =
  /** A plan, and whether a better one is being looked for. */
  | { readonly kind: 'found'; readonly found: FoundPlan; readonly isLast: boolean }
  | { readonly kind: 'invalid'; readonly faults: readonly ProblemFault[] }
  | { readonly kind: 'figures'; readonly ticket: number; readonly figures: Figures }
  | { readonly kind: 'effect'; readonly ticket: number; readonly effect: MoveEffect | null }
  | { readonly kind: 'verdict'; readonly ticket: number; readonly verdict: WaterVerdict | null }
