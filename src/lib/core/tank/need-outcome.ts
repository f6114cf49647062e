/** What is said about one need once the day's runs stand: ready or short, by how much, from when, and the window of its run. */
import type { MinuteInterval } from '../time/types.ts'
import { MIN_PER_HOUR } from '../units.ts'
import { type Cycle, drawsOf, earliestMin, minutesWanted, needEndMin, servesAll } from './cycle.ts'
import { LONGEST_RUN_MIN, SERVED_MARGIN_K } from './defaults.ts'
import { cannotEver } from './cannot-ever.ts'
import type { Week } from './kept.ts'
import { nextBestReadyBy } from './next-best.ts'
import type { Plan, WeekPlans } from './plan.ts'
import type { RunShape } from './required-run.ts'
import { simulate } from './simulate.ts'
import type { StartChoice } from './start-by.ts'
import type { NeedOutcome, ShowerNeed, UnitDay } from './types.ts'

interface NeedCase {
  readonly week: Week
  readonly plans: WeekPlans
  readonly dayIndex: number
  /** In the order of the cycle. */
  readonly index: number
  /** Shortest sufficient run, or `null`. */
  readonly shape: RunShape | null
}

export function needOutcome({ week, plans, dayIndex, index, shape }: NeedCase): NeedOutcome {
  const day = week.days[dayIndex] as UnitDay
  const cycle = week.chain.cycles[dayIndex] as Cycle
  const plan = plans.promised[dayIndex] as Plan
  const need = cycle.needs[index] as ShowerNeed
  const served = plan.served[index] ?? 0
  const wanted = minutesWanted(need)
  const ready = servesAll(need, served)
  const impossible = cannotEver(day, need)
  const required = requiredMin(day, { ready, shape: impossible ? null : shape })
  const chosenRunMin = day.runs.kind === 'pressed' ? day.runs.guaranteedMin : clockedMin({ cycle, index, need, on: day.runs.onIntervals })
  const choice = plan.choices[index]
  const own = runOf({ day, cycle, index, need, choice })
  const status = ready ? 'ready' : impossible || required === null ? 'impossible' : 'short'
  // A short run may be long enough and yet come at the wrong hour: it is short by at least a minute.
  const shortfallMin = status === 'short' && required !== null ? Math.max(1, Math.ceil(required - chosenRunMin)) : 0
  const longestMin = day.runs.kind === 'pressed' ? (day.runs.longestMin ?? day.runs.expectedMin) : 0
  return {
    need,
    status,
    reason: reasonOf({
      status,
      impossible,
      required,
      chosenRunMin,
      shortfallMin,
      clocked: day.runs.kind === 'clocked',
      hours: day.willing.length > 0,
    }),
    minutesWanted: wanted,
    minutesServed: ready ? wanted : served,
    requiredRunMin: required,
    chosenRunMin,
    shortfallMin,
    startByMin: own?.startMin ?? null,
    ...(choice && choice.startMin < choice.latestStartMin ? { agreed: true as const } : {}),
    runWindow: own && {
      earliestStartMin: Math.min(choice?.earliestStartMin() ?? own.startMin, own.startMin),
      latestStartMin: choice?.latestStartMin ?? own.startMin,
      endMin: day.runs.kind === 'pressed' ? own.startMin + longestMin : own.endMin,
    },
    run: own,
    readyAtMin: ready && own ? readyAt({ cycle, need, own, plan }) : null,
    nextBestReadyByMin: status === 'short' ? nextBestReadyBy({ week, plans, dayIndex, index, endFraction: shape?.endFraction ?? 0 }) : [],
  }
}

/** A run that serves is long enough, even where only with the week's other runs so; `null` when none serves. */
function requiredMin({ runs }: UnitDay, { ready, shape }: { readonly ready: boolean; readonly shape: RunShape | null }): number | null {
  const enough = ready && runs.kind === 'pressed' ? runs.guaranteedMin : Infinity
  const durationMin = Math.min(shape?.durationMin ?? Infinity, enough)
  return durationMin === Infinity ? null : Math.ceil(durationMin)
}

interface Reason {
  readonly status: NeedOutcome['status']
  readonly impossible: string | null
  readonly required: number | null
  readonly chosenRunMin: number
  readonly shortfallMin: number
  readonly clocked: boolean
  /** Whether it is pressed in some hours only. */
  readonly hours: boolean
}

function reasonOf({ status, impossible, required, chosenRunMin, shortfallMin, clocked, hours }: Reason): string {
  if (status === 'ready') return ''
  if (impossible) return impossible
  if (required === null)
    return `No run of up to ${LONGEST_RUN_MIN / MIN_PER_HOUR} hours serves this: the tank is too small for it, or the need before it too near.`
  const chosen = Math.floor(chosenRunMin)
  if (clocked && chosen >= required) return `The switch is on for ${chosen} min before the need, but not at the right hours.`
  if (chosen >= required && hours) return `A run of ${required} min would do, but not at the hours in which somebody is there to start it.`
  if (chosen >= required) return `A run of ${required} min would do, but runs of ${chosen} min for the needs before it leave it no time.`
  return `Needs a run of ${required} min; ${clocked ? 'the switch is on for' : 'the timer can be counted on for'} ${chosen} min: ${shortfallMin} min short.`
}

interface OwnRun {
  readonly day: UnitDay
  readonly cycle: Cycle
  readonly index: number
  readonly need: ShowerNeed
  readonly choice: StartChoice | undefined
}

function runOf({ day, cycle, index, need, choice }: OwnRun): MinuteInterval | null {
  if (day.runs.kind === 'pressed') return choice ? { startMin: choice.startMin, endMin: choice.startMin + day.runs.expectedMin } : null
  const from = earliestMin(cycle, index)
  const near = day.runs.onIntervals.filter((on) => on.endMin > from && on.startMin < needEndMin(need))
  // The one that heats before the need; one that only begins during it is a last resort.
  return near.filter((on) => on.startMin < need.readyByMin).at(-1) ?? near.at(-1) ?? null
}

/** On-time of a clock between the need before and the end of this one. */
function clockedMin({
  cycle,
  index,
  need,
  on,
}: {
  readonly cycle: Cycle
  readonly index: number
  readonly need: ShowerNeed
  readonly on: readonly MinuteInterval[]
}): number {
  const from = earliestMin(cycle, index)
  return on.reduce((sum, interval) => sum + Math.max(0, Math.min(interval.endMin, needEndMin(need)) - Math.max(interval.startMin, from)), 0)
}

/** First minute from which the outlet stays warm enough to begin, in the plan's own simulation; the need's start at the latest. */
function readyAt({
  cycle,
  need,
  own,
  plan,
}: {
  readonly cycle: Cycle
  readonly need: ShowerNeed
  readonly own: MinuteInterval
  readonly plan: Plan
}): number {
  const fromMin = Math.min(Math.max(own.startMin, cycle.startMin), need.readyByMin)
  const draws = cycle.needs.filter((other) => other.readyByMin < need.readyByMin).flatMap(drawsOf)
  const before = simulate(cycle.tank, plan.state, { startMin: cycle.startMin, endMin: fromMin, on: plan.on, draws })
  let readyMin: number | null = null
  simulate(cycle.tank, before.end, {
    startMin: fromMin,
    endMin: need.readyByMin,
    on: plan.on,
    draws: [],
    sampleEveryMin: 1,
    sample: (minute, state) => {
      const warm = (state.nodesC[0] ?? 0) >= need.useTemperatureC - SERVED_MARGIN_K
      readyMin = warm ? (readyMin ?? minute) : null
    },
  })
  return Math.min(readyMin ?? need.readyByMin, need.readyByMin)
}
