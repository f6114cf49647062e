/** What one run may do and what each start costs it alone: shared by the planner, the board and the evaluation. */
import type { CostParts, NeededRun, PlanProblem } from './types.ts'

/** Slots at the meter: `fullSlots` whole ones, then `lastFraction` of one. */
export interface ExpectedShape {
  readonly fullSlots: number
  readonly lastFraction: number
}

export function expectedShape(run: NeededRun, slotMin: number): ExpectedShape {
  const slots = run.expectedMin / slotMin
  const fullSlots = Math.floor(slots + 1e-9)
  const lastFraction = slots - fullSlots
  return { fullSlots, lastFraction: lastFraction < 1e-9 ? 0 : lastFraction }
}

/** Whether the run's own hours, steps, ready-by and the horizon allow a start; a pin is not looked at. */
export function isAllowedStart(problem: PlanProblem, run: NeededRun, slot: number): boolean {
  return (
    slot >= Math.max(0, run.earliestStartSlot) &&
    slot <= Math.min(run.latestStartSlot, problem.slots - run.worstSlots) &&
    (slot - run.startOffset) % run.startStep === 0 &&
    run.startWindows.some(({ from, to }) => slot >= from && slot < to)
  )
}

/** The starts a run may have, ascending: only its pin where it has one. */
export function allowedStarts(problem: PlanProblem, run: NeededRun): number[] {
  if (run.pinnedSlot !== null) return isAllowedStart(problem, run, run.pinnedSlot) ? [run.pinnedSlot] : []
  const starts: number[] = []
  const lowest = Math.max(0, run.earliestStartSlot)
  const highest = Math.min(run.latestStartSlot, problem.slots - run.worstSlots)
  for (const { from, to } of [...run.startWindows].sort((one, other) => one.from - other.from)) {
    const first = Math.max(lowest, from, (starts.at(-1) ?? -1) + 1)
    const misfit = (((first - run.startOffset) % run.startStep) + run.startStep) % run.startStep
    for (let slot = misfit === 0 ? first : first + run.startStep - misfit; slot <= highest && slot < to; slot += run.startStep)
      starts.push(slot)
  }
  return starts
}

export interface OwnCost {
  readonly energyMinor: number
  readonly standingLossMinor: number
  readonly habitMinor: number
}

/** `priceSums[s]` is the sum of the prices of the slots before s. */
export function ownCost(problem: PlanProblem, priceSums: Float64Array, run: NeededRun, slot: number): OwnCost {
  const { fullSlots, lastFraction } = expectedShape(run, problem.slotMin)
  const end = slot + fullSlots
  const whole = (priceSums[end] ?? 0) - (priceSums[slot] ?? 0)
  const part = lastFraction > 0 ? lastFraction * (problem.energyPriceMinorPerKwh[end] ?? 0) : 0
  const slotH = problem.slotMin / 60
  const waitingH = Math.max(0, run.readyBySlot * slotH - slot * slotH - run.expectedMin / 60)
  return {
    energyMinor: run.powerKw * slotH * (whole + part),
    standingLossMinor: problem.weights.standingLoss * run.standingLossMinorPerH * waitingH,
    habitMinor: run.habitSlot === null ? 0 : problem.weights.habitMinorPerH * Math.abs(slot - run.habitSlot) * slotH,
  }
}

/** Sums before each place, one longer than what is summed. */
export function sumsBefore(values: ArrayLike<number>): Float64Array {
  const sums = new Float64Array(values.length + 1)
  for (let place = 0; place < values.length; place++) sums[place + 1] = (sums[place] ?? 0) + (values[place] ?? 0)
  return sums
}

export const noCost: CostParts = { energyMinor: 0, demandMinor: 0, standingLossMinor: 0, habitMinor: 0, evennessMinor: 0, totalMinor: 0 }
