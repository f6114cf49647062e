/** Which single change would make a short unit ready on every day: each candidate is run through the model again before it is named. */
import { partsAdvice } from '#lib/core/controller/parts-advice.ts'
import type { Controller } from '#lib/core/controller/types.ts'
import { servesWeek } from '#lib/core/tank/serves-week.ts'
import type { UnitDay } from '#lib/core/tank/types.ts'
import { runNeed } from '#lib/hardware/run-need.ts'
import { clockWords } from '#lib/strip/clock.ts'
import { otherFixes } from './other-fixes.ts'
import type { DayContext, DayResult, Site, UnitHardware, Wants } from './types.ts'
import { durationOf, unitDayOf, wantedOf } from './unit-day.ts'

export interface Fix {
  readonly label: string
  readonly value: string
}

interface ShortUnit {
  readonly site: Site
  readonly contexts: readonly DayContext[]
  readonly hardware: UnitHardware
  readonly wants: readonly Wants[]
  readonly days: readonly DayResult[]
  /** The one of the days that is furthest from ready. */
  readonly worst: DayResult
}

/**
 * Heating goes on during the shower, so a run somewhat below the required one may do: the model is asked about that much less
 * first, then about the whole.
 */
const LESS_MIN = [10, 0] as const

export function fixesFor(unit: ShortUnit): readonly Fix[] {
  const change = controllerFix(unit)
  return [...(change ? [change] : []), ...otherFixes(daysWith(unit, unit.hardware)), ...otherTimes(unit.worst)]
}

function daysWith({ site, contexts, wants }: ShortUnit, hardware: UnitHardware): readonly UnitDay[] {
  const duration = durationOf(hardware)
  return contexts.map((context, index) => unitDayOf({ site, context, hardware, duration, ...wantedOf(wants[index]) }))
}

/** Whether every day is ready with another controller; readings of the old setting say nothing about the new one. */
function readyWith(unit: ShortUnit, controller: Controller): boolean {
  const hardware: UnitHardware = { ...unit.hardware, installation: { ...unit.hardware.installation, controller }, measured: [] }
  return durationOf(hardware).timesOut === 'always' && servesWeek(daysWith(unit, hardware))
}

/** The parts, setting or programme that the core advises and with which the model finds the days ready; else why there is none. */
function controllerFix(unit: ShortUnit): Fix | null {
  const { controller } = unit.hardware.installation
  const needs = unit.days.flatMap((day) => day.readiness?.needs ?? [])
  const requiredMin = Math.max(0, ...needs.map((need) => need.requiredRunMin ?? 0))
  if (requiredMin === 0) return null
  const { context, readiness } = unit.worst
  const readyByMin = readiness?.needs.find((need) => need.status !== 'ready')?.need.readyByMin ?? null
  const need = runNeed({ requiredMin, readyByMin, day: context.day, clockChange: context.clockChange })
  let refused: string | null = null
  for (const lessMin of LESS_MIN) {
    const advice = partsAdvice(controller, { ...need, minMin: Math.max(1, requiredMin - lessMin) })
    if (advice.status === 'none') refused = advice.reason
    else {
      const first = advice.suggestions.find((suggestion) => readyWith(unit, suggestion.controller))
      if (first) return { label: first.what, value: first.reason.replace(/\.$/, '') }
    }
  }
  return refused === null ? null : { label: 'No setting or stocked part of this timer does', value: refused.replace(/\.$/, '') }
}

/** Nearest times at which today's hardware makes it; the model tried each. */
function otherTimes({ readiness, context }: DayResult): readonly Fix[] {
  const short = readiness?.needs.find((need) => need.status !== 'ready' && need.nextBestReadyByMin.length > 0)
  if (!short) return []
  const times = short.nextBestReadyByMin.map((minute) => clockWords(minute, context.clockChange))
  return [{ label: `Shower at ${times.join(' or ')}`, value: `instead of ${clockWords(short.need.readyByMin, context.clockChange)}` }]
}
