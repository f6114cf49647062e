/**
 * For the few runs of a small building, where every kilowatt comes in lumps: simulated annealing (Kirkpatrick, Gelatt and Vecchi,
 * Science 220, 1983) over single moves and exchanges. What lies above a charge's target pays about the charge, so the
 * maximum sinks while the starts still shuffle.
 */
import { place, takeOff } from './loads.ts'
import type { ModelRun } from './model.ts'
import { judgedAt, type Search } from './search.ts'

export interface Annealing {
  /** How many moves are tried. */
  readonly moves: number
  /** What the first moves may cost and still be taken now and then. */
  readonly warmMinor: number
}

const PASS = { sums: null, mayPass: true } as const
/** The last temperature as a share of the first. */
const COLD = 0.004

/** Leaves its last starts in `search.loads`; they may pass limits. */
export function anneal(search: Search, { moves, warmMinor }: Annealing): void {
  const { random } = search
  const runs = search.blocks.flatMap((block) => block.runs).filter((run) => run.starts.length > 1 && search.loads.chosen[run.index]! >= 0)
  if (runs.length === 0) return
  const fall = COLD ** (1 / moves)
  let warm = warmMinor
  for (let move = 0; move < moves && search.steps < search.mostSteps; move++) {
    const run = runs[Math.floor(random() * runs.length)]!
    // Taking up and putting down count as well as looking.
    search.steps += run.worst + 8
    if (runs.length > 1 && random() < 0.3) exchange(search, run, runs[Math.floor(random() * runs.length)]!, warm)
    else shiftOne(search, run, warm)
    warm *= fall
  }
}

const isTaken = (search: Search, change: number, warm: number): boolean => change <= 0 || search.random() < Math.exp(-change / warm)

function shiftOne(search: Search, run: ModelRun, warm: number): void {
  const { model, loads } = search
  const from = loads.chosen[run.index]!
  const to = Math.floor(search.random() * run.starts.length)
  if (to === from || !isFree(search, run, to)) return
  takeOff(model, loads, run)
  const change = judgedAt(search, run, to, PASS) - judgedAt(search, run, from, PASS)
  place(model, loads, run, isTaken(search, change, warm) ? to : from)
}

/** Each takes the start that is nearest to the other's. */
function exchange(search: Search, one: ModelRun, other: ModelRun, warm: number): void {
  const { model, loads } = search
  if (model.unitOfNeed[one.need] === model.unitOfNeed[other.need]) return
  const oneFrom = loads.chosen[one.index]!
  const otherFrom = loads.chosen[other.index]!
  const oneTo = nearest(one, other.starts[otherFrom]!)
  const otherTo = nearest(other, one.starts[oneFrom]!)
  if (!isFree(search, one, oneTo) || !isFree(search, other, otherTo)) return
  // Both off, then one after the other: before and after are then judged alike.
  takeOff(model, loads, one)
  takeOff(model, loads, other)
  let change = judgedAt(search, one, oneTo, PASS) - judgedAt(search, one, oneFrom, PASS)
  place(model, loads, one, oneFrom)
  change -= judgedAt(search, other, otherFrom, PASS)
  takeOff(model, loads, one)
  place(model, loads, one, oneTo)
  change += judgedAt(search, other, otherTo, PASS)
  if (isTaken(search, change, warm)) {
    place(model, loads, other, otherTo)
    return
  }
  takeOff(model, loads, one)
  place(model, loads, one, oneFrom)
  place(model, loads, other, otherFrom)
}

function nearest({ starts }: ModelRun, slot: number): number {
  let low = 0
  let high = starts.length - 1
  while (low < high) {
    const middle = (low + high) >> 1
    if (starts[middle]! < slot) low = middle + 1
    else high = middle
  }
  return low > 0 && slot - starts[low - 1]! <= starts[low]! - slot ? low - 1 : low
}

/** Whether the unit's other runs leave that start free, in their order. */
function isFree({ model, loads }: Search, run: ModelRun, candidate: number): boolean {
  const slot = run.starts[candidate]!
  for (const need of model.needsOfUnit[model.unitOfNeed[run.need]!]!)
    for (const other of model.runsOfNeed[need]!) {
      const at = loads.chosen[other]!
      if (other === run.index || at < 0) continue
      const { starts, worst } = model.runs[other]!
      if (other < run.index ? starts[at]! + worst > slot : slot + run.worst > starts[at]!) return false
    }
  return true
}
