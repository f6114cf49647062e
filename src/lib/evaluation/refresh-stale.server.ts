/** Brings a property's evaluations up to its present records: what was computed from other inputs, or not at all, is computed now. */
import type { UnitId } from '#db/ids.ts'
import type { OrgDb } from '#db/org-db.ts'
import { listEvaluations } from '#db/queries/evaluation.ts'
import type { Property } from '#db/queries/property.ts'
import { addDays } from '#lib/core/time/civil.ts'
import { evaluateInputs } from './evaluate-property.server.ts'
import { inputsHash } from './inputs-hash.server.ts'
import { HORIZON_DAYS, propertyInputs } from './load-inputs.server.ts'

export interface Refreshed {
  /** What an evaluation must have been computed from to be current, by unit. */
  readonly hashes: ReadonlyMap<UnitId, string>
  /** Units that were computed again. */
  readonly refreshed: number
}

export async function refreshStale(
  db: OrgDb,
  { property, nowMs }: { readonly property: Property; readonly nowMs: number },
): Promise<Refreshed> {
  const inputs = await propertyInputs(db, { property, nowMs, days: HORIZON_DAYS })
  const hashes = new Map(inputs.units.map((unit) => [unit.unit.id, inputsHash(inputs, unit)]))
  const tomorrow = addDays(inputs.fromDay, 1)
  const written = new Map(
    (await listEvaluations(db, property.id, tomorrow, addDays(tomorrow, 1))).map((one) => [one.unitId, one.inputsHash]),
  )
  const stale = inputs.units.filter(({ unit }) => written.get(unit.id) !== hashes.get(unit.id))
  if (stale.length > 0) await evaluateInputs(db, { ...inputs, units: stale }, nowMs)
  return { hashes, refreshed: stale.length }
}
