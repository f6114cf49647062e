/**
 * Records what is installed in a unit as its next revision, with a stop-watch reading if one was taken, and evaluates the unit
 * at once. Landlords everywhere, electricians at the properties they have access to.
 */
import type { HardwareRecordId, UnitId, VisitId } from '#db/ids.ts'
import { inTransaction, type OrgDb, type OrgTrx } from '#db/org-db.ts'
import { addAudit } from '#db/queries/audit.ts'
import { addHardwareRevision, addMeasuredDuration, currentHardware } from '#db/queries/hardware.ts'
import { hasAccess } from '#db/queries/organisation.ts'
import { findUnit } from '#db/queries/unit.ts'
import { actingPerson, hasRole, requireRole } from '#lib/auth/permission.ts'
import { evaluateUnit, type UnitEvaluation } from '#lib/evaluation/evaluate-unit.server.ts'
import { AppError, notFound } from '#lib/http/app-error.ts'
import { parseInput } from '#lib/http/parse.ts'
import { tellTenant } from '#lib/schedule/tell-tenant.server.ts'
import { recordHardwareSchema } from './record-schema.ts'

export interface RecordHardware {
  readonly unitId: UnitId
  readonly input: unknown
  readonly visitId: VisitId | null
  readonly nowMs: number
}
export interface Recorded {
  readonly recordId: HardwareRecordId
  readonly revision: number
  readonly evaluation: UnitEvaluation
}

export async function recordHardware(db: OrgDb, request: RecordHardware): Promise<Recorded> {
  requireRole(db, ['landlord', 'electrician'], 'record hardware')
  const written = await inTransaction(db, (trx) => writeRevision(trx, request))
  return { ...written, evaluation: await evaluateUnit(db, { unitId: request.unitId, nowMs: request.nowMs }) }
}

/** The writing part, for a verb that signs off a visit in the same transaction. */
export async function writeRevision(trx: OrgTrx, { unitId, input, visitId, nowMs }: RecordHardware): Promise<Omit<Recorded, 'evaluation'>> {
  const { installation, reason, measuredMin, expectedRevision } = parseInput(recordHardwareSchema, input)
  await requireUnitAccess(trx, unitId)
  const before = await currentHardware(trx, unitId)
  const revisionNow = before?.revision ?? 0
  if (expectedRevision !== revisionNow) {
    throw new AppError(
      'conflict',
      `Somebody recorded revision ${revisionNow} while you were editing revision ${expectedRevision}. Nothing was changed: what you entered is still here. Reload to see theirs.`,
    )
  }
  const recordedBy = actingPerson(trx)
  const written = await addHardwareRevision(trx, { unitId, installation, reason, visitId, recordedBy, recordedAtMs: nowMs })
  if (measuredMin !== null)
    await addMeasuredDuration(trx, {
      unitId,
      recordId: written.recordId,
      durationMin: measuredMin,
      measuredBy: recordedBy,
      measuredAtMs: nowMs,
    })
  await addAudit(trx, {
    atMs: nowMs,
    action: 'record',
    subjectKind: 'hardware',
    subjectId: written.recordId,
    before: before?.installation,
    after: installation,
  })
  if (before)
    await tellTenant(trx, {
      unitId,
      recordId: written.recordId,
      before: before.installation.controller,
      after: installation.controller,
      nowMs,
    })
  return written
}

/** Throws `not-found` for a unit that is not there or not within reach of the electrician. */
export async function requireUnitAccess(db: OrgDb, unitId: UnitId): Promise<void> {
  const unit = await findUnit(db, unitId)
  if (!unit) throw notFound('unit')
  const { actor } = db.scope
  if (actor.kind === 'job' || hasRole(db, 'landlord')) return
  if (!(await hasAccess(db, { personId: actor.personId, propertyId: unit.propertyId, role: 'electrician' }))) throw notFound('unit')
}
