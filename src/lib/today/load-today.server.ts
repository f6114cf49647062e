/** Everything on a property's first page: the answer for tomorrow, the house on one day, and three short lists. */
import type { UnitId } from '#db/ids.ts'
import type { OrgDb } from '#db/org-db.ts'
import { type Evaluation, listEvaluations } from '#db/queries/evaluation.ts'
import { type Flag, listOpenFlags, listPlannedVisits } from '#db/queries/flag.ts'
import { listOpenInvitations } from '#db/queries/organisation.ts'
import { findPropertyBySlug } from '#db/queries/property.ts'
import { listExpectedRuns } from '#db/queries/run.ts'
import { listUnits } from '#db/queries/unit.ts'
import { requireRole } from '#lib/auth/permission.ts'
import { addDays, civilOf } from '#lib/core/time/civil.ts'
import { MS_PER_MIN } from '#lib/core/units.ts'
import { dayContext } from '#lib/evaluation/day-context.ts'
import { HORIZON_DAYS, siteOf } from '#lib/evaluation/load-inputs.server.ts'
import { highestStep, loadSteps, serviceLimitW } from '#lib/evaluation/service-load.ts'
import { byUrgency } from '#lib/flag/view.ts'
import { notFound } from '#lib/http/app-error.ts'
import { houseCells } from './house-cells.ts'
import { loadSlots } from './load-slots.ts'
import type { House } from './types.ts'

export interface TodayQuestion {
  readonly propertySlug: string
  readonly organisationSlug: string
  /** The day the house shows; today when it is not one of the days that are computed. */
  readonly day: string | null
  readonly nowMs: number
}

export async function loadToday(db: OrgDb, { propertySlug, organisationSlug, day: asked, nowMs }: TodayQuestion) {
  requireRole(db, ['landlord'], 'see the whole house')
  const property = await findPropertyBySlug(db, propertySlug)
  if (!property) throw notFound('property')
  const propertyId = property.id
  const site = await siteOf(db, property)
  const now = civilOf(nowMs, property.zone)
  const [today, tomorrow] = [now.day, addDays(now.day, 1)]
  const day = asked && asked >= today && asked < addDays(today, HORIZON_DAYS) ? asked : today
  const units = await listUnits(db, property.id)
  const evaluations = await listEvaluations(db, property.id, day < tomorrow ? day : tomorrow, addDays(day > tomorrow ? day : tomorrow, 1))
  const flags = [...(await listOpenFlags(db, { propertyId: property.id }))].sort(byUrgency)
  const context = dayContext(site, day)
  const rangeOf = (one: typeof context) => ({ startsAtMs: one.startsAtMs, endsAtMs: one.startsAtMs + one.dayMin * MS_PER_MIN })
  const range = rangeOf(context)
  const runs = await listExpectedRuns(db, property.id, range.startsAtMs, range.endsAtMs)
  const slots = loadSlots(runs, { range, baseLoadW: site.baseLoadW })
  const cells = houseCells({
    units,
    evaluations: evaluations.filter((one) => one.day === day),
    flags,
    unitsHref: `/o/${organisationSlug}/p/${propertySlug}/units`,
  })
  const house: House = {
    day,
    dayMin: context.dayMin,
    clockChange: context.clockChange,
    peaks: context.peaks,
    cells,
    slots,
    limitW: Math.round(serviceLimitW(site)),
    atMin: day === today ? Math.floor((nowMs - context.startsAtMs) / MS_PER_MIN) : busiestMin(slots.map((slot) => slot.expectedW)),
  }
  const codes = new Map<UnitId, string>(units.map((unit) => [unit.id, unit.code]))
  const codeOf = (flag: Flag) => (flag.unitId ? (codes.get(flag.unitId) ?? '') : 'House')
  const item = (flag: Flag) => ({
    id: flag.id,
    code: codeOf(flag),
    summary: flag.summary,
    kind: flag.kind,
    fix: flag.evidence.lines.find((line) => line.kind === 'fix') ?? null,
  })
  return {
    property,
    today,
    tomorrow,
    house,
    units: units.length,
    answer: answerFor(evaluations.filter((one) => one.day === tomorrow)),
    busiest: await busiestOf(tomorrow),
    cold: flags.filter((flag) => flag.kind === 'misses-recovery').map(item),
    dangerous: flags.filter((flag) => flag.severity === 'dangerous').map(item),
    visits: await listPlannedVisits(db, property.id),
    invitations: (await listOpenInvitations(db)).length,
  }

  /** The highest load of a day with every run at its longest, against what the service may carry. */
  async function busiestOf(of: string) {
    const span = rangeOf(dayContext(site, of))
    const list = of === day ? runs : await listExpectedRuns(db, propertyId, span.startsAtMs, span.endsAtMs)
    const step = highestStep(loadSteps(list, { range: span, baseLoadW: site.baseLoadW, ends: 'longest' }))
    return step && step.runs > 0 ? { atMs: step.startsAtMs, fraction: step.loadW / serviceLimitW(site) } : null
  }
}

export type TodayPage = Awaited<ReturnType<typeof loadToday>>

export interface Answer {
  readonly warm: number
  readonly wanted: number
  /** Units of which nothing can be said. */
  readonly unknown: number
}

function answerFor(evaluations: readonly Evaluation[]): Answer {
  const count = (...statuses: readonly string[]) => evaluations.filter((one) => statuses.includes(one.status)).length
  return { warm: count('ready'), wanted: count('ready', 'short', 'impossible'), unknown: count('unknown') }
}

const busiestMin = (loadsW: readonly number[]): number => loadsW.indexOf(Math.max(...loadsW)) * 15
