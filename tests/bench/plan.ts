/**
 * The planner over a family of buildings, beside an exact solver (HiGHS, highs.dev) on the same problem in the same run. A dozen
 * members and ten seconds for the solver keep it short; DWELLHOUR_BENCH_WHOLE=1 runs all 72 with a minute each, which takes hours.
 */
import { isMainThread, parentPort, Worker, workerData } from 'node:worker_threads'
import loadHighs from 'highs'
import { moveEffect, openBoard } from '#lib/core/plan/board.ts'
import { planRuns } from '#lib/core/plan/plan-runs.ts'
import type { PlanOptions, PlanProblem } from '#lib/core/plan/types.ts'
import { exactProgram, type ExactQuestion } from '../support/plan-exact.ts'
import { familyProblem, type Member } from '../support/plan-family.ts'

const WHOLE = process.env['DWELLHOUR_BENCH_WHOLE'] === '1'
const SOLVER_S = WHOLE ? 60 : 10
const UNITS = [20, 100, 500, 1_000]
const SERVICES = ['slack', 'tight', 'over-full'] as const
const PERIODS = ['flat', 'two-period', 'three-period'] as const
const OPTIONS: PlanOptions = { seed: 1, targetGapFraction: 0.0025, effort: 1 }
const ROUNDS = 3

interface Row {
  readonly label: string
  readonly value: number
  readonly unit: string
}

interface Asked {
  readonly question: ExactQuestion
  readonly limitS: number
  /** The gap whose time is taken. */
  readonly gapFraction: number
}

interface Solved {
  /** `null`: no plan found. */
  readonly bestMinor: number | null
  readonly boundMinor: number
  /** Seconds until the gap was reached, building the program not counted; `null`: not reached. */
  readonly reachedS: number | null
}

/** What the worker does: solves, and notes when the gap is reached. HiGHS runs to the end of its time without a pause. */
async function solveInWorker({ question, limitS, gapFraction }: Asked): Promise<void> {
  const highs = await loadHighs()
  const model = exactProgram(question).build(highs)
  const { callbackType } = highs.constants
  let reachedS: number | null = null
  const begunAtMs = performance.now()
  const elapsedS = () => (performance.now() - begunAtMs) / 1000
  model.options.set({ output_flag: false, time_limit: limitS, mip_rel_gap: Math.min(gapFraction, 1e-4) })
  const note = (event: { data: { mip_gap?: number } }) => {
    if (reachedS === null && (event.data.mip_gap ?? Infinity) <= gapFraction) reachedS = elapsedS()
    return undefined
  }
  model.run({ [callbackType.mipLogging]: note, [callbackType.mipInterrupt]: note, [callbackType.mipImprovingSolution]: note })
  const gap = model.info.get('mip_gap')
  if (reachedS === null && typeof gap === 'number' && gap <= gapFraction) reachedS = elapsedS()
  const status = model.info.get('primal_solution_status')
  const bound = Number(model.info.get('mip_dual_bound'))
  parentPort?.postMessage({ bestMinor: status === 2 ? model.getObjectiveValue() : null, boundMinor: bound, reachedS } satisfies Solved)
}

if (!isMainThread) await solveInWorker(workerData as Asked)

function solve(asked: Asked): Promise<Solved> {
  return new Promise((resolve, reject) => {
    const worker = new Worker(new URL(import.meta.url), { workerData: asked })
    // The solver looks at its clock between steps; a step that takes another minute is cut off, and then it has found nothing.
    const tooLong = setTimeout(() => void worker.terminate(), (2 * asked.limitS + 60) * 1000)
    let solved: Solved = { bestMinor: null, boundMinor: -Infinity, reachedS: null }
    worker.on('message', (message: Solved) => (solved = message))
    worker.on('error', reject)
    worker.on('exit', () => {
      clearTimeout(tooLong)
      resolve(solved)
    })
  })
}

function planned(problem: PlanProblem) {
  const times: number[] = []
  for (let round = 0; ; round++) {
    const begunAtMs = performance.now()
    const outcome = planRuns(problem, OPTIONS)
    times.push(performance.now() - begunAtMs)
    if (outcome.status !== 'planned') throw new Error(JSON.stringify(outcome.faults))
    if (round + 1 === ROUNDS) return { outcome, tookMs: times.sort((one, other) => one - other)[(ROUNDS - 1) / 2] ?? NaN }
  }
}

const percent = (fraction: number) => 100 * fraction

async function benchMember(
  member: Member,
): Promise<{ readonly rows: Row[]; readonly gapFraction: number; readonly timesFaster: number | null }> {
  const problem = familyProblem(member, 1)
  const name = `plan ${member.units} ${member.service} ${member.periods}${member.demand ? ' demand' : ''}`
  const { outcome, tookMs } = planned(problem)
  const left = new Set(outcome.unserved.map(({ needId }) => needId))
  const served = new Set(problem.needs.map(({ id }) => id).filter((id) => !left.has(id)))
  const gapFraction = outcome.bound.gapFraction
  const question: ExactQuestion = { problem, costShare: 1, unservedMinor: 0, mustServe: served, mustLeave: left }
  const solver = await solve({ question, limitS: SOLVER_S, gapFraction: Math.max(gapFraction, 1e-6) })
  const row = (label: string, value: number, unit: string): Row => ({ label: `${name}: ${label}`, value, unit })
  // A solver that did not get there is counted with the whole of its time: at least so many times faster.
  const timesFaster = ((solver.reachedS ?? SOLVER_S) * 1000) / tookMs
  const rows = [
    row('time', tookMs, 'ms'),
    row('gap to own bound', percent(gapFraction), '%'),
    row(`times faster to that gap${solver.reachedS === null ? ' (solver not there: at least)' : ''}`, timesFaster, 'x'),
  ]
  if (solver.bestMinor === null) rows.push(row('solver found no plan in', SOLVER_S, 's'))
  else {
    rows.push(row("solver's own gap", percent((solver.bestMinor - solver.boundMinor) / Math.abs(solver.bestMinor)), '%'))
    rows.push(row("cost above the solver's best", percent(outcome.cost.totalMinor / solver.bestMinor - 1), '%'))
  }
  if (member.service === 'over-full') {
    const fewest = await solve({ question: { problem, costShare: 0, unservedMinor: 1 }, limitS: SOLVER_S, gapFraction: 1e-6 })
    rows.push(row('unserved', outcome.unserved.length, 'needs'))
    rows.push(row('proven unserved', outcome.bound.unservedAtLeast, 'needs'))
    if (fewest.bestMinor !== null) rows.push(row("solver's unserved", Math.round(fewest.bestMinor), 'needs'))
  }
  return { rows, gapFraction, timesFaster }
}

/** All of the family, or of every size and service one tariff. */
function members(): readonly Member[] {
  const all = UNITS.flatMap((units) =>
    SERVICES.flatMap((service) =>
      PERIODS.flatMap((periods) => [false, true].map((demand): Member => ({ units, service, periods, demand }))),
    ),
  )
  if (WHOLE) return all
  return UNITS.flatMap((units, size) =>
    SERVICES.map((service, place): Member => ({ units, service, periods: PERIODS[(size + place) % 3]!, demand: (size + place) % 2 === 0 })),
  )
}

/** A drag on the board of the largest building: what one moved run changes. */
export function benchBoard(): Row[] {
  const problem = familyProblem({ units: 1_000, service: 'slack', periods: 'two-period', demand: true }, 1)
  const starts = problem.needs.flatMap(({ runs }) =>
    runs.map(({ id, latestStartSlot }) => ({ runId: id, startSlot: Math.max(0, latestStartSlot) })),
  )
  const board = openBoard(problem, starts)
  const timesMs = starts.slice(0, 400).map(({ runId, startSlot }) => {
    const begunAtMs = performance.now()
    moveEffect(board, runId, Math.max(0, startSlot - 6))
    return performance.now() - begunAtMs
  })
  return [
    {
      label: 'plan board of 1,000 units: effect of one move, median',
      value: timesMs.sort((one, other) => one - other)[200] ?? NaN,
      unit: 'ms',
    },
  ]
}

export async function benchPlan(): Promise<Row[]> {
  const rows: Row[] = []
  const gaps: number[] = []
  planned(familyProblem({ units: 100, service: 'tight', periods: 'two-period', demand: true }, 2))
  for (const member of members()) {
    const { rows: own, gapFraction } = await benchMember(member)
    rows.push(...own)
    gaps.push(gapFraction)
  }
  gaps.sort((one, other) => one - other)
  rows.push({ label: `plan, ${gaps.length} members: median gap`, value: percent(gaps[Math.floor(gaps.length / 2)] ?? NaN), unit: '%' })
  rows.push({ label: `plan, ${gaps.length} members: widest gap`, value: percent(gaps.at(-1) ?? NaN), unit: '%' })
  return rows
}
