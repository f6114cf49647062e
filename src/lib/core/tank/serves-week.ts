/** Whether every need of a week is served with the run that can be counted on: the question behind fixes and the year's outlook. */
import { chainOf } from './chain.ts'
import { type Kept, keep, servesEvery, type Week } from './kept.ts'
import { cannotEver } from './cannot-ever.ts'
import { END_FRACTIONS, type RunShape, runsOf } from './required-run.ts'
import type { TankState } from './simulate.ts'
import { isWilling } from './start-by.ts'
import type { UnitDay } from './types.ts'

/** Pressed runs end at the same share of each need; the share that serves all, if one does. */
export const servesWeek = (days: readonly UnitDay[]): boolean => servingShape({ days, chain: chainOf(days) }) !== null

/** The share of each need at which runs as long as can be counted on are best ended, when one share serves every need. */
export function servingShape(week: Week, guess?: TankState): { readonly endFraction: number; readonly kept: Kept } | null {
  const { days } = week
  if (days.some((day) => day.needs.some((need) => cannotEver(day, need) !== null))) return null
  for (const endFraction of days.some((day) => day.runs.kind === 'pressed') ? END_FRACTIONS : ([0] as const)) {
    const kept = keep(week, (cycle, index) => runsOf(cycle, countedShape(days[index] as UnitDay, endFraction)), guess)
    if (servesEvery(week, kept) && pressedWhenWilling(week, endFraction)) return { endFraction, kept }
  }
  return null
}

const pressedWhenWilling = ({ days, chain }: Week, endFraction: number): boolean =>
  chain.cycles.every((cycle, index) => {
    const day = days[index] as UnitDay
    return (
      day.willing.length === 0 || runsOf(cycle, countedShape(day, endFraction)).every(({ startMin }) => isWilling(day.willing, startMin))
    )
  })

export const countedShape = ({ runs }: UnitDay, endFraction: number): RunShape => ({
  durationMin: runs.kind === 'pressed' ? runs.guaranteedMin : 0,
  endFraction,
  atWholeMinutes: true,
})
