/** Nearest ready-by times of the same day that would work with today's hardware, nearest first. */
import type { MinuteInterval } from '../time/types.ts'
import { MIN_PER_DAY } from '../units.ts'
import { chainOf } from './chain.ts'
import { type Cycle, needEndMin, run, servedByNeed, servesAll } from './cycle.ts'
import { keep, type Week } from './kept.ts'
import { type Plan, plansOf, type WeekPlans } from './plan.ts'
import { END_FRACTIONS, endOfRun, requiredRuns } from './required-run.ts'
import { isWilling } from './start-by.ts'
import type { ShowerNeed, UnitDay } from './types.ts'

const STEP_MIN = 15
const REACH_MIN = 180
const SUGGESTIONS = 3
/** Moved weeks that are worked out whole for one need; each costs as much as the week itself. */
const MOST_CONFIRMED = 6

interface NextBest {
  readonly week: Week
  readonly plans: WeekPlans
  readonly dayIndex: number
  readonly index: number
  /** Where in the need the run is best ended, as its required run has it. */
  readonly endFraction: number
}

/** A time is named when the need is served there in the whole week as it then is, and no need that is served now is lost by it. */
export function nextBestReadyBy(wanted: NextBest): readonly number[] {
  const { week, dayIndex, index } = wanted
  const day = week.days[dayIndex] as UnitDay
  // With one need a pressed timer can be pressed as long before it at every hour: only a clock or another need tells hours apart.
  if (day.runs.kind === 'pressed' && day.needs.length === 1) return []
  const { readyByMin } = week.chain.cycles[dayIndex]!.needs[index]!
  const found: number[] = []
  let confirmed = 0
  for (let away = STEP_MIN; away <= REACH_MIN; away += STEP_MIN)
    for (const movedTo of [readyByMin + away, readyByMin - away]) {
      if (found.length === SUGGESTIONS || confirmed === MOST_CONFIRMED) return found
      const moved = movedWeek(week, { dayIndex, index, readyByMin: movedTo })
      if (!moved || !worksAt(moved, wanted)) continue
      confirmed++
      if (isTold(moved, dayIndex)) found.push(movedTo)
    }
  return found
}

/** Whether somebody who moves the need there is then told that it is ready. */
function isTold({ week, movedAt, need }: Moved, dayIndex: number): boolean {
  const { promised } = plansOf(week, requiredRuns(week.days, week.chain))
  return servesAll(need, promised[dayIndex]?.served[movedAt] ?? 0)
}

function worksAt(moved: Moved, { week, plans, dayIndex, endFraction }: NextBest): boolean {
  const cycle = moved.week.chain.cycles[dayIndex] as Cycle
  return [...new Set([endFraction, ...END_FRACTIONS])].some((fraction) => {
    const on = runsWith(moved, { plans, day: week.days[dayIndex] as UnitDay, cycle, dayIndex, fraction })
    return on !== null && servesIn(moved, { plans, on, dayIndex })
  })
}

interface Moved {
  readonly week: Week
  readonly need: ShowerNeed
  /** Where each need of the changed day stood before, and the moved one's own place. */
  readonly wasAt: readonly number[]
  readonly movedAt: number
}

/** The week with a need moved; `null` when it would leave the day or meet another need. */
function movedWeek(
  { days, chain }: Week,
  { dayIndex, index, readyByMin }: { readonly dayIndex: number; readonly index: number; readonly readyByMin: number },
): Moved | null {
  const [day, cycle] = [days[dayIndex] as UnitDay, chain.cycles[dayIndex] as Cycle]
  const need: ShowerNeed = { ...(cycle.needs[index] as ShowerNeed), readyByMin }
  const others = cycle.needs.filter((_, at) => at !== index)
  if (readyByMin < Math.max(0, cycle.startMin) || needEndMin(need) > (day.lengthMin ?? MIN_PER_DAY)) return null
  if (others.some((other) => other.readyByMin < needEndMin(need) && readyByMin < needEndMin(other))) return null
  const changed = days.map((one, at) => (at === dayIndex ? { ...day, needs: [...others, need] } : one))
  const week = { days: changed, chain: chainOf(changed) }
  const { needs } = week.chain.cycles[dayIndex] as Cycle
  return { week, need, wasAt: needs.map((one) => cycle.needs.indexOf(one)), movedAt: needs.indexOf(need) }
}

interface DayRuns {
  readonly plans: WeekPlans
  readonly day: UnitDay
  readonly cycle: Cycle
  readonly dayIndex: number
  readonly fraction: number
}

/** The starts already told for the day's other needs, and one for the moved need; `null` when a person could not press so. */
function runsWith({ need, wasAt, movedAt }: Moved, { plans, day, cycle, dayIndex, fraction }: DayRuns): readonly MinuteInterval[] | null {
  if (day.runs.kind === 'clocked') return day.runs.onIntervals
  const { guaranteedMin } = day.runs
  const { choices } = plans.promised[dayIndex] as Plan
  const starts = wasAt.map((before, at) =>
    at === movedAt ? Math.floor(endOfRun(need, fraction) - guaranteedMin) : choices[before]?.startMin,
  )
  const on = starts.flatMap((startMin) => (startMin === undefined ? [] : [{ startMin, endMin: startMin + guaranteedMin }]))
  const apart = on.every((one, at) => one.startMin >= (at === 0 ? cycle.startMin : (on[at - 1] as MinuteInterval).endMin))
  return apart && on.every(({ startMin }) => isWilling(day.willing, startMin)) ? on : null
}

interface Trial {
  readonly plans: WeekPlans
  readonly on: readonly MinuteInterval[]
  readonly dayIndex: number
}

function servesIn({ week, wasAt, movedAt, need }: Moved, { plans, on, dayIndex }: Trial): boolean {
  const cycle = week.chain.cycles[dayIndex] as Cycle
  const { state } = plans.promised[dayIndex] as Plan
  // Its own day from today's state tells most that do not work at a fiftieth of the week's effort.
  if (!servesAll(need, servedByNeed(cycle, run(cycle, state, on))[movedAt] ?? 0)) return false
  const kept = keep(week, (_, at) => (at === dayIndex ? on : ownRuns(week.days[at] as UnitDay, plans.promised[at] as Plan)), state0(plans))
  return week.chain.cycles.every(({ needs }, at) =>
    needs.every((one, place) => {
      if (servesAll(one, kept.served[at]?.[place] ?? 0)) return true
      const before = at === dayIndex ? (wasAt[place] ?? -1) : place
      return before >= 0 && !servesAll(one, plans.promised[at]?.served[before] ?? 0)
    }),
  )
}

const state0 = (plans: WeekPlans) => plans.promised[0]?.state

const ownRuns = ({ runs }: UnitDay, { choices }: Plan): readonly MinuteInterval[] =>
  runs.kind === 'clocked'
    ? runs.onIntervals
    : choices.flatMap((choice) => (choice ? [{ startMin: choice.startMin, endMin: choice.startMin + runs.guaranteedMin }] : []))
