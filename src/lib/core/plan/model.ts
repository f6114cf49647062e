/**
 * A problem as the search sees it: flat arrays of rows (a limit in a slot), windows (a metering window of a charge; evenness
 * has every slot as one) and runs with their starts and what each costs alone. Built once, never changed.
 */
import { allowedStarts, expectedShape, ownCost, sumsBefore } from './run-terms.ts'
import type { Need, NeededRun, PlanProblem } from './types.ts'
import { reachableRoom } from './reachable.ts'

export interface ModelRun {
  readonly index: number
  readonly need: number
  readonly source: NeededRun
  readonly worst: number
  readonly full: number
  readonly part: number
  /** At the meter; the price of a window counts it. */
  readonly powerW: number
  /** On each limit, rounded up to whole watts. */
  readonly limitW: Int32Array
  /** Ascending. */
  readonly starts: Int32Array
  readonly costs: Float64Array
  /** Places in `starts`, cheapest first, the later start before the earlier where the cost is the same. */
  readonly byCost: Int32Array
  readonly pinned: boolean
}

/** One charge on a maximum. */
export interface MaxTerm {
  readonly priceMinorPerW: number
  readonly floorW: number
  /** The window of each slot, -1 where the charge does not look. */
  readonly windowOfSlot: Int32Array
  /** Evenness counts the worst case, a demand charge the expected. */
  readonly worstCase: boolean
  readonly firstWindow: number
  readonly windowCount: number
}

export interface Model {
  readonly problem: PlanProblem
  readonly slots: number
  readonly limitCount: number
  /** `limit × slots + slot`: what runs may load there, and the most that runs can really make of it. */
  readonly roomW: Float64Array
  readonly reachableW: Float64Array
  readonly terms: readonly MaxTerm[]
  readonly windowBaseW: Float64Array
  readonly windowTerm: Int32Array
  /** 1 / slots in the window. */
  readonly windowShare: Float64Array
  readonly runs: readonly ModelRun[]
  /** Runs of each need, and needs of each unit in their order. */
  readonly runsOfNeed: readonly (readonly number[])[]
  readonly unitOfNeed: Int32Array
  readonly needsOfUnit: readonly (readonly number[])[]
}

export function buildModel(problem: PlanProblem): Model {
  const { slots, limits } = problem
  const units = new Map<string, number>()
  const unitOfNeed = Int32Array.from(problem.needs, (need) => {
    const known = units.get(need.unitId)
    if (known !== undefined) return known
    units.set(need.unitId, units.size)
    return units.size - 1
  })
  const needsOfUnit: number[][] = Array.from(units, () => [])
  unitOfNeed.forEach((unit, need) => needsOfUnit[unit]?.push(need))
  const runs = buildRuns(problem)
  const runsOfNeed: number[][] = problem.needs.map(() => [])
  for (const run of runs) runsOfNeed[run.need]?.push(run.index)

  const roomW = new Float64Array(limits.length * slots)
  limits.forEach((limit, place) => {
    for (let slot = 0; slot < slots; slot++)
      roomW[place * slots + slot] = Math.max(0, Math.floor((limit.limitKw - (limit.baseKw[slot] ?? 0)) * 1000 + 1e-6))
  })
  return {
    problem,
    slots,
    limitCount: limits.length,
    roomW,
    reachableW: reachableRoom(roomW, slots, runs),
    ...buildTerms(problem),
    runs,
    runsOfNeed,
    unitOfNeed,
    needsOfUnit,
  }
}

function buildRuns(problem: PlanProblem): ModelRun[] {
  const priceSums = sumsBefore(problem.energyPriceMinorPerKwh)
  const runs: ModelRun[] = []
  problem.needs.forEach((need: Need, place) => {
    for (const source of need.runs) {
      const { fullSlots, lastFraction } = expectedShape(source, problem.slotMin)
      const starts = Int32Array.from(allowedStarts(problem, source))
      const costs = Float64Array.from(starts, (slot) => {
        const own = ownCost(problem, priceSums, source, slot)
        return own.energyMinor + own.standingLossMinor + own.habitMinor
      })
      runs.push({
        index: runs.length,
        need: place,
        source,
        worst: source.worstSlots,
        full: fullSlots,
        part: lastFraction,
        powerW: source.powerKw * 1000,
        limitW: Int32Array.from(source.limitKw, (kw) => Math.ceil(kw * 1000 - 1e-6)),
        starts,
        costs,
        byCost: Int32Array.from(starts.keys()).sort((one, other) => (costs[one] ?? 0) - (costs[other] ?? 0) || other - one),
        pinned: source.pinnedSlot !== null,
      })
    }
  })
  return runs
}

function buildTerms(problem: PlanProblem): Pick<Model, 'terms' | 'windowBaseW' | 'windowTerm' | 'windowShare'> {
  const terms: MaxTerm[] = []
  const base: number[] = []
  const share: number[] = []
  const term: number[] = []
  const add = (priceMinorPerKw: number, alreadyKw: number, windows: readonly { from: number; to: number }[], worstCase: boolean) => {
    if (priceMinorPerKw === 0 || windows.length === 0) return
    const windowOfSlot = new Int32Array(problem.slots).fill(-1)
    const firstWindow = base.length
    let floorW = alreadyKw * 1000
    for (const { from, to } of windows) {
      let sum = 0
      for (let slot = from; slot < to; slot++) {
        windowOfSlot[slot] = base.length
        sum += (problem.baseKw[slot] ?? 0) * 1000
      }
      base.push(sum / (to - from))
      share.push(1 / (to - from))
      term.push(terms.length)
      floorW = Math.max(floorW, sum / (to - from))
    }
    terms.push({ priceMinorPerW: priceMinorPerKw / 1000, floorW, windowOfSlot, worstCase, firstWindow, windowCount: windows.length })
  }
  for (const charge of problem.demand) add(charge.priceMinorPerKw, charge.alreadyKw, charge.windows, false)
  const everySlot = Array.from({ length: problem.slots }, (_, slot) => ({ from: slot, to: slot + 1 }))
  add(problem.weights.evennessMinorPerKw, 0, everySlot, true)
  return { terms, windowBaseW: Float64Array.from(base), windowTerm: Int32Array.from(term), windowShare: Float64Array.from(share) }
}
