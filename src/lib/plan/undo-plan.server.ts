/** Undoes the newest plan: the starts before it stand again, and exactly those who were told of it are told so. One transaction. */
import type { PropertyId } from '#db/ids.ts'
import { inTransaction, type OrgDb } from '#db/org-db.ts'
import { findOrganisationSlug } from '#db/queries/address.ts'
import { addAudit } from '#db/queries/audit.ts'
import { listToldTenancies } from '#db/queries/message.ts'
import { listPlans, listPlanStarts, markUndone } from '#db/queries/plan.ts'
import { findProperty } from '#db/queries/property.ts'
import { moveExpectedRun } from '#db/queries/run.ts'
import { findTenancy } from '#db/queries/tenancy.ts'
import { findUnit } from '#db/queries/unit.ts'
import { actingPerson, requireRole } from '#lib/auth/permission.ts'
import { civilOf } from '#lib/core/time/civil.ts'
import { AppError, invalid, notFound } from '#lib/http/app-error.ts'
import { parseInput } from '#lib/http/parse.ts'
import { landlordsOf } from '#lib/tip/whom-to-call.server.ts'
import { byTenancy } from './gather-plan.server.ts'
import { acceptedCause, queueUndone } from './plan-letter.server.ts'
import { undoPlanSchema } from './schemas.ts'

export interface UndoPlan {
  readonly propertyId: PropertyId
  readonly input: unknown
  readonly nowMs: number
}

export async function undoPlan(
  db: OrgDb,
  { propertyId, input, nowMs }: UndoPlan,
): Promise<{ readonly number: number; readonly told: number }> {
  requireRole(db, ['landlord'], 'undo plans')
  const { number } = parseInput(undoPlanSchema, input)
  return inTransaction(db, async (trx) => {
    const property = await findProperty(trx, propertyId)
    if (!property) throw notFound('property')
    const plans = await listPlans(trx, propertyId)
    const plan = plans.find((one) => one.number === number)
    if (!plan) throw notFound('plan')
    if (plan.undoneAtMs !== null)
      throw new AppError('conflict', `Plan ${number} is undone already. Nothing was changed, and nobody is told twice.`)
    const newest = plans.find((one) => one.undoneAtMs === null)
    if (newest?.number !== number)
      throw new AppError('conflict', `Plan ${newest?.number ?? ''} was accepted after it. Undo that one first. Nothing was changed.`)
    if (plan.toDay <= civilOf(nowMs, property.zone).day)
      throw invalid([{ field: 'number', message: 'Its days are over: there is nothing to undo.' }])
    await markUndone(trx, plan.id, { undoneAtMs: nowMs, undoneBy: actingPerson(trx) })
    // What has been pressed has been pressed.
    const ahead = (await listPlanStarts(trx, plan.id)).filter(
      ({ startsAtMs, beforeAtMs }) => startsAtMs !== beforeAtMs && Math.min(startsAtMs, beforeAtMs) > nowMs,
    )
    for (const start of ahead) await moveExpectedRun(trx, start, start.beforeAtMs)
    const wereTold = await listToldTenancies(trx, { kind: 'schedule-changed', cause: acceptedCause(plan.id) })
    const [slug, landlords] = [(await findOrganisationSlug(trx, propertyId)) ?? '', await landlordsOf(trx)]
    let told = 0
    for (const [tenancyId, starts] of byTenancy(ahead)) {
      const tenancy = wereTold.has(tenancyId) ? await findTenancy(trx, tenancyId) : null
      const unit = tenancy && (await findUnit(trx, tenancy.unitId))
      if (!tenancy || !unit) continue
      await queueUndone(trx, { property, slug, landlords, planId: plan.id, tenancy, unitCode: unit.code, starts, nowMs })
      told++
    }
    await addAudit(trx, { atMs: nowMs, action: 'undo', subjectKind: 'plan', subjectId: plan.id, after: { number, told } })
    return { number, told }
  })
}
