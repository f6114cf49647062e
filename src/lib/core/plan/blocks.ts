/**
 * The runs that cannot be chosen one by one: a unit's needs whose times may touch, in their order. Under given prices a block's
 * cheapest starts are exact, by one pass over its slots.
 */
import type { Model, ModelRun } from './model.ts'

export interface Block {
  /** In their order; each need's runs in theirs. */
  readonly needs: readonly (readonly number[])[]
  /** The same runs in one row. */
  readonly runs: readonly ModelRun[]
  /** How many units have this very block. */
  readonly count: number
  readonly from: number
  readonly span: number
}

/** What a start costs under prices: runs' own cost times `costShare`, plus what the load pays. */
export type ReducedCost = (run: number, candidate: number) => number

/** Every unit's blocks, of the needs that are in. */
export function unitBlocks(model: Model, isIn: (need: number) => boolean): Block[] {
  const blocks: Block[] = []
  for (const unitNeeds of model.needsOfUnit) {
    const needs = unitNeeds.filter(isIn).map((need) => model.runsOfNeed[need]!)
    // From each need on, the earliest start of all that follow: a cut is clean only where nothing later reaches back over it.
    const earliest = needs.map((runs) => Math.min(...runs.map((run) => model.runs[run]!.starts[0]!)))
    for (let place = needs.length - 2; place >= 0; place--) earliest[place] = Math.min(earliest[place]!, earliest[place + 1]!)
    let open: (readonly number[])[] = []
    let lastEnd = 0
    needs.forEach((runs, place) => {
      if (open.length > 0 && earliest[place]! >= lastEnd) {
        blocks.push(asBlock(model, open))
        open = []
      }
      open.push(runs)
      for (const run of runs) lastEnd = Math.max(lastEnd, model.runs[run]!.starts.at(-1)! + model.runs[run]!.worst)
    })
    if (open.length > 0) blocks.push(asBlock(model, open))
  }
  return blocks
}

/** Needs of one unit as a block, whether their times touch or not. */
export function asBlock(model: Model, needs: readonly (readonly number[])[]): Block {
  const runs = needs.flat().map((run) => model.runs[run]!)
  const from = Math.min(...runs.map((run) => run.starts[0]!))
  const to = Math.max(...runs.map((run) => run.starts.at(-1)! + run.worst))
  return { needs, runs, count: 1, from, span: to - from }
}

/** Blocks that are the same but for their names, once each. */
export function alike(model: Model, blocks: readonly Block[]): Block[] {
  const known = new Map<string, Block & { count: number }>()
  for (const block of blocks) {
    const key = block.needs.map((need) => need.map((run) => signature(model, run)).join('|')).join('/')
    const same = known.get(key)
    if (same) same.count += block.count
    else known.set(key, { ...block })
  }
  return [...known.values()]
}

/** Everything that the cheapest start depends on. */
function signature(model: Model, run: number): string {
  const { source, pinned, starts } = model.runs[run]!
  const { powerKw, limitKw, worstSlots, expectedMin, startWindows, readyBySlot, standingLossMinorPerH, habitSlot, startStep } = source
  const windows = startWindows.map(({ from, to }) => `${from}-${to}`).join()
  const own = [powerKw, limitKw.join(), worstSlots, expectedMin, startStep, readyBySlot, standingLossMinorPerH, habitSlot, pinned]
  return `${own.join(';')};${windows};${starts[0]};${starts.at(-1)};${starts.length}`
}

export interface BlockChoice {
  readonly value: number
  /** Candidate of each run of the block in order; -1 where its need is left out. */
  readonly chosen: ArrayLike<number>
}

/** The cheapest way through a block; a need may be left out for `skipCost`, or not at all when that is infinite. */
export function cheapestChoice(model: Model, block: Block, reducedCost: ReducedCost, skipCost: number): BlockChoice {
  if (block.runs.length > 1) return cheapestChain(model, block, reducedCost, skipCost)
  const { index, starts } = block.runs[0]!
  let best = -1
  let value = skipCost
  for (let candidate = 0; candidate < starts.length; candidate++) {
    const cost = reducedCost(index, candidate)
    if (cost < value) {
      value = cost
      best = candidate
    }
  }
  return { value, chosen: [best] }
}

/** `soFar[e]`: the least cost of what came before, all of it over by slot from + e. */
function cheapestChain(model: Model, block: Block, reducedCost: ReducedCost, skipCost: number): BlockChoice {
  const { from, span } = block
  let soFar = new Float64Array(span + 1)
  const picks: Int32Array[] = []
  const skips: Uint8Array[] = []
  for (const need of block.needs) {
    let within = soFar
    for (const run of need) {
      const { starts, worst } = model.runs[run]!
      const next = new Float64Array(span + 1).fill(Infinity)
      const pick = new Int32Array(span + 1).fill(-1)
      for (let candidate = 0; candidate < starts.length; candidate++) {
        const place = starts[candidate]! - from
        const cost = within[place]! + reducedCost(run, candidate)
        if (cost < next[place + worst]!) {
          next[place + worst] = cost
          pick[place + worst] = candidate
        }
      }
      for (let end = 1; end <= span; end++)
        if (next[end - 1]! <= next[end]!) {
          next[end] = next[end - 1]!
          pick[end] = pick[end - 1]!
        }
      picks.push(pick)
      within = next
    }
    const skip = new Uint8Array(span + 1)
    for (let end = 0; end <= span; end++)
      if (soFar[end]! + skipCost <= within[end]! && skipCost < Infinity) {
        within[end] = soFar[end]! + skipCost
        skip[end] = 1
      }
    skips.push(skip)
    soFar = within
  }
  const chosen = new Int32Array(picks.length).fill(-1)
  let end = span
  let place = picks.length
  for (let need = block.needs.length - 1; need >= 0; need--) {
    const runs = block.needs[need]!
    place -= runs.length
    if (skips[need]![end] === 1) continue
    for (let step = runs.length - 1; step >= 0; step--) {
      const candidate = picks[place + step]![end]!
      chosen[place + step] = candidate
      if (candidate < 0) break
      end = model.runs[runs[step]!]!.starts[candidate]! - from
    }
  }
  return { value: soFar[span]!, chosen }
}
