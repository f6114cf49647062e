/** Reads and writes of tenancies: who rents a unit from one day until another (exclusive). */
import { newId, type PersonId, type PropertyId, type TenancyId, type UnitId } from '../ids.ts'
import type { OrgDb, OrgTrx } from '../org-db.ts'
import type { TenancyRow } from '../tables/tenancy.ts'

export interface Tenancy {
  readonly id: TenancyId
  readonly unitId: UnitId
  readonly personId: PersonId | null
  readonly name: string
  readonly email: string
  readonly fromDay: string
  readonly toDay: string | null
  readonly tips: TenancyRow['tips']
}

const toTenancy = (row: TenancyRow): Tenancy => ({
  id: row.id,
  unitId: row.unit_id,
  personId: row.person_id,
  name: row.name,
  email: row.email,
  fromDay: row.from_day,
  toDay: row.to_day,
  tips: row.tips,
})

/** Whether a tenancy is in force on a local day; it is over on its last bound itself. */
export const tenancyCovers = ({ fromDay, toDay }: Pick<Tenancy, 'fromDay' | 'toDay'>, day: string): boolean =>
  fromDay <= day && (toDay === null || day < toDay)

export async function findTenancy(db: OrgDb, id: TenancyId): Promise<Tenancy | null> {
  const row = await db.selectFrom('tenancy').where('tenancy.id', '=', id).selectAll('tenancy').executeTakeFirst()
  return row ? toTenancy(row) : null
}

/** All tenancies of a unit, newest first. */
export async function listTenancies(db: OrgDb, unitId: UnitId): Promise<readonly Tenancy[]> {
  const rows = await db
    .selectFrom('tenancy')
    .where('tenancy.unit_id', '=', unitId)
    .selectAll('tenancy')
    .orderBy('tenancy.from_day', 'desc')
    .execute()
  return rows.map(toTenancy)
}

export async function currentTenancy(db: OrgDb, unitId: UnitId, day: string): Promise<Tenancy | null> {
  return (await listTenancies(db, unitId)).find((tenancy) => tenancyCovers(tenancy, day)) ?? null
}

/** Tenancies of a property that touch the days `[fromDay, toDay)`. */
export async function listTenanciesBetween(
  db: OrgDb,
  propertyId: PropertyId,
  days: { readonly fromDay: string; readonly toDay: string },
): Promise<readonly Tenancy[]> {
  const rows = await db
    .selectFrom('tenancy')
    .innerJoin('unit', (join) =>
      join.onRef('unit.organisation_id', '=', 'tenancy.organisation_id').onRef('unit.id', '=', 'tenancy.unit_id'),
    )
    .where('unit.property_id', '=', propertyId)
    .where('tenancy.from_day', '<', days.toDay)
    .where((eb) => eb.or([eb('tenancy.to_day', 'is', null), eb('tenancy.to_day', '>', days.fromDay)]))
    .selectAll('tenancy')
    .execute()
  return rows.map(toTenancy)
}

export const listTenanciesOn = (db: OrgDb, propertyId: PropertyId, day: string): Promise<readonly Tenancy[]> =>
  listTenanciesBetween(db, propertyId, { fromDay: day, toDay: `${day}~` })

/** All tenancies a property ever had, past and to come. */
export const listTenanciesEver = (db: OrgDb, propertyId: PropertyId): Promise<readonly Tenancy[]> =>
  listTenanciesBetween(db, propertyId, { fromDay: '0000-01-01', toDay: '9999-12-31' })

export function tenanciesByUnit(tenancies: readonly Tenancy[]): ReadonlyMap<UnitId, readonly Tenancy[]> {
  const byUnit = new Map<UnitId, Tenancy[]>()
  for (const tenancy of tenancies) {
    const others = byUnit.get(tenancy.unitId)
    if (others) others.push(tenancy)
    else byUnit.set(tenancy.unitId, [tenancy])
  }
  return byUnit
}

/** A person's own tenancies in this organisation, newest first. */
export async function listTenanciesOfPerson(db: OrgDb, personId: PersonId): Promise<readonly Tenancy[]> {
  const rows = await db
    .selectFrom('tenancy')
    .where('tenancy.person_id', '=', personId)
    .selectAll('tenancy')
    .orderBy('tenancy.from_day', 'desc')
    .execute()
  return rows.map(toTenancy)
}

export type NewTenancyFields = Pick<Tenancy, 'unitId' | 'personId' | 'name' | 'email' | 'fromDay' | 'toDay'>

export async function addTenancy(db: OrgTrx, fields: NewTenancyFields, createdAtMs: number): Promise<TenancyId> {
  const id = newId<TenancyId>()
  const { unitId, personId, name, email, fromDay, toDay } = fields
  await db
    .insertInto('tenancy', {
      id,
      unit_id: unitId,
      person_id: personId,
      name,
      email,
      from_day: fromDay,
      to_day: toDay,
      tips: 'daily',
      created_at_ms: createdAtMs,
    })
    .execute()
  return id
}

export async function changeTenancyEnd(db: OrgTrx, id: TenancyId, toDay: string | null): Promise<void> {
  await db.updateTable('tenancy', { to_day: toDay }).where('id', '=', id).execute()
}

export async function changeTenancyName(db: OrgTrx, id: TenancyId, name: string): Promise<void> {
  await db.updateTable('tenancy', { name }).where('id', '=', id).execute()
}

export async function changeTenancyPerson(db: OrgTrx, id: TenancyId, personId: PersonId): Promise<void> {
  await db.updateTable('tenancy', { person_id: personId }).where('id', '=', id).execute()
}

export async function changeTenancyTips(db: OrgTrx, id: TenancyId, tips: Tenancy['tips']): Promise<void> {
  await db.updateTable('tenancy', { tips }).where('id', '=', id).execute()
}
