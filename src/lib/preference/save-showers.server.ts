/** Sets a tenancy's showers from the plain form; what the form does not ask stays as it is on record. */
import type { TenancyId } from '#db/ids.ts'
import type { OrgDb } from '#db/org-db.ts'
import { findPreference } from '#db/queries/preference.ts'
import type { UnitEvaluation } from '#lib/evaluation/evaluate-unit.server.ts'
import { readWeekForm, weekOf } from './form-fields.ts'
import { weekFrom } from './load-showers.server.ts'
import { setPreference } from './set-preference.server.ts'

export interface SaveShowers {
  readonly tenancyId: TenancyId
  readonly fields: Readonly<Record<string, string>>
  readonly nowMs: number
}

export async function saveShowers(db: OrgDb, { tenancyId, fields, nowMs }: SaveShowers): Promise<UnitEvaluation> {
  const before = await findPreference(db, tenancyId)
  const week = weekOf(readWeekForm(fields), before && weekFrom(before.week))
  return setPreference(db, { tenancyId, input: { week, willing: before?.willing ?? [] }, nowMs })
}
