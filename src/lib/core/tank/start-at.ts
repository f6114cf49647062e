/** What any start of one need would serve, allowed or not: with the run that can be counted on, kept the whole week. */
import { chainOf } from './chain.ts'
import { minutesWanted, servesAll } from './cycle.ts'
import { keep } from './kept.ts'
import { plansOf } from './plan.ts'
import { requiredRuns } from './required-run.ts'
import type { UnitDay } from './types.ts'

export interface StartAt {
  /** Places in the days and in that day's needs, by time. */
  readonly day: number
  readonly need: number
  /** Elapsed minutes of that day. */
  readonly startMin: number
}
export interface Served {
  readonly servesAll: boolean
  readonly minutesServed: number
  readonly minutesWanted: number
}

/** The other needs start as agreed, or at their latest. `null` where nobody presses, or there is no such need. */
export function servedAt(days: readonly UnitDay[], { day, need, startMin }: StartAt): Served | null {
  const runs = days[day]?.runs
  const chain = chainOf(days)
  const cycle = chain.cycles[day]
  const wanted = cycle?.needs[need]
  if (!cycle || !wanted || runs?.kind !== 'pressed') return null
  const week = { days, chain }
  const { promised } = plansOf(week, requiredRuns(days, chain))
  const kept = keep(
    week,
    (_, index) => {
      const own = days[index]?.runs
      if (own?.kind !== 'pressed') return []
      return (promised[index]?.choices ?? []).flatMap((choice, at) => {
        const from = index === day && at === need ? startMin : choice?.startMin
        return from === undefined ? [] : [{ startMin: from, endMin: from + own.guaranteedMin }]
      })
    },
    promised[0]?.state,
  )
  const minutesServed = kept.served[day]?.[need] ?? 0
  return { servesAll: servesAll(wanted, minutesServed), minutesServed, minutesWanted: minutesWanted(wanted) }
}
