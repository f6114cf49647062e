/** What an assignment loads where, kept up to date run by run; and what one more run would pass or raise. */
import type { Model, ModelRun } from './model.ts'

export interface Loads {
  /** Candidate of each run, -1 where it has none. */
  readonly chosen: Int32Array
  /** Room left, `limit × slots + slot`; below 0 where a limit is passed. */
  readonly leftW: Float64Array
  /** Mean of base and runs in each window. */
  readonly windowW: Float64Array
}

export const noLoads = (model: Model): Loads => ({
  chosen: new Int32Array(model.runs.length).fill(-1),
  leftW: model.roomW.slice(),
  windowW: model.windowBaseW.slice(),
})

export const copyLoads = (loads: Loads): Loads => ({
  chosen: loads.chosen.slice(),
  leftW: loads.leftW.slice(),
  windowW: loads.windowW.slice(),
})

export function place(model: Model, loads: Loads, run: ModelRun, candidate: number): void {
  loads.chosen[run.index] = candidate
  shift(model, loads, run, run.starts[candidate]!, 1)
}

export function takeOff(model: Model, loads: Loads, run: ModelRun): void {
  const candidate = loads.chosen[run.index]!
  if (candidate < 0) return
  loads.chosen[run.index] = -1
  shift(model, loads, run, run.starts[candidate]!, -1)
}

/** Adds (1) or takes away (-1) what the run loads from a slot on. */
export function shift(model: Model, loads: Loads, run: ModelRun, slot: number, sign: 1 | -1): void {
  const { slots, limitCount, terms, windowShare } = model
  const end = slot + run.worst
  for (let limit = 0; limit < limitCount; limit++) {
    const watts = sign * run.limitW[limit]!
    if (watts !== 0) for (let row = limit * slots + slot; row < limit * slots + end; row++) loads.leftW[row] = loads.leftW[row]! - watts
  }
  for (const term of terms) {
    const watts = sign * run.powerW
    const last = term.worstCase ? end : slot + run.full
    for (let at = slot; at < last; at++) {
      const window = term.windowOfSlot[at]!
      if (window >= 0) loads.windowW[window] = loads.windowW[window]! + watts * windowShare[window]!
    }
    if (term.worstCase || run.part === 0) continue
    const window = term.windowOfSlot[last]!
    if (window >= 0) loads.windowW[window] = loads.windowW[window]! + watts * run.part * windowShare[window]!
  }
}

/** Whether the run fits there; it must not be placed at the time. */
export function fits(model: Model, loads: Loads, run: ModelRun, slot: number): boolean {
  const { slots, limitCount } = model
  for (let limit = 0; limit < limitCount; limit++) {
    const watts = run.limitW[limit]!
    if (watts === 0) continue
    const end = limit * slots + slot + run.worst
    for (let row = limit * slots + slot; row < end; row++) if (loads.leftW[row]! < watts) return false
  }
  return true
}

/** What the charges on maxima come to. */
export function maximaCosts(model: Model, windowW: Float64Array): { readonly demandMinor: number; readonly evennessMinor: number } {
  let demandMinor = 0
  let evennessMinor = 0
  for (const { firstWindow, windowCount, floorW, priceMinorPerW, worstCase } of model.terms) {
    let peak = floorW
    for (let window = firstWindow; window < firstWindow + windowCount; window++) if (windowW[window]! > peak) peak = windowW[window]!
    const cost = (peak - floorW) * priceMinorPerW
    if (worstCase) evennessMinor += cost
    else demandMinor += cost
  }
  return { demandMinor, evennessMinor }
}

export function totalCost(model: Model, loads: Loads): number {
  const { demandMinor, evennessMinor } = maximaCosts(model, loads.windowW)
  let cost = demandMinor + evennessMinor
  for (const run of model.runs) {
    const candidate = loads.chosen[run.index]!
    if (candidate >= 0) cost += run.costs[candidate]!
  }
  return cost
}

/** Whether the placed runs of the need's unit overlap or stand in another order than theirs. */
export function overlapsInUnit(model: Model, loads: Loads, need: number): boolean {
  let over = 0
  for (const other of model.needsOfUnit[model.unitOfNeed[need]!]!)
    for (const index of model.runsOfNeed[other]!) {
      const candidate = loads.chosen[index]!
      if (candidate < 0) continue
      const run = model.runs[index]!
      if (run.starts[candidate]! < over) return true
      over = run.starts[candidate]! + run.worst
    }
  return false
}
