/** One unit on one local day: readiness, runs, energy and cost, or the reason why there is nothing to compute. Pure. */
import type { DurationOutcome, RunSource } from '#lib/core/controller/types.ts'
import { tankPowerW } from '#lib/core/tank/model.ts'
import type { NeedOutcome, UnitDay } from '#lib/core/tank/types.ts'
import type { Assess } from './assessment-cache.ts'
import { assumptionsOf } from './assumptions.ts'
import { energyCost } from './energy-cost.ts'
import type { DayContext, DayResult, DayRun, Site, UnitHardware, Wants } from './types.ts'
import { unitDayOf } from './unit-day.ts'

export const NO_HARDWARE = 'Nothing is recorded about the heater. Record its tank, element and controller.'
export const NOT_SAID = 'The tenant has not said when they shower.'
export const NOBODY = 'Nobody lives here on this day.'
export const NO_SHOWER = 'No shower is wanted on this day.'

interface UnitCase {
  readonly site: Site
  readonly context: DayContext
  readonly hardware: UnitHardware | null
  /** Of that hardware; worked out once for all days. */
  readonly duration: DurationOutcome | null
  readonly wants: Wants
}

export function evaluateDay(unit: UnitCase, assess: Assess): DayResult {
  const { site, context, hardware, duration, wants } = unit
  if (!hardware || !duration) return nothing(context, 'unknown', NO_HARDWARE)
  if (wants.kind === 'not-said') return nothing(context, 'unknown', NOT_SAID)
  const week = wants.kind === 'week' ? wants.week : []
  const willing = wants.kind === 'week' ? wants.willing : []
  const day = unitDayOf({ site, context, hardware, duration, week, willing })
  const { readiness, baseline } = assess(day)
  const cost = energyCost(readiness.heating, context.prices)
  return {
    context,
    status: readiness.status,
    reason: wants.kind === 'nobody' ? NOBODY : readiness.status === 'no-need' ? NO_SHOWER : '',
    readiness,
    runs: runsOfDay(day, readiness.needs, context),
    powerW: tankPowerW(day.tank, site.supplyVoltageV),
    peakKwh: cost.peakKwh,
    costMinor: cost.costMinor,
    baselineEnergyKwh: baseline.energyInKwh,
    baselineCostMinor: energyCost(baseline.heating, context.prices).costMinor,
    assumptions: assumptionsOf({ site, context, hardware, duration }),
  }
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
