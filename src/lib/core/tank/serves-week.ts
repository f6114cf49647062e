/** Whether every need of a week is served with the run that can be counted on: the question behind fixes and the year's outlook. */
import { chainOf, settle } from './chain.ts'
import { servedByNeed, servesAll } from './cycle.ts'
import { cannotEver } from './need-outcome.ts'
import { END_FRACTIONS, runsOf } from './required-run.ts'
import type { UnitDay } from './types.ts'

/** Pressed runs end at the same share of each need; the share that serves all, if one does. */
export function servesWeek(days: readonly UnitDay[]): boolean {
  if (days.some((day) => day.needs.some((need) => cannotEver(day, need) !== null))) return false
  const chain = chainOf(days)
  const serves = (endFraction: number): boolean => {
    const course = settle(chain, (cycle, index) => {
      const { runs } = days[index]!
      return runs.kind === 'clocked' ? runs.onIntervals : runsOf(cycle, { durationMin: runs.guaranteedMin, endFraction })
    })
    return chain.cycles.every((cycle, index) => {
      const served = servedByNeed(cycle, course.simulations[index]!)
      return cycle.needs.every((need, at) => servesAll(need, served[at] ?? 0))
    })
  }
  return days.some((day) => day.runs.kind === 'pressed') ? END_FRACTIONS.some(serves) : serves(0)
}
