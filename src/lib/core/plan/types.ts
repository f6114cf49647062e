/**
 * What the planner is asked and what it answers. Everything is plain numbers on one grid of slots, so a problem and its
 * answer can be cloned to a worker and back; instants, zones, tariffs and tanks are the caller's.
 *
 * The model. Time is cut into `slots` slots of `slotMin` minutes; slot s is the half-open `[s, s + 1)`. A run r that starts
 * at slot t loads every limit with its `limitKw` during the worst-case slots `[t, t + worstSlots)`, and the meter with
 * `powerKw` during `expectedMin` minutes from the start of slot t (the last slot in part).
 *
 *   minimise  energy + demand + standing loss + habit + evenness, over the starts t(r) of the needs that are served, where
 *     energy        = Σ_r Σ_s powerKw × (expected hours of r in slot s) × energyPriceMinorPerKwh[s]
 *     demand        = Σ_charges priceMinorPerKw × (highest window mean of baseKw + expected load − floor)⁺,
 *                     floor = the larger of `alreadyKw` and the highest window mean of baseKw alone: what the runs add
 *     standing loss = weights.standingLoss × Σ_r standingLossMinorPerH × hours from the expected end to `readyBySlot` (never below 0)
 *     habit         = weights.habitMinorPerH × Σ_r hours between the start and `habitSlot`
 *     evenness      = weights.evennessMinorPerKw × (highest baseKw + worst-case load − highest baseKw)
 *   subject to
 *     each limit, each slot that a run touches: its baseKw + Σ limitKw of the runs that may be on there ≤ its limitKw
 *     t(r) is a slot of one of `startWindows`, `earliestStartSlot` ≤ t ≤ `latestStartSlot`, t ≡ startOffset (mod startStep),
 *     t + worstSlots ≤ slots; a pinned run starts where it is pinned
 *     the runs of one unit do not overlap, and keep the order in which they are given
 *     a need is served by all of its runs or by none
 * First the most needs are served, then the cost of those is the least. Loads on limits count in whole watts: a run's is
 * rounded up, the room under a limit down.
 *
 * How a caller builds one.
 *   limits        one for the whole service, or one a phase, or both, or a sub-feeder: the rule profile's continuous-load factor
 *                 is already in `limitKw` (125 % continuous: limit = rating / 1.25). A run whose phase is not known counts in full
 *                 on every phase that it may be on.
 *   worst case    `worstSlots` = the guaranteed maximum of the duration, rounded up to slots, the start's own uncertainty
 *                 (a drifting clock, a late hand) added.
 *   start windows a tenant's willing hours; for a switch, `startStep` = its step and `startOffset` = the phase of its first
 *                 step, both in slots; a controller that cannot be moved has one start.
 *   ready-by      `latestStartSlot` is the start-by that the tank model gives, `readyBySlot` the need's own time.
 *   pressed twice one need with two runs; the second starts when the first has surely ended.
 *   order         needs of one unit in the order in which they happen.
 *   tariff        one price a slot; a demand charge with the metering windows that fall in the horizon, and the peak that the billing
 *                 month already has. A charge billed once a month counts in full unless the caller spreads it.
 */

/** `[from, to)` in slots. */
export interface SlotInterval {
  readonly from: number
  readonly to: number
}

/** One rating that the coincident worst-case load must stay under: the service, a phase of it, a feeder. */
export interface ServiceLimit {
  readonly id: string
  readonly limitKw: number
  /** A value a slot: what is on there besides the runs. */
  readonly baseKw: readonly number[]
}

export interface DemandCharge {
  readonly id: string
  readonly priceMinorPerKw: number
  /** The highest mean that the billing period already has. */
  readonly alreadyKw: number
  /** The metering windows that this charge looks at, ascending and apart. */
  readonly windows: readonly SlotInterval[]
}

export interface NeededRun {
  readonly id: string
  /** What the meter sees, all phases. */
  readonly powerKw: number
  /** The load on each of the problem's limits, in their order. */
  readonly limitKw: readonly number[]
  readonly worstSlots: number
  readonly expectedMin: number
  readonly startWindows: readonly SlotInterval[]
  readonly earliestStartSlot: number
  readonly latestStartSlot: number
  readonly startStep: number
  readonly startOffset: number
  readonly readyBySlot: number
  readonly standingLossMinorPerH: number
  /** `null`: no habit is known. */
  readonly habitSlot: number | null
  /** `null`: the planner chooses. */
  readonly pinnedSlot: number | null
  /** The least worst-case length that a shorter shower could leave; equal to `worstSlots` when the run's length is fixed. */
  readonly shortestWorstSlots: number
}

/** Something that must happen: a shower ready, a car charged. */
export interface Need {
  readonly id: string
  readonly unitId: string
  /** In the order in which they happen; at least one. */
  readonly runs: readonly NeededRun[]
}

export interface PlanWeights {
  /** 1 = the money that the heat lost is worth. */
  readonly standingLoss: number
  readonly habitMinorPerH: number
  readonly evennessMinorPerKw: number
}

export interface PlanProblem {
  readonly slotMin: number
  readonly slots: number
  readonly needs: readonly Need[]
  readonly limits: readonly ServiceLimit[]
  /** A value a slot. */
  readonly energyPriceMinorPerKwh: readonly number[]
  /** A value a slot: the meter's expected load without the runs. */
  readonly baseKw: readonly number[]
  readonly demand: readonly DemandCharge[]
  readonly weights: PlanWeights
}

export interface PlanOptions {
  /** Whole number; the same problem, options and seed give the same plan. */
  readonly seed: number
  /** The search ends when the plan is proven to be this near to the best possible; 0.001 = a tenth of a percent. */
  readonly targetGapFraction: number
  /** How long the search goes on when the target is not reached; 1 is what is measured, 0.25 a quarter of the rounds. */
  readonly effort: number
}

export interface PlannedRun {
  readonly runId: string
  readonly startSlot: number
}

/** In minor units, not rounded. */
export interface CostParts {
  readonly energyMinor: number
  readonly demandMinor: number
  readonly standingLossMinor: number
  readonly habitMinor: number
  readonly evennessMinor: number
  readonly totalMinor: number
}

/** Why a need has no start. */
export type UnservedReason =
  /** Willing hours, steps, ready-by and the horizon leave no start at all. */
  | 'no-allowed-start'
  /** A pinned start is not one that its controller, its hours or its unit's other runs allow. */
  | 'pin-not-allowed'
  /** The pinned start does not fit under a limit beside the other pinned runs. */
  | 'pin-over-limit'
  /** It would pass a limit even if nobody else ran. */
  | 'too-large-alone'
  /** It would fit alone, but not beside the needs that are served. */
  | 'service-full'

/** One change that, alone and with every other run left where the plan has it, would serve the need. */
export type ServingChange =
  /** Ready-by (and with it the latest start) moved by so many slots, for the whole need. */
  | { readonly kind: 'later-ready-by'; readonly laterSlots: number; readonly starts: readonly PlannedRun[] }
  /** Each limit in the list raised by so much. */
  | {
      readonly kind: 'more-service'
      readonly limits: readonly { readonly limitId: string; readonly moreKw: number }[]
      readonly starts: readonly PlannedRun[]
    }
  /** Every run of the need shortened by so many slots at most, none below its shortest. */
  | { readonly kind: 'shorter-run'; readonly shorterSlots: number; readonly starts: readonly PlannedRun[] }

export interface UnservedNeed {
  readonly needId: string
  readonly unitId: string
  readonly reason: UnservedReason
  /** The smallest of each kind that would do; empty when none of the kinds would. */
  readonly changes: readonly ServingChange[]
}

export interface PlanBound {
  /** No plan that serves the same needs costs less. */
  readonly costAtLeastMinor: number
  /** (cost − bound) / cost; 0 when both are nothing. */
  readonly gapFraction: number
  /** No plan leaves fewer needs unserved. */
  readonly unservedAtLeast: number
}

/** What is wrong with a problem; `where` names the field. */
export interface ProblemFault {
  readonly where: string
  readonly message: string
}

export type PlanOutcome =
  | {
      readonly status: 'planned'
      /** In the order of the problem's needs and their runs; runs of unserved needs are not in it. */
      readonly starts: readonly PlannedRun[]
      readonly unserved: readonly UnservedNeed[]
      readonly cost: CostParts
      readonly bound: PlanBound
    }
  | { readonly status: 'invalid'; readonly faults: readonly ProblemFault[] }

/** What one limit carries when every run lasts its longest. */
export interface LimitLoad {
  readonly limitId: string
  readonly limitKw: number
  /** A value a slot: base and runs. */
  readonly worstKw: readonly number[]
  readonly peakKw: number
  readonly peakSlot: number
  /** Slots where runs are on and the limit is passed. */
  readonly overSlots: readonly number[]
}

export interface DemandPeak {
  readonly demandId: string
  readonly peakKw: number
  /** `null` when the charge has no window in the horizon. */
  readonly window: SlotInterval | null
  readonly costMinor: number
}

/** What a given assignment does, kept or broken. */
export interface Evaluation {
  readonly cost: CostParts
  readonly limits: readonly LimitLoad[]
  /** A value a slot at the meter: base and runs at their expected length. */
  readonly expectedKw: readonly number[]
  /** The same at their longest. */
  readonly worstKw: readonly number[]
  readonly demand: readonly DemandPeak[]
  /** Runs whose start their own hours, steps or neighbours do not allow. */
  readonly notAllowed: readonly string[]
}

/** What moving one run changes. */
export interface MoveEffect {
  readonly runId: string
  readonly fromSlot: number | null
  readonly toSlot: number
  /** `false`: its own hours, steps, ready-by or its unit's other runs forbid it. */
  readonly allowed: boolean
  /** The limits that the run would pass there, with the most that is missing. */
  readonly over: readonly { readonly limitId: string; readonly overKw: number; readonly atSlot: number }[]
  /** New minus old, part by part; for a run that had no start, what it adds. */
  readonly costChange: CostParts
}
