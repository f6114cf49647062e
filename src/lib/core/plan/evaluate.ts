/** What given starts cost and load, whether they keep the rules or not. Reads the problem only, not the planner's model. */
import { expectedShape, isAllowedStart, ownCost, sumsBefore } from './run-terms.ts'
import type { DemandPeak, Evaluation, LimitLoad, NeededRun, PlannedRun, PlanProblem } from './types.ts'

interface Placed {
  readonly run: NeededRun
  readonly unitId: string
  readonly slot: number
}

/** Starts of runs that the problem does not have, or outside its horizon, count as not allowed and load nothing. */
export function evaluatePlan(problem: PlanProblem, starts: readonly PlannedRun[]): Evaluation {
  const startOf = new Map(starts.map(({ runId, startSlot }) => [runId, startSlot]))
  const placed: Placed[] = []
  for (const need of problem.needs)
    for (const run of need.runs) {
      const slot = startOf.get(run.id)
      if (slot === undefined || !Number.isInteger(slot) || slot < 0 || slot + run.worstSlots > problem.slots) continue
      placed.push({ run, unitId: need.unitId, slot })
      startOf.delete(run.id)
    }
  const expectedKw = Float64Array.from(problem.baseKw)
  const worstKw = Float64Array.from(problem.baseKw)
  const priceSums = sumsBefore(problem.energyPriceMinorPerKwh)
  const own = { energyMinor: 0, standingLossMinor: 0, habitMinor: 0 }
  for (const { run, slot } of placed) {
    const { fullSlots, lastFraction } = expectedShape(run, problem.slotMin)
    for (let at = slot; at < slot + run.worstSlots; at++) {
      worstKw[at] = worstKw[at]! + run.powerKw
      const share = at < slot + fullSlots ? 1 : at === slot + fullSlots ? lastFraction : 0
      expectedKw[at] = expectedKw[at]! + run.powerKw * share
    }
    const cost = ownCost(problem, priceSums, run, slot)
    own.energyMinor += cost.energyMinor
    own.standingLossMinor += cost.standingLossMinor
    own.habitMinor += cost.habitMinor
  }
  const demand = problem.demand.map((charge) => demandPeak(problem, charge, expectedKw))
  const demandMinor = demand.reduce((sum, { costMinor }) => sum + costMinor, 0)
  const evennessMinor = problem.weights.evennessMinorPerKw * (highest(worstKw) - highest(problem.baseKw))
  return {
    cost: {
      ...own,
      demandMinor,
      evennessMinor,
      totalMinor: own.energyMinor + own.standingLossMinor + own.habitMinor + demandMinor + evennessMinor,
    },
    limits: problem.limits.map((_, limit) => limitLoad(problem, limit, placed)),
    expectedKw: [...expectedKw],
    worstKw: [...worstKw],
    demand,
    notAllowed: [...startOf.keys(), ...breaking(problem, placed)],
  }
}

/** Loads are never below 0. */
const highest = (values: Iterable<number>): number => {
  let most = 0
  for (const value of values) most = Math.max(most, value)
  return most
}

function demandPeak(problem: PlanProblem, charge: PlanProblem['demand'][number], loadKw: Float64Array): DemandPeak {
  let peakKw = 0
  let floorKw = charge.alreadyKw
  let window: DemandPeak['window'] = null
  for (const each of charge.windows) {
    let sum = 0
    let base = 0
    for (let slot = each.from; slot < each.to; slot++) {
      sum += loadKw[slot]!
      base += problem.baseKw[slot]!
    }
    floorKw = Math.max(floorKw, base / (each.to - each.from))
    if (window !== null && sum / (each.to - each.from) <= peakKw) continue
    peakKw = sum / (each.to - each.from)
    window = each
  }
  return { demandId: charge.id, peakKw, window, costMinor: charge.priceMinorPerKw * Math.max(0, peakKw - floorKw) }
}

function limitLoad(problem: PlanProblem, limit: number, placed: readonly Placed[]): LimitLoad {
  const { id, limitKw, baseKw } = problem.limits[limit]!
  const worstKw = [...baseKw]
  const touched = new Uint8Array(problem.slots)
  for (const { run, slot } of placed) {
    const kw = run.limitKw[limit]!
    for (let at = slot; kw > 0 && at < slot + run.worstSlots; at++) {
      worstKw[at] = worstKw[at]! + kw
      touched[at] = 1
    }
  }
  const peakKw = highest(worstKw)
  // A millionth of a kilowatt: far below any rating's last digit, far above what adding up loses.
  const overSlots = [...worstKw.keys()].filter((slot) => touched[slot] === 1 && worstKw[slot]! > limitKw + 1e-6)
  return { limitId: id, limitKw, worstKw, peakKw, peakSlot: worstKw.indexOf(peakKw), overSlots }
}

function breaking(problem: PlanProblem, placed: readonly Placed[]): string[] {
  const ids: string[] = []
  const endOf = new Map<string, number>()
  for (const { run, unitId, slot } of placed) {
    const isFree = slot >= (endOf.get(unitId) ?? 0)
    endOf.set(unitId, slot + run.worstSlots)
    const isWhereItIsPinned = run.pinnedSlot === null || run.pinnedSlot === slot
    if (!isFree || !isWhereItIsPinned || !isAllowedStart(problem, run, slot)) ids.push(run.id)
  }
  return ids
}
