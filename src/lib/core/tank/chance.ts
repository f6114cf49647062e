/**
 * How sure "ready" is: the same week over the tolerance of the timer and what is not known of cold water, voltage, flow and volume,
 * the tenant pressing when told. Seeded, so that the same week has the same chances.
 */
import type { RunSource } from '../controller/types.ts'
import type { MinuteInterval } from '../time/types.ts'
import { chainOf, tailOf } from './chain.ts'
import { type Cycle, firstState, run, servedByNeed, servesAll } from './cycle.ts'
import { lowDiscrepancy, triangular } from './low-discrepancy.ts'
import { actualVolumeL } from './model.ts'
import type { TankState } from './simulate.ts'
import type { Readiness, ShowerNeed, UnitDay } from './types.ts'

/** Half-widths of symmetric triangular distributions, as wide as a careful person would bet on. */
export interface Spread {
  readonly inletK: number
  readonly voltageFraction: number
  readonly flowFraction: number
  readonly volumeFraction: number
}
export const DEFAULT_SPREAD: Spread = {
  /** The correlation of Burch and Christensen against single sites and days (common practice, no source). */
  inletK: 3,
  /** ANSI C84.1 Range A at the service (from memory). */
  voltageFraction: 0.05,
  /** One shower head to the next, and how far the tap is turned (common practice, no source). */
  flowFraction: 0.15,
  /** Nominal against actual volume: 0.90 is a mean over makers (common practice, no source). */
  volumeFraction: 0.04,
}
/** Forty points resolve one morning in forty; twice as many moved a chance by less than two mornings in a hundred. */
const SAMPLES = 40
/** Where nothing deviates. */
const MIDDLE = 0.5
/** Mornings that a chance is told out of. */
const MORNINGS = 20

export interface Chance {
  readonly readyFraction: number
  /** In the order of the day's needs. */
  readonly readyFractionByNeed: readonly number[]
  /** "Ready 19 mornings in 20", rounded down: a promise errs on the cold side. */
  readonly ready: { readonly mornings: number; readonly outOf: number }
  readonly samples: number
  readonly spread: Spread
}

export interface ChanceCase {
  readonly days: readonly UnitDay[]
  /** Of those same days: the starts that the tenant is told. */
  readonly readiness: readonly Pick<Readiness, 'needs' | 'runs' | 'startNodesC'>[]
  readonly seed: number
  readonly spread?: Spread
}

/** Of each day; `null` on one without needs. */
export function chancesOf({ days, readiness, seed, spread = DEFAULT_SPREAD }: ChanceCase): readonly (Chance | null)[] {
  const starts = readiness.map(({ needs }) => needs.flatMap(({ run: own }) => (own ? [own.startMin] : [])))
  const expected = readiness.map(({ startNodesC, runs }): Expected => ({
    state: { nodesC: startNodesC, upperCalls: true, lowerCalls: true },
    on: runs,
  }))
  const points = lowDiscrepancy(seed, { count: SAMPLES, dimensions: 5 })
  const worlds = points.map((point) => servedIn({ days, starts, expected, spread, point }))
  return days.map(({ needs }, index) => {
    if (needs.length === 0) return null
    const outcomes = worlds.map((world) => world[index] ?? [])
    const share = (serves: (served: readonly boolean[]) => boolean): number => outcomes.filter(serves).length / outcomes.length
    const readyFraction = share((served) => served.every(Boolean))
    return {
      readyFraction,
      readyFractionByNeed: needs.map((_, need) => share((served) => served[need] === true)),
      ready: { mornings: Math.floor(readyFraction * MORNINGS + 1e-9), outOf: MORNINGS },
      samples: SAMPLES,
      spread,
    }
  })
}

/** A cycle when nothing deviates: the state that it starts from, and its on-intervals. */
interface Expected {
  readonly state: TankState
  readonly on: readonly MinuteInterval[]
}

interface World {
  readonly days: readonly UnitDay[]
  /** Of each day. */
  readonly starts: readonly (readonly number[])[]
  readonly expected: readonly Expected[]
  readonly spread: Spread
  readonly point: readonly number[]
}

/** Days lived before the first in the same world, from the state that is expected: they carry its deviations into the tank. A second one changed no more. */
const DAYS_BEFORE = 1

/** Of each day, whether each need is served in one of the possible worlds. */
function servedIn({ days, starts, expected, spread, point }: World): readonly (readonly boolean[])[] {
  const [timer = MIDDLE, inlet = MIDDLE, voltage = MIDDLE, flow = MIDDLE, volume = MIDDLE] = point
  const around = (u: number, halfWidth: number): number => 1 + triangular(u) * halfWidth
  const { cycles, period } = chainOf(
    days.map((day) => ({
      ...day,
      inletC: Math.max(0, day.inletC + triangular(inlet) * spread.inletK),
      supplyVoltageV: day.supplyVoltageV * around(voltage, spread.voltageFraction),
      tank: { ...day.tank, actualVolumeL: actualVolumeL(day.tank) * around(volume, spread.volumeFraction) },
      needs: day.needs.map((need): ShowerNeed => ({ ...need, flowLPerMin: need.flowLPerMin * around(flow, spread.flowFraction) })),
    })),
  )
  const before = cycles[0]?.start.kind === 'periodic' ? DAYS_BEFORE : 0
  const at = (turn: number): number => (turn < 0 ? ((turn % period) + period) % period : turn)
  let { state } = expected[at(-before)] as Expected
  let stillOn = tailOf(cycles[at(-before - 1)] as Cycle, expected[at(-before - 1)]?.on ?? [])
  const served: (readonly boolean[])[] = []
  for (let turn = -before; turn < days.length; turn++) {
    const cycle = cycles[at(turn)] as Cycle
    if (cycle.start.kind !== 'periodic') {
      state = firstState(cycle)
      stillOn = []
    }
    const on = [...stillOn, ...runsIn((days[at(turn)] as UnitDay).runs, starts[at(turn)] ?? [], timer)]
    const simulation = run(cycle, state, on)
    state = simulation.end
    stillOn = tailOf(cycle, on)
    const minutes = servedByNeed(cycle, simulation)
    if (turn >= 0) served.push(cycle.needs.map((need, index) => servesAll(need, minutes[index] ?? 0)))
  }
  return served
}

/** A pressed run lasts between the guaranteed and the longest, most often what is expected; a clock's edges shift together. */
function runsIn(runs: RunSource, starts: readonly number[], u: number): readonly MinuteInterval[] {
  if (runs.kind === 'clocked') {
    const shiftMin = triangular(u) * runs.uncertaintyMin
    return runs.onIntervals.map((on) => ({ startMin: on.startMin + shiftMin, endMin: on.endMin + shiftMin }))
  }
  const { guaranteedMin, expectedMin } = runs
  const longestMin = Math.max(runs.longestMin ?? expectedMin, expectedMin)
  const away = triangular(u)
  const durationMin = expectedMin + (away < 0 ? away * (expectedMin - guaranteedMin) : away * (longestMin - expectedMin))
  return starts.map((startMin) => ({ startMin, endMin: startMin + durationMin }))
}
