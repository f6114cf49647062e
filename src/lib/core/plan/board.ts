/**
 * A plan on the table: the loads of given starts, kept so that the effect of moving one run is known at once. Starts may break rules;
 * that is shown, not prevented. Cost of a move: the run's slots and the metering windows.
 */
import { maximaCosts, noLoads, shift, type Loads } from './loads.ts'
import { buildModel, type Model, type ModelRun } from './model.ts'
import { isAllowedStart, noCost, ownCost, sumsBefore } from './run-terms.ts'
import type { CostParts, MoveEffect, PlannedRun, PlanProblem } from './types.ts'

export interface Board {
  readonly model: Model
  readonly loads: Loads
  /** Slot of each run, -1 where it has no start. */
  readonly slotOf: Int32Array
  readonly runById: ReadonlyMap<string, ModelRun>
  readonly priceSums: Float64Array
}

/** Starts of runs that the problem does not have, or outside its horizon, are left out. */
export function openBoard(problem: PlanProblem, starts: readonly PlannedRun[]): Board {
  const model = buildModel(problem)
  const board: Board = {
    model,
    loads: noLoads(model),
    slotOf: new Int32Array(model.runs.length).fill(-1),
    runById: new Map(model.runs.map((run) => [run.source.id, run])),
    priceSums: sumsBefore(problem.energyPriceMinorPerKwh),
  }
  for (const { runId, startSlot } of starts) moveRun(board, runId, startSlot)
  return board
}

const isInHorizon = ({ model }: Board, run: ModelRun, slot: number): boolean =>
  Number.isInteger(slot) && slot >= 0 && slot + run.worst <= model.slots

/** Puts a run at a slot, or takes it off; `false` when there is no such run or the slot is outside the horizon. */
export function moveRun(board: Board, runId: string, toSlot: number | null): boolean {
  const run = board.runById.get(runId)
  if (!run || (toSlot !== null && !isInHorizon(board, run, toSlot))) return false
  const from = board.slotOf[run.index]!
  if (from >= 0) shift(board.model, board.loads, run, from, -1)
  if (toSlot !== null) shift(board.model, board.loads, run, toSlot, 1)
  board.slotOf[run.index] = toSlot ?? -1
  return true
}

export function boardStarts(board: Board): PlannedRun[] {
  return board.model.runs.flatMap((run) => {
    const slot = board.slotOf[run.index]!
    return slot < 0 ? [] : [{ runId: run.source.id, startSlot: slot }]
  })
}

/** `null` when there is no such run. Nothing is changed. */
export function moveEffect(board: Board, runId: string, toSlot: number): MoveEffect | null {
  const run = board.runById.get(runId)
  if (!run) return null
  const { model, loads, slotOf } = board
  const from = slotOf[run.index]!
  const fromSlot = from < 0 ? null : from
  if (!isInHorizon(board, run, toSlot)) return { runId, fromSlot, toSlot, allowed: false, over: [], costChange: noCost }
  const before = maximaCosts(model, loads.windowW)
  if (from >= 0) shift(model, loads, run, from, -1)
  const over = passed(board, run, toSlot)
  const room = roomInUnit(board, run)
  shift(model, loads, run, toSlot, 1)
  const after = maximaCosts(model, loads.windowW)
  shift(model, loads, run, toSlot, -1)
  if (from >= 0) shift(model, loads, run, from, 1)
  const own = ownCost(model.problem, board.priceSums, run.source, toSlot)
  const old = from < 0 ? noCost : ownCost(model.problem, board.priceSums, run.source, from)
  const change = {
    energyMinor: own.energyMinor - old.energyMinor,
    demandMinor: after.demandMinor - before.demandMinor,
    standingLossMinor: own.standingLossMinor - old.standingLossMinor,
    habitMinor: own.habitMinor - old.habitMinor,
    evennessMinor: after.evennessMinor - before.evennessMinor,
  }
  const allowed = isAllowedStart(model.problem, run.source, toSlot) && toSlot >= room.lowest && toSlot <= room.highest
  return { runId, fromSlot, toSlot, allowed, over, costChange: withTotal(change) }
}

const withTotal = (parts: Omit<CostParts, 'totalMinor'>): CostParts => ({
  ...parts,
  totalMinor: parts.energyMinor + parts.demandMinor + parts.standingLossMinor + parts.habitMinor + parts.evennessMinor,
})

function passed({ model, loads }: Board, run: ModelRun, slot: number): MoveEffect['over'] {
  return model.problem.limits.flatMap(({ id }, limit) => {
    const watts = run.limitW[limit]!
    let least = Infinity
    let atSlot = slot
    for (let at = slot; watts > 0 && at < slot + run.worst; at++) {
      const left = loads.leftW[limit * model.slots + at]!
      if (left < least) {
        least = left
        atSlot = at
      }
    }
    return watts > least ? [{ limitId: id, overKw: (watts - least) / 1000, atSlot }] : []
  })
}

/** The starts a run may have beside its unit's other placed runs: `[lowest, highest]`. Run indexes ascend in a unit's order. */
function roomInUnit({ model, slotOf }: Board, run: ModelRun): { readonly lowest: number; readonly highest: number } {
  let lowest = 0
  for (const need of model.needsOfUnit[model.unitOfNeed[run.need]!]!)
    for (const other of model.runsOfNeed[need]!) {
      const slot = slotOf[other]!
      if (other === run.index || slot < 0) continue
      if (other > run.index) return { lowest, highest: slot - run.worst }
      lowest = Math.max(lowest, slot + model.runs[other]!.worst)
    }
  return { lowest, highest: model.slots }
}
