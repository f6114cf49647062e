/** A planning question as the page, the worker and the server share it: the core's problem and what its runs are in the house. Plain data. */
import type { UnitId } from '#db/ids.ts'
import type { PlannedRun, PlanProblem } from '#lib/core/plan/types.ts'

/** Slots of elapsed time from an instant. */
export interface Grid {
  readonly originMs: number
  readonly slotMin: number
  readonly slots: number
}

/** A run that may be moved: somebody presses for it, and can be told when. */
export interface MovableRun {
  /** The same in the problem. */
  readonly id: string
  readonly unitId: UnitId
  readonly code: string
  readonly floor: number | null
  /** The local day of its need. */
  readonly day: string
  readonly readyByAtMs: number
  /** When it starts as things stand. */
  readonly todayMs: number
  /** What the tank allows: inside, no start serves less. */
  readonly earliestMs: number
  readonly latestMs: number
  readonly powerW: number
  readonly expectedMin: number
  readonly longestMin: number
}

/** Why a run stays where it is: it counts as load that is there whatever is planned. */
export type FixedReason = 'switch' | 'supplier' | 'never-stops' | 'cold' | 'no-letters' | 'too-soon'
export interface FixedRun {
  readonly code: string
  readonly day: string
  readonly startsAtMs: number
  readonly endsAtMs: number
  /** `null` = it may never end. */
  readonly longestEndsAtMs: number | null
  readonly powerW: number
  readonly why: FixedReason
}

export interface PlanQuestion {
  readonly problem: PlanProblem
  readonly grid: Grid
  readonly runs: readonly MovableRun[]
  readonly fixed: readonly FixedRun[]
  /** What the fixed runs' energy costs, to add to both sides; not rounded. */
  readonly fixedEnergyMinor: number
  /** `false`: no tariff is in force on some of the days, so no cost is known. */
  readonly isPriced: boolean
  /** Units that want a shower on these days, and those of them that are not warm on time whatever is planned. */
  readonly wantedUnits: number
  readonly coldUnits: readonly string[]
}

export const SERVICE = 'service'

const MS_PER_MIN = 60_000
export const slotMs = ({ slotMin }: Pick<Grid, 'slotMin'>): number => slotMin * MS_PER_MIN
export const slotAt = (grid: Grid, instantMs: number): number => Math.floor((instantMs - grid.originMs) / slotMs(grid))
export const slotFrom = (grid: Grid, instantMs: number): number => Math.ceil((instantMs - grid.originMs) / slotMs(grid))
export const instantAt = (grid: Grid, slot: number): number => grid.originMs + slot * slotMs(grid)

/** A run that keeps its slot keeps its very minute: nobody is asked to change by less than a slot. */
export const startMsOf = (grid: Grid, run: Pick<MovableRun, 'todayMs'>, slot: number): number =>
  slot === slotAt(grid, run.todayMs) ? run.todayMs : instantAt(grid, slot)

/** The starts as things stand. */
export const todayStarts = ({ grid, runs }: Pick<PlanQuestion, 'grid' | 'runs'>): readonly PlannedRun[] =>
  runs.map((run) => ({ runId: run.id, startSlot: slotAt(grid, run.todayMs) }))
