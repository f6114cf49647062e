/** A tenant's word on a day of their own tenancy, from the card or the signed link of a tip; a word against the model raises its flag at once. */
import type { TenancyId } from '#db/ids.ts'
import { inTransaction, type OrgDb } from '#db/org-db.ts'
import { addAudit } from '#db/queries/audit.ts'
import { putFeedback } from '#db/queries/feedback.ts'
import { findProperty } from '#db/queries/property.ts'
import { findTenancy } from '#db/queries/tenancy.ts'
import { findUnit } from '#db/queries/unit.ts'
import { civilOf } from '#lib/core/time/civil.ts'
import { evaluateUnit } from '#lib/evaluation/evaluate-unit.server.ts'
import { invalid, notFound } from '#lib/http/app-error.ts'
import { parseInput } from '#lib/http/parse.ts'
import { feedbackSchema } from './schemas.ts'

export interface GiveFeedback {
  readonly tenancyId: TenancyId
  readonly input: unknown
  readonly nowMs: number
}

export async function giveFeedback(db: OrgDb, { tenancyId, input, nowMs }: GiveFeedback): Promise<void> {
  const { day, verdict } = parseInput(feedbackSchema, input)
  const { actor } = db.scope
  const unitId = await inTransaction(db, async (trx) => {
    const tenancy = await findTenancy(trx, tenancyId)
    // A job's scope stands for a verified link, which names the tenancy itself.
    if (!tenancy || (actor.kind === 'person' && tenancy.personId !== actor.personId)) throw notFound('tenancy')
    if (day < tenancy.fromDay || (tenancy.toDay !== null && day >= tenancy.toDay)) throw notFound('day of this tenancy')
    const unit = await findUnit(trx, tenancy.unitId)
    const property = unit && (await findProperty(trx, unit.propertyId))
    if (!property) throw notFound('tenancy')
    if (day > civilOf(nowMs, property.zone).day) {
      throw invalid([{ field: 'day', message: 'This day is yet to come: say it after your shower. Nothing was noted.' }])
    }
    await putFeedback(trx, { tenancyId, day, verdict }, nowMs)
    // What a tenant said is personal: the audit says that they spoke of a day, not what.
    await addAudit(trx, { atMs: nowMs, action: 'say', subjectKind: 'feedback', subjectId: tenancyId })
    return tenancy.unitId
  })
  await evaluateUnit(db, { unitId, nowMs })
}
