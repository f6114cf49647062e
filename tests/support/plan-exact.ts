/**
 * The planning model as a mixed-integer program for HiGHS (highs.dev), built from the problem alone: a binary a run and start, a
 * number a charge. Needs that cannot be served cost `unservedMinor` each, or nothing may be left out.
 */
import type { Highs, Model } from 'highs'
import type { NeededRun, PlannedRun, PlanProblem } from '#lib/core/plan/types.ts'
import { costByTheMinute } from './plan-rules.ts'

export interface ExactQuestion {
  readonly problem: PlanProblem
  /** 0: count only who is left out; 1: the cost as well. */
  readonly costShare: 0 | 1
  readonly unservedMinor: number
  /** Needs that must be served, and those that must not; the others are free. */
  readonly mustServe?: ReadonlySet<string>
  readonly mustLeave?: ReadonlySet<string>
}

interface Column {
  readonly run: NeededRun
  readonly slot: number
}

interface Row {
  readonly lower: number
  readonly upper: number
  readonly at: ReadonlyMap<number, number>
}

export interface ExactProgram {
  readonly columns: readonly Column[]
  build(highs: Highs): Model
  starts(values: ArrayLike<number>): PlannedRun[]
}

export function allowedSlots(problem: PlanProblem, run: NeededRun): number[] {
  const slots: number[] = []
  for (let slot = 0; slot + run.worstSlots <= problem.slots; slot++)
    if (
      slot >= run.earliestStartSlot &&
      slot <= run.latestStartSlot &&
      Number.isInteger((slot - run.startOffset) / run.startStep) &&
      run.startWindows.some(({ from, to }) => from <= slot && slot < to) &&
      (run.pinnedSlot === null || run.pinnedSlot === slot)
    )
      slots.push(slot)
  return slots
}

export function exactProgram(question: ExactQuestion): ExactProgram {
  const { problem, costShare } = question
  const columns: Column[] = []
  const cost: number[] = []
  const rows: Row[] = []
  const inf = Infinity
  const ownOnly: PlanProblem = { ...problem, demand: [], weights: { ...problem.weights, evennessMinorPerKw: 0 } }
  const columnsOf = new Map<string, number[]>()
  for (const need of problem.needs)
    for (const run of need.runs) {
      const alone: PlanProblem = { ...ownOnly, needs: [{ ...need, runs: [run] }] }
      const own = allowedSlots(problem, run).map((slot) => {
        cost.push(costShare === 0 ? 0 : costByTheMinute(alone, [{ runId: run.id, startSlot: slot }]))
        return columns.push({ run, slot }) - 1
      })
      columnsOf.set(run.id, own)
    }
  // A served mark a need, then a peak a charge and evenness.
  const served = new Map(problem.needs.map((need, place) => [need.id, columns.length + place]))
  for (const need of problem.needs) {
    cost.push(-question.unservedMinor)
    for (const run of need.runs)
      rows.push({
        lower: 0,
        upper: 0,
        at: new Map([...(columnsOf.get(run.id) ?? []).map((column) => [column, 1] as const), [served.get(need.id)!, -1]]),
      })
  }
  problem.limits.forEach((limit, place) => {
    for (let slot = 0; slot < problem.slots; slot++) {
      const at = new Map<number, number>()
      columns.forEach(({ run, slot: start }, column) => {
        const watts = Math.ceil((run.limitKw[place] ?? NaN) * 1000 - 1e-6)
        if (watts > 0 && slot >= start && slot < start + run.worstSlots) at.set(column, watts / 1000)
      })
      const roomKw = Math.max(0, Math.floor((limit.limitKw - (limit.baseKw[slot] ?? NaN)) * 1000 + 1e-6) / 1000)
      if (at.size > 0) rows.push({ lower: -inf, upper: roomKw, at })
    }
  })
  addUnits(problem, columns, columnsOf, rows)
  const peaks = costShare === 0 ? [] : addPeaks(problem, columns, cost, rows)
  const mark = (id: string) =>
    question.mustServe?.has(id) ? ([1, 1] as const) : question.mustLeave?.has(id) ? ([0, 0] as const) : ([0, 1] as const)
  const bounds = [
    ...columns.map(() => [0, 1] as const),
    ...problem.needs.map(({ id }) => mark(id)),
    ...peaks.map((floor) => [floor, inf] as const),
  ]
  let offset = question.unservedMinor * problem.needs.length
  peaks.forEach((floor, place) => (offset -= floor * cost[columns.length + problem.needs.length + place]!))
  return {
    columns,
    build: (highs) => {
      const starts = [0]
      const indices: number[] = []
      const values: number[] = []
      for (const { at } of rows) {
        for (const [column, value] of at) {
          indices.push(column)
          values.push(value)
        }
        starts.push(indices.length)
      }
      const { variableType } = highs.constants
      return highs.createModel({
        numCols: cost.length,
        numRows: rows.length,
        offset,
        colCost: cost,
        colLower: bounds.map(([lower]) => lower),
        colUpper: bounds.map(([, upper]) => upper),
        rowLower: rows.map(({ lower }) => lower),
        rowUpper: rows.map(({ upper }) => upper),
        matrix: { format: 'csr', numRows: rows.length, numCols: cost.length, starts, indices, values },
        integrality: bounds.map((_, column) =>
          column < columns.length + problem.needs.length ? variableType.integer : variableType.continuous,
        ),
      })
    },
    starts: (values) => columns.flatMap(({ run, slot }, column) => (values[column]! > 0.5 ? [{ runId: run.id, startSlot: slot }] : [])),
  }
}

/** In no slot has a later run of a unit begun while an earlier one may still be on. */
function addUnits(problem: PlanProblem, columns: readonly Column[], columnsOf: ReadonlyMap<string, readonly number[]>, rows: Row[]): void {
  for (const unitId of new Set(problem.needs.map((need) => need.unitId))) {
    const runs = problem.needs.filter((need) => need.unitId === unitId).flatMap((need) => need.runs)
    runs.forEach((early, place) => {
      for (const late of runs.slice(place + 1)) {
        const earlyColumns = columnsOf.get(early.id) ?? []
        const lateColumns = columnsOf.get(late.id) ?? []
        for (const slot of lateColumns.map((column) => columns[column]?.slot ?? NaN)) {
          const stillOn = earlyColumns.filter((column) => (columns[column]?.slot ?? NaN) + early.worstSlots > slot)
          const begun = lateColumns.filter((column) => (columns[column]?.slot ?? NaN) <= slot)
          if (stillOn.length > 0)
            rows.push({ lower: -Infinity, upper: 1, at: new Map([...stillOn, ...begun].map((column) => [column, 1])) })
        }
      }
    })
  }
}

/** A number for each charge and for evenness, above the mean of each of its windows; returns their floors. */
function addPeaks(problem: PlanProblem, columns: readonly Column[], cost: number[], rows: Row[]): number[] {
  const floors: number[] = []
  const add = (
    price: number,
    alreadyKw: number,
    windows: readonly { from: number; to: number }[],
    onMin: (column: Column, slot: number) => number,
  ) => {
    const peak = cost.push(price) - 1
    let floor = alreadyKw
    for (const { from, to } of windows) {
      const at = new Map<number, number>()
      let base = 0
      for (let slot = from; slot < to; slot++) {
        base += (problem.baseKw[slot] ?? NaN) / (to - from)
        columns.forEach((column, place) => {
          const kw = (column.run.powerKw * onMin(column, slot)) / problem.slotMin / (to - from)
          if (kw > 0) at.set(place, (at.get(place) ?? 0) + kw)
        })
      }
      floor = Math.max(floor, base)
      rows.push({ lower: -Infinity, upper: -base, at: at.set(peak, -1) })
    }
    floors.push(floor)
  }
  const { slotMin } = problem
  const expected = ({ run, slot: start }: Column, slot: number) =>
    slot < start ? 0 : Math.max(0, Math.min(start * slotMin + run.expectedMin, (slot + 1) * slotMin) - slot * slotMin)
  for (const { priceMinorPerKw, alreadyKw, windows } of problem.demand) add(priceMinorPerKw, alreadyKw, windows, expected)
  const everySlot = Array.from({ length: problem.slots }, (_, slot) => ({ from: slot, to: slot + 1 }))
  if (problem.weights.evennessMinorPerKw > 0)
    add(problem.weights.evennessMinorPerKw, 0, everySlot, ({ run, slot: start }, slot) =>
      slot >= start && slot < start + run.worstSlots ? slotMin : 0,
    )
  return floors
}
