/** The longest run that a unit's current evaluations ask for; what parts advice in the browser aims at. */
import type { UnitId } from '#db/ids.ts'
import type { OrgDb } from '#db/org-db.ts'
import { listUnitEvaluations } from '#db/queries/evaluation.ts'
import { addDays, civilOf } from '#lib/core/time/civil.ts'
import type { Zone } from '#lib/core/time/types.ts'
import { HORIZON_DAYS } from '#lib/evaluation/load-inputs.server.ts'
import type { NeededRun } from './run-need.ts'

/** Needs no role: whoever opened the form has been let in to the unit by the loader before it. */
export async function loadNeededRun(
  db: OrgDb,
  { unitId, zone, nowMs }: { readonly unitId: UnitId; readonly zone: Zone; readonly nowMs: number },
): Promise<NeededRun | null> {
  const { day } = civilOf(nowMs, zone)
  const evaluations = await listUnitEvaluations(db, unitId, day, addDays(day, HORIZON_DAYS))
  let longest: NeededRun | null = null
  for (const { day: of, outcome } of evaluations)
    for (const { requiredRunMin, need } of outcome.needs)
      if (requiredRunMin !== null && requiredRunMin > (longest?.requiredMin ?? 0))
        longest = { requiredMin: requiredRunMin, readyByMin: need.readyByMin, day: of, clockChange: outcome.clockChange }
  return longest
}
