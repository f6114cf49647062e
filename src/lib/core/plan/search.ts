/**
 * Looks for starts that fit: every block is taken up and put back where its own cost and the penalties for passing a limit or a
 * target are least, and whatever stays passed grows dearer from round to round. Counts its steps, so that its time is bounded.
 */
import { cheapestChoice, type Block } from './blocks.ts'
import { place, takeOff, type Loads } from './loads.ts'
import type { Model, ModelRun } from './model.ts'
import { loadPrice, type PriceSums } from './prices.ts'
import { shuffle } from './random.ts'

export interface Search {
  readonly model: Model
  readonly random: () => number
  /** Which needs are to be served. */
  readonly isIn: Uint8Array
  readonly blocks: readonly Block[]
  loads: Loads
  /** The highest mean that each charge's windows should have. */
  readonly targetW: Float64Array
  /** Per watt above: of each limit and slot, of each window. */
  readonly limitPenalty: Float64Array
  readonly windowPenalty: Float64Array
  /** What a penalty is measured in: about what a watt and slot of freedom is worth. */
  readonly scale: number
  /** Slots looked at so far, and how many may be. */
  steps: number
  readonly mostSteps: number
}

export interface Begin {
  readonly model: Model
  readonly blocks: readonly Block[]
  readonly isIn: Uint8Array
  readonly loads: Loads
  readonly random: () => number
  readonly mostSteps: number
}

export function beginSearch(begin: Begin): Search {
  const { model } = begin
  let scale = 0
  for (const { costs, byCost, powerW, worst } of model.runs)
    if (costs.length > 1 && powerW > 0) scale += (costs[byCost.at(-1)!]! - costs[byCost[0]!]!) / (powerW * worst)
  for (const term of model.terms) scale += (term.priceMinorPerW * model.runs.length) / term.windowCount
  const search: Search = {
    ...begin,
    targetW: new Float64Array(model.terms.length).fill(Infinity),
    limitPenalty: new Float64Array(model.roomW.length),
    windowPenalty: new Float64Array(model.windowBaseW.length),
    scale: Math.max(1e-9, scale / Math.max(1, model.runs.length)),
    steps: 0,
  }
  forgetPenalties(search)
  return search
}

export function forgetPenalties(search: Search): void {
  search.limitPenalty.fill(search.scale)
  for (let window = 0; window < search.windowPenalty.length; window++)
    search.windowPenalty[window] = search.scale / search.model.windowShare[window]!
}

/** How a start is judged: by its own cost, by the prices of the load too, and with or without leave to pass limits and targets. */
export interface Judge {
  readonly sums: PriceSums | null
  readonly mayPass: boolean
}

/** What a start costs as things stand; infinite when it may not be. */
function judged(search: Search, run: ModelRun, candidate: number, judge: Judge, worthwhile: number): number {
  const { model, loads } = search
  const slot = run.starts[candidate]!
  let cost = run.costs[candidate]!
  if (judge.sums) cost += loadPrice(model, judge.sums, run.index, slot)
  if (cost >= worthwhile) return Infinity
  search.steps += run.worst + 4
  for (let limit = 0; limit < run.limitW.length; limit++) {
    const watts = run.limitW[limit]!
    if (watts === 0) continue
    const first = limit * model.slots + slot
    for (let row = first; row < first + run.worst; row++) {
      const left = loads.leftW[row]!
      if (left >= watts) continue
      if (!judge.mayPass) return Infinity
      cost += search.limitPenalty[row]! * (left > 0 ? watts - left : watts)
    }
    if (cost >= worthwhile) return Infinity
  }
  for (let term = 0; term < model.terms.length; term++) {
    const target = search.targetW[term]!
    if (target === Infinity) continue
    const pays = overTarget(search, term, run, slot)
    if (pays > 0 && !judge.mayPass) return Infinity
    cost += pays
  }
  return cost
}

/** What a start costs as things stand; the run must not be placed at the time. */
export const judgedAt = (search: Search, run: ModelRun, candidate: number, judge: Judge): number =>
  judged(search, run, candidate, judge, Infinity)

/** What a start pays for means above a charge's target. The hot path of every round: no closure, windows follow each other. */
function overTarget({ model, loads, targetW, windowPenalty }: Search, term: number, run: ModelRun, slot: number): number {
  const { windowOfSlot, worstCase } = model.terms[term]!
  const target = targetW[term]!
  const partAt = worstCase ? -1 : slot + run.full
  const last = worstCase ? slot + run.worst : slot + run.full + (run.part > 0 ? 1 : 0)
  let pays = 0
  let at = slot
  while (at < last) {
    const window = windowOfSlot[at]!
    let slotsIn = 0
    do {
      slotsIn += at === partAt ? run.part : 1
      at++
    } while (at < last && windowOfSlot[at] === window)
    if (window < 0) continue
    const now = loads.windowW[window]!
    const addedW = run.powerW * slotsIn * model.windowShare[window]!
    const over = now + addedW - target
    if (over > 1e-6) pays += windowPenalty[window]! * (now > target ? addedW : over)
  }
  return pays
}

/** Takes a block's runs up and puts them where they are cheapest; `false`, and nothing changed, when there is no such place. */
export function reinsert(search: Search, block: Block, judge: Judge): boolean {
  const { model, loads, isIn } = search
  if (block.runs.length === 1) return isIn[block.runs[0]!.need] === 0 || reinsertRun(search, block.runs[0]!, judge)
  const needs = block.needs.filter((need) => isIn[model.runs[need[0]!]!.need] === 1)
  if (needs.length === 0) return true
  const runs = needs.flat().map((index) => model.runs[index]!)
  const before = runs.map((run) => loads.chosen[run.index]!)
  for (const run of runs) takeOff(model, loads, run)
  const after = cheapestStarts(search, { ...block, needs, runs }, judge)
  const found = after.every((candidate) => candidate >= 0)
  runs.forEach((run, at) => {
    const candidate = found ? after[at]! : before[at]!
    if (candidate >= 0) place(model, loads, run, candidate)
  })
  return found
}

function reinsertRun(search: Search, run: ModelRun, judge: Judge): boolean {
  const { model, loads } = search
  const before = loads.chosen[run.index]!
  takeOff(model, loads, run)
  const after = cheapestStart(search, run, judge)
  const candidate = after >= 0 ? after : before
  if (candidate >= 0) place(model, loads, run, candidate)
  return after >= 0
}

function cheapestStart(search: Search, run: ModelRun, judge: Judge): number {
  let best = -1
  let value = Infinity
  for (const candidate of run.byCost) {
    if (run.costs[candidate]! >= value) break
    const cost = judged(search, run, candidate, judge, value)
    if (cost < value) {
      value = cost
      best = candidate
    }
  }
  return best
}

function cheapestStarts(search: Search, block: Block, judge: Judge): number[] {
  const reducedCost = (run: number, candidate: number) => judged(search, search.model.runs[run]!, candidate, judge, Infinity)
  search.steps += block.span * block.needs.length
  return Array.from(cheapestChoice(search.model, block, reducedCost, Infinity).chosen)
}

/** One round over all blocks, in a new order. */
export function sweep(search: Search, judge: Judge): void {
  for (const block of shuffle([...search.blocks], search.random)) reinsert(search, block, judge)
}

/** Rounds without a new low in the blocks that pass something, after which a repair is given up. */
const PATIENCE = 14

/** Rounds over the blocks that pass something, until nothing does (`true`) or the rounds are over. */
export function repair(search: Search, rounds: number): boolean {
  const judge: Judge = { sums: null, mayPass: true }
  let fewest = Infinity
  let still = 0
  for (let round = 0; round < rounds; round++) {
    const passing = blocksPassing(search)
    if (passing.length === 0) return true
    still = passing.length < fewest ? 0 : still + 1
    fewest = Math.min(fewest, passing.length)
    if (search.steps >= search.mostSteps || still === PATIENCE) return false
    raisePenalties(search)
    for (const block of shuffle(passing, search.random)) if (touchesPassed(search, block)) reinsert(search, block, judge)
  }
  return blocksPassing(search).length === 0
}

function blocksPassing(search: Search): Block[] {
  if (!search.loads.leftW.some((left) => left < 0) && !passesTarget(search)) return []
  return search.blocks.filter((block) => touchesPassed(search, block))
}

function passesTarget({ model, loads, targetW }: Search): boolean {
  return loads.windowW.some((load, window) => load > targetW[model.windowTerm[window]!]! + 1e-6 && load > model.windowBaseW[window]! + 1e-6)
}

function touchesPassed({ model, loads, targetW }: Search, block: Block): boolean {
  for (const run of block.runs) {
    const candidate = loads.chosen[run.index]!
    if (candidate < 0) continue
    const slot = run.starts[candidate]!
    for (let limit = 0; limit < run.limitW.length; limit++) {
      if (run.limitW[limit] === 0) continue
      const first = limit * model.slots + slot
      for (let row = first; row < first + run.worst; row++) if (loads.leftW[row]! < 0) return true
    }
    for (let term = 0; term < model.terms.length; term++) {
      const { windowOfSlot } = model.terms[term]!
      for (let at = slot; at < slot + run.worst; at++) {
        const window = windowOfSlot[at]!
        if (window >= 0 && loads.windowW[window]! > targetW[term]! + 1e-6) return true
      }
    }
  }
  return false
}

function raisePenalties(search: Search): void {
  const { model, loads, targetW, limitPenalty, windowPenalty, scale } = search
  for (let row = 0; row < limitPenalty.length; row++) if (loads.leftW[row]! < 0) limitPenalty[row] = limitPenalty[row]! + scale / 2
  for (let window = 0; window < windowPenalty.length; window++)
    if (loads.windowW[window]! > targetW[model.windowTerm[window]!]! + 1e-6)
      windowPenalty[window] = windowPenalty[window]! + scale / 2 / model.windowShare[window]!
}

/** The highest mean of each charge's windows, never below its floor. */
export function peaks(model: Model, windowW: Float64Array): Float64Array {
  return Float64Array.from(model.terms, ({ firstWindow, windowCount, floorW }) => {
    let peak = floorW
    for (let window = firstWindow; window < firstWindow + windowCount; window++) peak = Math.max(peak, windowW[window]!)
    return peak
  })
}
