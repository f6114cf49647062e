/** Expected runs of a property for a range of local days, with the peaks behind them and the building's load beside them. */
import type { UnitId } from '#db/ids.ts'
import type { OrgDb } from '#db/org-db.ts'
import { findPropertyBySlug } from '#db/queries/property.ts'
import { listExpectedRuns, type Run } from '#db/queries/run.ts'
import { listUnits, type Unit } from '#db/queries/unit.ts'
import { requireRole } from '#lib/auth/permission.ts'
import { addDays, civilOf } from '#lib/core/time/civil.ts'
import { MS_PER_MIN } from '#lib/core/units.ts'
import { dayContext } from '#lib/evaluation/day-context.ts'
import { siteOf } from '#lib/evaluation/load-inputs.server.ts'
import { serviceLimitW } from '#lib/evaluation/service-load.ts'
import type { DayContext } from '#lib/evaluation/types.ts'
import { notFound } from '#lib/http/app-error.ts'
import { parseInput } from '#lib/http/parse.ts'
import { loadSlots } from '#lib/today/load-slots.ts'
import { calendarRangeSchema } from './schemas.ts'
import type { CalendarData, CalendarRun } from './types.ts'

interface Question {
  readonly propertySlug: string
  /** `from` and `to` are local days, half-open; `floor` narrows the runs, never the load. */
  readonly input: unknown
}

export async function loadCalendar(db: OrgDb, { propertySlug, input }: Question): Promise<CalendarData> {
  requireRole(db, ['landlord'], 'see the calendar')
  const property = await findPropertyBySlug(db, propertySlug)
  if (!property) throw notFound('property')
  const { from, to, floor } = parseInput(calendarRangeSchema, input)
  const site = await siteOf(db, property)
  const contexts: DayContext[] = []
  for (let day = from; day < to; day = addDays(day, 1)) contexts.push(dayContext(site, day))
  const rangeOf = ({ startsAtMs, dayMin }: DayContext) => ({ startsAtMs, endsAtMs: startsAtMs + dayMin * MS_PER_MIN })
  const first = contexts[0]
  const last = contexts.at(-1)
  if (!first || !last) throw notFound('day')
  const runs = await listExpectedRuns(db, property.id, first.startsAtMs, rangeOf(last).endsAtMs)
  const units = new Map<UnitId, Unit>((await listUnits(db, property.id)).map((unit) => [unit.id, unit]))
  const days = contexts.map((context) => {
    const range = rangeOf(context)
    const own = runs.filter((run) => run.startsAtMs < range.endsAtMs && (run.longestEndsAtMs ?? Infinity) > range.startsAtMs)
    const starting = own.filter((run) => run.startsAtMs >= range.startsAtMs)
    return {
      day: context.day,
      startsAtMs: context.startsAtMs,
      dayMin: context.dayMin,
      clockChange: context.clockChange,
      peaks: context.peaks,
      slots: loadSlots(own, { range, baseLoadW: site.baseLoadW }),
      runs: starting.length,
      short: starting.filter((run) => run.short).length,
    }
  })
  const peaks = contexts.flatMap(({ startsAtMs, peaks: list }) =>
    list.map((peak) => ({ startsAtMs: startsAtMs + peak.startMin * MS_PER_MIN, endsAtMs: startsAtMs + peak.endMin * MS_PER_MIN })),
  )
  const onPeak = (run: Run) => peaks.some((peak) => peak.startsAtMs < run.endsAtMs && peak.endsAtMs > run.startsAtMs)
  return {
    zone: property.zone,
    limitW: Math.round(serviceLimitW(site)),
    days,
    computed: runs.length > 0,
    runs: runs
      .map((run): CalendarRun => {
        const { id, day, startsAtMs, endsAtMs, longestEndsAtMs, windowStartsAtMs, windowEndsAtMs, readyByAtMs, powerW, short } = run
        const unit = units.get(run.unitId)
        const times = { startsAtMs, endsAtMs, longestEndsAtMs, windowStartsAtMs, windowEndsAtMs, readyByAtMs }
        return { id, day, ...times, powerW, short, code: unit?.code ?? '', floor: unit?.floor ?? null, onPeak: onPeak(run) }
      })
      .filter((run) => floor === undefined || run.floor === floor),
  }
}

/** From this many units on the calendar opens on one floor: more bars than that say nothing in a week. */
export const ONE_FLOOR_FROM = 120
/** From this many units on it opens on one day. */
export const ONE_DAY_FROM = 12

/** What the calendar's page opens with: the coming week in figures, and where the calendar begins. */
export async function loadCalendarPage(db: OrgDb, { propertySlug, nowMs }: { readonly propertySlug: string; readonly nowMs: number }) {
  requireRole(db, ['landlord'], 'see the calendar')
  const property = await findPropertyBySlug(db, propertySlug)
  if (!property) throw notFound('property')
  const today = civilOf(nowMs, property.zone).day
  const week = await loadCalendar(db, { propertySlug, input: { from: today, to: addDays(today, 7) } })
  const units = await listUnits(db, property.id)
  const floors = [...new Set(units.map((unit) => unit.floor).filter((floor) => floor !== null))].sort((one, other) => one - other)
  return {
    property,
    today,
    floors,
    units: units.length,
    runs: week.days.reduce((sum, day) => sum + day.runs, 0),
    short: week.days.reduce((sum, day) => sum + day.short, 0),
    onPeak: week.runs.filter((run) => run.onPeak && run.startsAtMs >= (week.days[0]?.startsAtMs ?? 0)).length,
    start: {
      view: units.length >= ONE_DAY_FROM ? ('day' as const) : ('week' as const),
      day: today,
      floor: units.length >= ONE_FLOOR_FROM ? (floors[0] ?? null) : null,
      state: 'all' as const,
    },
  }
}

export type CalendarPage = Awaited<ReturnType<typeof loadCalendarPage>>
