/** What the planner is asked for a day or a week: the current records as a problem, computed anew first where they have changed. */
import type { PropertyId } from '#db/ids.ts'
import type { OrgDb } from '#db/org-db.ts'
import { findProperty } from '#db/queries/property.ts'
import { requireRole } from '#lib/auth/permission.ts'
import type { MinuteInterval } from '#lib/core/time/types.ts'
import { refreshStale } from '#lib/evaluation/refresh-stale.server.ts'
import type { ClockChange } from '#lib/strip/clock.ts'
import { notFound } from '#lib/http/app-error.ts'
import { parseInput } from '#lib/http/parse.ts'
import { gatherPlan } from './gather-plan.server.ts'
import { planDaysSchema } from './schemas.ts'
import type { PlanQuestion } from './types.ts'

export interface PlanDay {
  readonly day: string
  readonly startsAtMs: number
  readonly dayMin: number
  readonly peaks: readonly MinuteInterval[]
  readonly clockChange: ClockChange | null
}
export interface PlanDraft extends PlanQuestion {
  readonly revision: number
  readonly fromDay: string
  readonly toDay: string
  readonly zone: string
  readonly currency: string
  readonly days: readonly PlanDay[]
  readonly unknownUnits: number
}

export async function draftPlan(
  db: OrgDb,
  { propertyId, input, nowMs }: { readonly propertyId: PropertyId; readonly input: unknown; readonly nowMs: number },
): Promise<PlanDraft> {
  requireRole(db, ['landlord'], 'plan starts')
  const { from: fromDay, to: toDay } = parseInput(planDaysSchema, input)
  const property = await findProperty(db, propertyId)
  if (!property) throw notFound('property')
  await refreshStale(db, { property, nowMs })
  const { question, contexts, revision, unknownUnits } = await gatherPlan(db, { property, fromDay, toDay, nowMs })
  return {
    ...question,
    revision,
    fromDay,
    toDay,
    zone: property.zone,
    currency: property.currency,
    days: contexts.map(({ day, startsAtMs, dayMin, peaks, clockChange }) => ({ day, startsAtMs, dayMin, peaks, clockChange })),
    unknownUnits,
  }
}
