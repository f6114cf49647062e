/** Needs that are out before any choice is made: no start, too large for a limit even alone, or a pin that cannot be kept. */
import { asBlock, cheapestChoice } from './blocks.ts'
import { fits, noLoads, overlapsInUnit, place, takeOff, type Loads } from './loads.ts'
import type { Model } from './model.ts'
import type { UnservedReason } from './types.ts'

export type Excluded = Map<number, Exclude<UnservedReason, 'service-full'>>

export function excludedNeeds(model: Model): Excluded {
  const excluded: Excluded = new Map()
  const empty = noLoads(model)
  model.runsOfNeed.forEach((runs, need) => {
    if (!hasWay(model, runs, null)) excluded.set(need, runs.some((run) => model.runs[run]!.pinned) ? 'pin-not-allowed' : 'no-allowed-start')
    else if (!hasWay(model, runs, empty)) excluded.set(need, 'too-large-alone')
  })
  keepPins(model, excluded)
  return excluded
}

/** Whether the runs of a need can follow each other at all; under limits, where loads are given. */
function hasWay(model: Model, runs: readonly number[], loads: Loads | null): boolean {
  if (runs.some((run) => model.runs[run]!.starts.length === 0)) return false
  const price = (index: number, candidate: number) => {
    const run = model.runs[index]!
    return loads && !fits(model, loads, run, run.starts[candidate]!) ? Infinity : 0
  }
  return cheapestChoice(model, asBlock(model, [runs]), price, Infinity).value < Infinity
}

/** Pinned runs come first, in their order; one that does not fit beside those before it is out. */
function keepPins(model: Model, excluded: Excluded): void {
  const pins = noLoads(model)
  model.runsOfNeed.forEach((runs, need) => {
    const pinned = runs.map((run) => model.runs[run]!).filter((run) => run.pinned)
    if (pinned.length === 0 || excluded.has(need)) return
    const placed: typeof pinned = []
    for (const run of pinned) {
      if (!fits(model, pins, run, run.starts[0]!)) break
      place(model, pins, run, 0)
      placed.push(run)
    }
    if (placed.length === pinned.length && !overlapsInUnit(model, pins, need)) return
    for (const run of placed) takeOff(model, pins, run)
    excluded.set(need, placed.length === pinned.length ? 'pin-not-allowed' : 'pin-over-limit')
  })
}
