/**
 * After an outage everybody is cold at once: who starts when, so that the limits hold and the last unit is ready as early as can be.
 * The planner serves everybody by a deadline, with waiting as the cost; the deadline is drawn in until it no longer can.
 */
import { planRuns } from './plan-runs.ts'
import type { NeededRun, PlanOutcome, PlanProblem, ProblemFault, ServiceLimit, UnservedReason } from './types.ts'

export interface ColdUnit {
  readonly unitId: string
  readonly powerKw: number
  /** The load on each of the limits, in their order. */
  readonly limitKw: readonly number[]
  /** From cold to ready, at the longest. */
  readonly worstSlots: number
}

export interface RestartInput {
  readonly slotMin: number
  /** As far as the roster may reach; slot 0 is when the supply is back. */
  readonly slots: number
  readonly units: readonly ColdUnit[]
  readonly limits: readonly ServiceLimit[]
  readonly seed: number
}

export interface RosterLine {
  /** 1 is the first to start. */
  readonly order: number
  readonly unitId: string
  readonly startSlot: number
  /** Surely ready from here on. */
  readonly readySlot: number
}

export type RestartOutcome =
  | {
      readonly status: 'rostered'
      readonly lines: readonly RosterLine[]
      /** When the last unit of the roster is ready; 0 when nobody is on it. */
      readonly lastReadySlot: number
      /** No roster of the same units is done earlier. */
      readonly lastReadyAtLeastSlot: number
      /** Who has no place on it within the horizon. */
      readonly unserved: readonly { readonly unitId: string; readonly reason: UnservedReason }[]
    }
  | { readonly status: 'invalid'; readonly faults: readonly ProblemFault[] }

type Planned = Extract<PlanOutcome, { status: 'planned' }>

export function restartRoster(input: RestartInput): RestartOutcome {
  const whole = planBy(input, input.units, input.slots)
  if (whole.status === 'invalid') return whole
  const left = new Map(whole.unserved.map(({ unitId, reason }) => [unitId, reason]))
  const units = input.units.filter(({ unitId }) => !left.has(unitId))
  let best = whole
  let low = leastSlots(input, units)
  let high = lastReady(units, whole)
  let proven = Math.min(low, high)
  while (low < high) {
    const middle = (low + high) >> 1
    const tried = planBy(input, units, middle)
    if (tried.status === 'planned' && tried.unserved.length === 0) {
      best = tried
      high = lastReady(units, tried)
    } else {
      if (tried.status === 'planned' && tried.bound.unservedAtLeast > 0) proven = Math.max(proven, middle + 1)
      low = middle + 1
    }
  }
  return {
    status: 'rostered',
    lines: linesOf(units, best),
    lastReadySlot: high,
    lastReadyAtLeastSlot: Math.min(proven, high),
    unserved: [...left].map(([unitId, reason]) => ({ unitId, reason })),
  }
}

function planBy(input: RestartInput, units: readonly ColdUnit[], deadline: number): PlanOutcome {
  const nothing = new Array<number>(input.slots).fill(0)
  const asRun = ({ unitId, powerKw, limitKw, worstSlots }: ColdUnit): NeededRun => ({
    id: unitId,
    powerKw,
    limitKw,
    worstSlots,
    expectedMin: worstSlots * input.slotMin,
    startWindows: [{ from: 0, to: input.slots }],
    earliestStartSlot: 0,
    latestStartSlot: deadline - worstSlots,
    startStep: 1,
    startOffset: 0,
    readyBySlot: 0,
    standingLossMinorPerH: 0,
    // Waiting is what it costs: an hour the same for everybody.
    habitSlot: 0,
    pinnedSlot: null,
    shortestWorstSlots: worstSlots,
  })
  const problem: PlanProblem = {
    slotMin: input.slotMin,
    slots: input.slots,
    needs: units.map((unit) => ({ id: unit.unitId, unitId: unit.unitId, runs: [asRun(unit)] })),
    limits: input.limits,
    energyPriceMinorPerKwh: nothing,
    baseKw: nothing,
    demand: [],
    weights: { standingLoss: 0, habitMinorPerH: 1, evennessMinorPerKw: 0 },
  }
  return planRuns(problem, { seed: input.seed, targetGapFraction: 0.01, effort: 0.5 })
}

const lastReady = (units: readonly ColdUnit[], { starts }: Planned): number => {
  const worstOf = new Map(units.map(({ unitId, worstSlots }) => [unitId, worstSlots]))
  return starts.reduce((last, { runId, startSlot }) => Math.max(last, startSlot + (worstOf.get(runId) ?? 0)), 0)
}

/** The longest run, and the slots whose room adds up to all that must be loaded. */
function leastSlots({ limits, slots }: RestartInput, units: readonly ColdUnit[]): number {
  let least = units.reduce((longest, { worstSlots }) => Math.max(longest, worstSlots), 0)
  limits.forEach(({ limitKw, baseKw }, limit) => {
    let missing = units.reduce((sum, unit) => sum + (unit.limitKw[limit] ?? 0) * unit.worstSlots, 0)
    for (let slot = 0; slot < slots && missing > 1e-6; slot++) {
      missing -= Math.max(0, limitKw - (baseKw[slot] ?? 0))
      least = Math.max(least, slot + 1)
    }
  })
  return least
}

function linesOf(units: readonly ColdUnit[], { starts }: Planned): RosterLine[] {
  const worstOf = new Map(units.map(({ unitId, worstSlots }) => [unitId, worstSlots]))
  const placeOf = new Map(units.map(({ unitId }, place) => [unitId, place]))
  return [...starts]
    .sort((one, other) => one.startSlot - other.startSlot || (placeOf.get(one.runId) ?? 0) - (placeOf.get(other.runId) ?? 0))
    .map(({ runId, startSlot }, place) => ({
      order: place + 1,
      unitId: runId,
      startSlot,
      readySlot: startSlot + (worstOf.get(runId) ?? 0),
    }))
}
