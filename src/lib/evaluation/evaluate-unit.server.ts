/**
 * Evaluates one unit at once, after its hardware, tenant or showers changed, and the building's load with it.
 * Needs no role: whoever may change the record has been let in by the verb that changed it.
 */
import type { FlagKind } from '#db/enums.ts'
import type { UnitId } from '#db/ids.ts'
import { inTransaction, type OrgDb } from '#db/org-db.ts'
import type { EvaluationStatus } from '#db/queries/evaluation.ts'
import { listOpenFlags } from '#db/queries/flag.ts'
import { findProperty } from '#db/queries/property.ts'
import { findUnit } from '#db/queries/unit.ts'
import { notFound } from '#lib/http/app-error.ts'
import { cachedAssess } from './assessment-cache.ts'
import { checkService } from './check-service.server.ts'
import { logFailure, writeBatch } from './evaluate-property.server.ts'
import { evaluateOne } from './evaluate-units.server.ts'
import { HORIZON_DAYS, unitInputs } from './load-inputs.server.ts'

export interface UnitEvaluation {
  /** Empty when the unit could not be computed. */
  readonly days: readonly { readonly day: string; readonly status: EvaluationStatus; readonly shortfallMin: number }[]
  readonly opened: readonly FlagKind[]
  readonly closed: readonly FlagKind[]
}

export async function evaluateUnit(
  db: OrgDb,
  { unitId, nowMs }: { readonly unitId: UnitId; readonly nowMs: number },
): Promise<UnitEvaluation> {
  const unit = await findUnit(db, unitId)
  const property = unit && (await findProperty(db, unit.propertyId))
  if (!unit || !property) throw notFound('unit')
  const inputs = await unitInputs(db, { property, nowMs, days: HORIZON_DAYS }, unit)
  const before = new Set((await listOpenFlags(db, { unitId })).map((flag) => flag.kind))
  const results = inputs.units.map((one) => evaluateOne(inputs, one, cachedAssess()))
  await writeBatch(db, { inputs, results, nowMs })
  await inTransaction(db, (trx) => checkService(trx, inputs, nowMs))
  const after = new Set((await listOpenFlags(db, { unitId })).map((flag) => flag.kind))
  const result = results[0]
  if (result?.status === 'failed') logFailure(result)
  return {
    days:
      result?.status === 'evaluated'
        ? result.days.map((day) => ({
            day: day.context.day,
            status: day.status,
            shortfallMin: Math.max(0, ...(day.readiness?.needs ?? []).map((need) => need.shortfallMin)),
          }))
        : [],
    opened: [...after].filter((kind) => !before.has(kind)),
    closed: [...before].filter((kind) => !after.has(kind)),
  }
}
