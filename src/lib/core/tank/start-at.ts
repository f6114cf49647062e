/** What any start of one need would serve, allowed or not: from the state that starts are chosen for, with the run that can be counted on. */
import { chainOf } from './chain.ts'
import { minutesWanted, run, servedByNeed, servesAll } from './cycle.ts'
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
  const plan = plansOf({ days, chain }, requiredRuns(days, chain)).promised[day]
  if (!plan) return null
  const on = plan.choices.flatMap((choice, index) => {
    const at = index === need ? startMin : choice?.startMin
    return at === undefined ? [] : [{ startMin: at, endMin: at + runs.guaranteedMin }]
  })
  const minutesServed = servedByNeed(cycle, run(cycle, plan.coldestState, on))[need] ?? 0
  return { servesAll: servesAll(wanted, minutesServed), minutesServed, minutesWanted: minutesWanted(wanted) }
}
