/** Reads a property's planning question for some days ahead from its current records; the same for whoever drafts and whoever accepts. */
import type { TenancyId, UnitId } from '#db/ids.ts'
import type { OrgDb } from '#db/org-db.ts'
import { listEvaluations } from '#db/queries/evaluation.ts'
import { type AcceptedPlan, listPlans } from '#db/queries/plan.ts'
import type { Property } from '#db/queries/property.ts'
import { listExpectedRuns } from '#db/queries/run.ts'
import { listTenanciesBetween, tenanciesByUnit, tenancyCovers, type Tenancy } from '#db/queries/tenancy.ts'
import { addDays, civilOf, monthBounds, monthOf } from '#lib/core/time/civil.ts'
import { HORIZON_DAYS, propertyInputs } from '#lib/evaluation/load-inputs.server.ts'
import type { DayContext } from '#lib/evaluation/types.ts'
import { invalid } from '#lib/http/app-error.ts'
import { minorPerMajorOf } from '#lib/tariff/money.ts'
import { planQuestion } from './problem.ts'
import type { PlanQuestion } from './types.ts'

export interface PlanDays {
  readonly property: Property
  readonly fromDay: string
  /** Exclusive. */
  readonly toDay: string
  readonly nowMs: number
}
export interface Gathered {
  readonly question: PlanQuestion
  readonly contexts: readonly DayContext[]
  /** Units of which nothing is known, or whose tenant has not said when they shower. */
  readonly unknownUnits: number
  readonly plans: readonly AcceptedPlan[]
  /** Grows with every plan that is accepted or undone. */
  readonly revision: number
  tenancyOn(unitId: UnitId, day: string): Tenancy | null
}

export const revisionOf = (plans: readonly AcceptedPlan[]): number =>
  plans.reduce((sum, plan) => sum + (plan.undoneAtMs === null ? 1 : 2), 0)

export async function gatherPlan(db: OrgDb, { property, fromDay, toDay, nowMs }: PlanDays): Promise<Gathered> {
  const tomorrow = addDays(civilOf(nowMs, property.zone).day, 1)
  const lastDay = addDays(tomorrow, HORIZON_DAYS - 1)
  if (fromDay < tomorrow || toDay > lastDay)
    throw invalid([{ field: 'from', message: `Plan days from tomorrow on, up to a week ahead: ${tomorrow} to ${addDays(lastDay, -1)}.` }])
  const { site, contexts: all, units } = await propertyInputs(db, { property, nowMs, days: HORIZON_DAYS })
  const contexts = all.filter(({ day }) => day >= fromDay && day < toDay)
  const outcomes = new Map((await listEvaluations(db, property.id, fromDay, toDay)).map((one) => [`${one.unitId} ${one.day}`, one.outcome]))
  const tenancies = tenanciesByUnit(await listTenanciesBetween(db, property.id, { fromDay, toDay }))
  const tenancyOn = (unitId: UnitId, day: string) => (tenancies.get(unitId) ?? []).find((one) => tenancyCovers(one, day)) ?? null
  const months = {
    startsAtMs: monthBounds(monthOf(fromDay), property.zone).startsAtMs,
    endsAtMs: monthBounds(monthOf(addDays(toDay, -1)), property.zone).endsAtMs,
  }
  const runs = await listExpectedRuns(db, property.id, months.startsAtMs, months.endsAtMs)
  const planUnits = units.map(({ unit, hardware, wants }) => ({
    unitId: unit.id,
    code: unit.code,
    floor: unit.floor,
    hardware,
    days: contexts.map((context) => ({
      context,
      wants: wants[all.indexOf(context)] ?? { kind: 'nobody' as const },
      outcome: outcomes.get(`${unit.id} ${context.day}`) ?? null,
      takesLetters: (tenancyOn(unit.id, context.day)?.tips ?? 'never') !== 'never',
    })),
  }))
  const plans = await listPlans(db, property.id)
  return {
    question: planQuestion({
      site,
      units: planUnits,
      contexts,
      otherRuns: runs.filter(({ day }) => day < fromDay || day >= toDay),
      minorPerMajor: minorPerMajorOf(property.currency),
      nowMs,
    }),
    contexts,
    unknownUnits: planUnits.filter(({ hardware, days }) => !hardware || days.some(({ wants }) => wants.kind === 'not-said')).length,
    plans,
    revision: revisionOf(plans),
    tenancyOn,
  }
}

/** Who is asked to start at another time, tenancy by tenancy. */
export function byTenancy<Row extends { readonly tenancyId: TenancyId }>(rows: readonly Row[]): ReadonlyMap<TenancyId, readonly Row[]> {
  const found = new Map<TenancyId, Row[]>()
  for (const row of rows) {
    const known = found.get(row.tenancyId)
    if (known) known.push(row)
    else found.set(row.tenancyId, [row])
  }
  return found
}
