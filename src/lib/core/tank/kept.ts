/** A week whose runs are kept as told: what each need is then served, at whichever edge of its uncertainty a clock is. */
import type { MinuteInterval } from '../time/types.ts'
import { type Chain, type Course, type RunsOf, settle } from './chain.ts'
import { servedByNeed, servesAll } from './cycle.ts'
import type { TankState } from './simulate.ts'
import type { UnitDay } from './types.ts'

export interface Week {
  readonly days: readonly UnitDay[]
  readonly chain: Chain
}

export interface Kept {
  /** Of the clock that serves least. */
  readonly course: Course
  /** Minutes of each need of each day, the least of all clocks. */
  readonly served: readonly (readonly number[])[]
}

/** Pressed runs as given; a clock's runs at its own time and with all its edges as early and as late as they may be. */
export function keep({ days, chain }: Week, pressed: RunsOf, guess?: TankState): Kept {
  const kept = shiftsOf(days).map((shift): Kept => {
    const course = settle(chain, (cycle, index) => clockedOr(days[index] as UnitDay, shift, () => pressed(cycle, index)), guess)
    return { course, served: chain.cycles.map((cycle, index) => servedByNeed(cycle, course.simulations[index]!)) }
  })
  return kept.reduce((least, other) => ({
    course: totalMin(other) < totalMin(least) ? other.course : least.course,
    served: least.served.map((day, index) => day.map((minutes, need) => Math.min(minutes, other.served[index]?.[need] ?? 0))),
  }))
}

/** Edges of a clock's uncertainty that are tried. */
const AT_ONCE = [0] as const
const AT_THE_EDGES = [0, -1, 1] as const

const shiftsOf = (days: readonly UnitDay[]): readonly number[] =>
  days.some(({ runs }) => runs.kind === 'clocked' && runs.uncertaintyMin > 0) ? AT_THE_EDGES : AT_ONCE

function clockedOr({ runs }: UnitDay, shift: number, pressed: () => readonly MinuteInterval[]): readonly MinuteInterval[] {
  if (runs.kind === 'pressed') return pressed()
  const byMin = shift * runs.uncertaintyMin
  return byMin === 0 ? runs.onIntervals : runs.onIntervals.map((on) => ({ startMin: on.startMin + byMin, endMin: on.endMin + byMin }))
}

const totalMin = ({ served }: Kept): number => served.flat().reduce((sum, minutes) => sum + minutes, 0)

/** How many needs are served. */
export const servedNeeds = ({ chain }: Week, { served }: Kept): number =>
  chain.cycles.reduce((sum, { needs }, day) => sum + needs.filter((need, at) => servesAll(need, served[day]?.[at] ?? 0)).length, 0)

export const servesEvery = (week: Week, kept: Kept): boolean =>
  servedNeeds(week, kept) === week.chain.cycles.reduce((sum, { needs }) => sum + needs.length, 0)
