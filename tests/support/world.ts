/** Two organisations, the first with a building, a landlord, an electrician, an owner and a tenant who can sign in. */
import type { Kysely } from 'kysely'
import type { Role } from '#db/enums.ts'
import type { PersonId } from '#db/ids.ts'
import { inTransaction, type OrgDb } from '#db/org-db.ts'
import { addAccess } from '#db/queries/organisation.ts'
import { changeTenancyPerson } from '#db/queries/tenancy.ts'
import type { Database } from '#db/schema.ts'
import { DEMO_BUILDINGS } from '#lib/demo/buildings.ts'
import { evaluateProperty } from '#lib/evaluation/evaluate-property.server.ts'
import { type MadeBuilding, makeBuilding } from './building.ts'
import { freshDatabase } from './database.ts'
import { makeLandlord, makePerson, NOW_MS, scopeFor } from './factories.ts'

export interface World {
  readonly db: Kysely<Database>
  readonly landlord: OrgDb
  readonly electrician: OrgDb
  readonly owner: OrgDb
  /** Lives in `COLD`. */
  readonly tenant: OrgDb
  readonly stranger: OrgDb
  readonly building: MadeBuilding
}

/** A unit whose run is too short, and one that is well; a clock-switched one. */
export const COLD = 'Flat 5'
export const WARM = 'Flat 1'
export const CLOCKED = 'Flat 3'

export const personOf = (db: OrgDb): PersonId => {
  const { actor } = db.scope
  if (actor.kind !== 'person') throw new Error('this scope is a job')
  return actor.personId
}

export async function makeWorld(): Promise<World> {
  const db = await freshDatabase()
  const landlord = await makeLandlord(db)
  const { organisationId } = landlord.scope
  const member = async (role: Role) => scopeFor(db, { organisationId, personId: await makePerson(db, role), roles: [role] })
  const [electrician, owner, tenant] = [await member('electrician'), await member('owner'), await member('tenant')]
  const building = await makeBuilding(landlord, DEMO_BUILDINGS[0] as (typeof DEMO_BUILDINGS)[number])
  await inTransaction(landlord, async (trx) => {
    await addAccess(trx, { personId: personOf(electrician), propertyId: building.propertyId, role: 'electrician' }, NOW_MS)
    await addAccess(trx, { personId: personOf(owner), propertyId: building.propertyId, role: 'owner' }, NOW_MS)
    const tenancyId = building.units.get(COLD)?.tenancyId
    if (tenancyId) await changeTenancyPerson(trx, tenancyId, personOf(tenant))
  })
  await evaluateProperty(landlord, { propertyId: building.propertyId, nowMs: NOW_MS })
  return { db, landlord, electrician, owner, tenant, stranger: await makeLandlord(db), building }
}

export function unitOf({ building }: Pick<World, 'building'>, code: string) {
  const unit = building.units.get(code)
  if (!unit?.tenancyId) throw new Error(`${code} has no tenant`)
  return { unitId: unit.unitId, tenancyId: unit.tenancyId }
}
