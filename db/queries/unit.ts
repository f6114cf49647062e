/** Reads and writes of units. */
import { newId, type PropertyId, type UnitId } from '../ids.ts'
import type { OrgDb, OrgTrx } from '../org-db.ts'
import type { UnitRow } from '../tables/unit.ts'

export interface Unit {
  readonly id: UnitId
  readonly propertyId: PropertyId
  readonly code: string
  readonly floor: number | null
  readonly stack: string | null
}

const toUnit = (row: UnitRow): Unit => ({ id: row.id, propertyId: row.property_id, code: row.code, floor: row.floor, stack: row.stack })

export async function listUnits(db: OrgDb, propertyId: PropertyId): Promise<readonly Unit[]> {
  const rows = await db.selectFrom('unit').where('unit.property_id', '=', propertyId).selectAll('unit').orderBy('unit.code').execute()
  return rows.map(toUnit).sort((one, other) => one.code.localeCompare(other.code, 'en', { numeric: true }))
}

export async function findUnit(db: OrgDb, id: UnitId): Promise<Unit | null> {
  const row = await db.selectFrom('unit').where('unit.id', '=', id).selectAll('unit').executeTakeFirst()
  return row ? toUnit(row) : null
}

export async function findUnitByCode(db: OrgDb, propertyId: PropertyId, code: string): Promise<Unit | null> {
  const row = await db
    .selectFrom('unit')
    .where('unit.property_id', '=', propertyId)
    .where('unit.code', '=', code)
    .selectAll('unit')
    .executeTakeFirst()
  return row ? toUnit(row) : null
}

export interface NewUnitFields {
  readonly propertyId: PropertyId
  readonly code: string
  readonly floor: number | null
  readonly stack: string | null
}

export async function addUnit(db: OrgTrx, fields: NewUnitFields, createdAtMs: number): Promise<UnitId> {
  const id = newId<UnitId>()
  const { propertyId, code, floor, stack } = fields
  await db.insertInto('unit', { id, property_id: propertyId, code, floor, stack, created_at_ms: createdAtMs }).execute()
  return id
}

export async function changeUnitPlace(
  db: OrgTrx,
  id: UnitId,
  place: { readonly floor: number | null; readonly stack: string | null },
): Promise<void> {
  await db.updateTable('unit', place).where('id', '=', id).execute()
}
