/** The smallest single changes that would serve one more need, with every other run left where the plan has it. */
import { openBoard, type Board } from './board.ts'
import { fits } from './loads.ts'
import type { ModelRun } from './model.ts'
import { allowedStarts } from './run-terms.ts'
import type { Need, NeededRun, PlannedRun, PlanProblem, ServingChange } from './types.ts'

/** What a need of some runs would need of a limit: a way through, run by run. */
interface Way {
  readonly slots: readonly number[]
}

/** Empty when the plan serves the need already, when there is no such need, or when none of the changes would help. */
export function changesToServe(problem: PlanProblem, starts: readonly PlannedRun[], needId: string): ServingChange[] {
  return changesOnBoard(openBoard(problem, starts), needId)
}

/** The same on a board that is open already; each costs the need's starts times its slots, times the slots tried. */
export function changesOnBoard(board: Board, needId: string): ServingChange[] {
  const { problem } = board.model
  const need = problem.needs.find(({ id }) => id === needId)
  if (!need || need.runs.some(({ id }) => board.slotOf[board.runById.get(id)!.index]! >= 0)) return []
  return [laterReadyBy(board, need), moreService(board, need), shorterRun(board, need)].filter((change) => change !== null)
}

const named = (need: Need, way: Way): PlannedRun[] => need.runs.map(({ id }, place) => ({ runId: id, startSlot: way.slots[place]! }))

function laterReadyBy(board: Board, need: Need): ServingChange | null {
  const { problem } = board.model
  // A pin does not move with ready-by.
  if (need.runs.some(({ pinnedSlot }) => pinnedSlot !== null)) return null
  const furthest = problem.slots - Math.min(...need.runs.map(({ latestStartSlot }) => latestStartSlot))
  const later = (laterSlots: number) => wayThrough(board, need, (run) => ({ ...run, latestStartSlot: run.latestStartSlot + laterSlots }))
  if (furthest <= 0 || !later(furthest)) return null
  const laterSlots = smallest(1, furthest, (slots) => later(slots) !== null)
  return { kind: 'later-ready-by', laterSlots, starts: named(need, later(laterSlots)!) }
}

function shorterRun(board: Board, need: Need): ServingChange | null {
  const most = Math.max(...need.runs.map(({ worstSlots, shortestWorstSlots }) => worstSlots - shortestWorstSlots))
  const { slotMin } = board.model.problem
  const shorter = (slots: number) =>
    wayThrough(board, need, (run) => {
      const worstSlots = Math.max(run.shortestWorstSlots, run.worstSlots - slots)
      return { ...run, worstSlots, expectedMin: Math.min(run.expectedMin, worstSlots * slotMin) }
    })
  if (most <= 0 || !shorter(most)) return null
  const shorterSlots = smallest(1, most, (slots) => shorter(slots) !== null)
  return { kind: 'shorter-run', shorterSlots, starts: named(need, shorter(shorterSlots)!) }
}

/** The least whole number in `[low, high]` for which `holds`, which holds for every one above it. */
function smallest(low: number, high: number, holds: (value: number) => boolean): number {
  while (low < high) {
    const middle = (low + high) >> 1
    if (holds(middle)) high = middle
    else low = middle + 1
  }
  return low
}

/** Raises all limits that the need loads by the same share of its load on them, the least that will do. */
function moreService(board: Board, need: Need): ServingChange | null {
  const { model } = board
  const runs = need.runs.map((run) => board.runById.get(run.id)!)
  // Watts missing at a start, as the largest over the limits: every limit may be raised, each by what it lacks.
  const missing = (run: ModelRun, slot: number) => Math.max(0, ...missingW(board, run, slot))
  const way = chain(board, runs, need, (run, slot) => missing(run, slot))
  if (!way) return null
  const limits = model.problem.limits.flatMap(({ id }, limit) => {
    const moreW = Math.max(0, ...runs.map((run, place) => missingW(board, run, way.slots[place]!)[limit]!))
    return moreW > 0 ? [{ limitId: id, moreKw: moreW / 1000 }] : []
  })
  return { kind: 'more-service', limits, starts: named(need, way) }
}

/** What each limit lacks for a run at a slot. Room may be short by base alone: then the base counts too. */
function missingW({ model, loads }: Board, run: ModelRun, slot: number): number[] {
  return model.problem.limits.map(({ limitKw, baseKw }, limit) => {
    const watts = run.limitW[limit]!
    let most = 0
    for (let at = slot; watts > 0 && at < slot + run.worst; at++) {
      const overBase = Math.max(0, Math.ceil((baseKw[at]! - limitKw) * 1000 - 1e-6))
      most = Math.max(most, watts + overBase - loads.leftW[limit * model.slots + at]!)
    }
    return most
  })
}

function wayThrough(board: Board, need: Need, changed: (run: NeededRun) => NeededRun): Way | null {
  const runs = need.runs.map((source) => {
    const run = board.runById.get(source.id)!
    const next = changed(source)
    return { ...run, source: next, worst: next.worstSlots, starts: Int32Array.from(allowedStarts(board.model.problem, next)) }
  })
  return chain(board, runs, need, (run, slot) => (fits(board.model, board.loads, run, slot) ? 0 : Infinity))
}

/** One start a run, in order and clear of the unit's other runs, whose largest price is least; `null` when that is infinite. */
function chain(board: Board, runs: readonly ModelRun[], need: Need, price: (run: ModelRun, slot: number) => number): Way | null {
  const { lowest, highest } = freeSpan(board, need)
  let ways: { end: number; price: number; slots: number[] }[] = [{ end: lowest, price: 0, slots: [] }]
  for (const run of runs) {
    const next: typeof ways = []
    let place = 0
    let before: (typeof ways)[number] | null = null
    for (const slot of run.starts) {
      // Ways stand with falling price and rising end: the last that has ended is the cheapest.
      while (place < ways.length && ways[place]!.end <= slot) before = ways[place++]!
      if (!before || slot + run.worst > highest) continue
      const worst = Math.max(before.price, price(run, slot))
      if (worst < (next.at(-1)?.price ?? Infinity)) next.push({ end: slot + run.worst, price: worst, slots: [...before.slots, slot] })
    }
    ways = next
  }
  return ways.at(-1) ?? null
}

/** Where the unit's earlier needs have ended and its later ones have not begun. */
function freeSpan({ model, slotOf }: Board, need: Need): { readonly lowest: number; readonly highest: number } {
  const { problem } = model
  const place = problem.needs.indexOf(need)
  let lowest = 0
  let highest = problem.slots
  for (const run of model.runs) {
    const slot = slotOf[run.index]!
    if (slot < 0 || problem.needs[run.need]!.unitId !== need.unitId) continue
    if (run.need < place) lowest = Math.max(lowest, slot + run.worst)
    else highest = Math.min(highest, slot)
  }
  return { lowest, highest }
}
