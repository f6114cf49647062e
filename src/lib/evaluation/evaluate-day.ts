/** One unit's local days: readiness, runs, energy and cost, or the reason why there is nothing to compute. Pure. */
import type { DurationOutcome, RunSource } from '#lib/core/controller/types.ts'
import { tankPowerW } from '#lib/core/tank/model.ts'
import type { NeedOutcome, UnitDay } from '#lib/core/tank/types.ts'
import type { Assess } from './assessment-cache.ts'
import { assumptionsOf } from './assumptions.ts'
import { energyCost } from './energy-cost.ts'
import type { DayContext, DayResult, DayRun, Site, UnitHardware, Wants } from './types.ts'
import { unitDayOf, wantedOf } from './unit-day.ts'

export const NO_HARDWARE = 'Nothing is recorded about the heater. Record its tank, element and controller.'
export const NOT_SAID = 'The tenant has not said when they shower.'
export const NOBODY = 'Nobody lives here on this day.'
export const NO_SHOWER = 'No shower is wanted on this day.'

interface UnitCase {
  readonly site: Site
  readonly contexts: readonly DayContext[]
  readonly hardware: UnitHardware | null
  /** Of that hardware; worked out once for all days. */
  readonly duration: DurationOutcome | null
  /** In step with the contexts. */
  readonly wants: readonly Wants[]
}

/** A unit's days in order, each from what the days before it leave. */
export function evaluateDays({ site, contexts, hardware, duration, wants }: UnitCase, assess: Assess): readonly DayResult[] {
  if (!hardware || !duration) return contexts.map((context) => nothing(context, 'unknown', NO_HARDWARE))
  const days = contexts.map((context, index) => unitDayOf({ site, context, hardware, duration, ...wantedOf(wants[index]) }))
  const { readiness, baseline } = assess(days)
  return contexts.map((context, index) => {
    if (wants[index]?.kind === 'not-said') return nothing(context, 'unknown', NOT_SAID)
    const [day, own, always] = [days[index]!, readiness[index]!, baseline[index]!]
    const cost = energyCost(own.heating, context.prices)
    return {
      context,
      status: own.status,
      reason: wants[index]?.kind === 'nobody' ? NOBODY : own.status === 'no-need' ? NO_SHOWER : '',
      readiness: own,
      runs: runsOfDay(day, own.needs, context),
      powerW: tankPowerW(day.tank, site.supplyVoltageV),
      peakKwh: cost.peakKwh,
      costMinor: cost.costMinor,
      baselineEnergyKwh: always.energyInKwh,
      baselineCostMinor: energyCost(always.heating, context.prices).costMinor,
      assumptions: assumptionsOf({ site, context, hardware, duration }),
    }
  })
}

const nothing = (context: DayContext, status: 'unknown' | 'no-need', reason: string): DayResult => ({
  context,
  status,
  reason,
  readiness: null,
  runs: [],
  powerW: 0,
  peakKwh: 0,
  costMinor: null,
  baselineEnergyKwh: 0,
  baselineCostMinor: null,
  assumptions: [],
})

function runsOfDay(day: UnitDay, needs: readonly NeedOutcome[], context: DayContext): readonly DayRun[] {
  return day.runs.kind === 'pressed' ? needs.flatMap((need) => pressedRun(day.runs, need)) : clockedRuns(day.runs, needs, context)
}

function pressedRun(runs: RunSource, outcome: NeedOutcome): readonly DayRun[] {
  if (runs.kind !== 'pressed' || !outcome.run || !outcome.runWindow) return []
  const { run, runWindow } = outcome
  return [
    {
      ...run,
      longestEndMin: runs.longestMin === null ? null : run.startMin + runs.longestMin,
      short: outcome.status !== 'ready',
      windowStartMin: Math.min(runWindow.earliestStartMin, run.startMin),
      windowEndMin: Math.max(runWindow.endMin, run.endMin),
      readyByMin: outcome.need.readyByMin,
    },
  ]
}

/** A clock's runs belong to the day on which they start, so that neighbouring days never count one twice. */
function clockedRuns(runs: RunSource, needs: readonly NeedOutcome[], { dayMin }: DayContext): readonly DayRun[] {
  if (runs.kind !== 'clocked') return []
  return runs.onIntervals
    .filter((on) => on.startMin >= 0 && on.startMin < dayMin)
    .map((on) => {
      const served = needs.find((need) => need.need.readyByMin > on.startMin && need.run?.startMin === on.startMin)
      return {
        ...on,
        longestEndMin: on.endMin + runs.uncertaintyMin,
        short: served !== undefined && served.status !== 'ready',
        windowStartMin: on.startMin - runs.uncertaintyMin,
        windowEndMin: on.endMin + runs.uncertaintyMin,
        readyByMin: served?.need.readyByMin ?? on.endMin,
      }
    })
}
