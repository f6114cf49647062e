/** A unit's week for the tank model; the days are the same as the evaluation's, agreed starts included. */
import type { OrgDb } from '#db/org-db.ts'
import type { Property } from '#db/queries/property.ts'
import { findUnitByCode } from '#db/queries/unit.ts'
import { requireRole } from '#lib/auth/permission.ts'
import { HORIZON_DAYS, unitInputs } from '#lib/evaluation/load-inputs.server.ts'
import { durationOf, unitDayOf, wantedOf } from '#lib/evaluation/unit-day.ts'
import { notFound } from '#lib/http/app-error.ts'
import type { WaterWeek } from './water.ts'

export async function loadWater(
  db: OrgDb,
  { property, code, nowMs }: { readonly property: Property; readonly code: string; readonly nowMs: number },
): Promise<WaterWeek> {
  requireRole(db, ['landlord'], 'plan starts')
  const unit = await findUnitByCode(db, property.id, code)
  if (!unit) throw notFound('unit')
  const { site, contexts, units } = await unitInputs(db, { property, nowMs, days: HORIZON_DAYS }, unit)
  const [inputs] = units
  const hardware = inputs?.hardware
  if (!inputs || !hardware) throw notFound('unit')
  const duration = durationOf(hardware)
  return {
    code,
    days: contexts.map((context, index) => ({
      startsAtMs: context.startsAtMs,
      unit: unitDayOf({ site, context, hardware, duration, ...wantedOf(inputs.wants[index]) }),
    })),
  }
}
