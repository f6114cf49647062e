/**
 * Fills an empty database with the demo: one organisation, three buildings, every role, and four weeks of history that the
 * product's own verbs wrote as of those days. Does nothing where anybody exists already.
 */
import type { PersonId } from '#db/ids.ts'
import { inTransaction, type OrgDb, orgTrx } from '#db/org-db.ts'
import { addPerson, type Connection } from '#db/queries/account.ts'
import { addAccess, addMembership, addOrganisation } from '#db/queries/organisation.ts'
import { hashPassword } from '#lib/auth/password.server.ts'
import { openOrganisation, scopeForNewMember } from '#lib/auth/scope.server.ts'
import { addDays, civilOf } from '#lib/core/time/civil.ts'
import { evaluateProperty } from '#lib/evaluation/evaluate-property.server.ts'
import { DEMO_BUILDINGS } from './buildings.ts'
import { writeHistory } from './history.server.ts'
import { DEMO_ORGANISATION, DEMO_PASSWORD, DEMO_PEOPLE, demoTenant, ELECTRICIAN, LANDLORD, OWNER, TENANT } from './people.ts'
import { type MadeBuilding, writeBuilding } from './write-building.server.ts'

const DAY_MS = 86_400_000
/** Evaluations look eight days ahead, so one a week covers four weeks without a gap. */
const HISTORY_DAYS = [28, 21, 14, 7] as const
/** The unit whose tenant can sign in. */
const TENANTS_UNIT = { building: 'cinder-wharf', code: '5C' } as const

export interface Demo {
  readonly status: 'filled' | 'not-empty'
}

export async function fillDemo(
  db: Connection,
  { nowMs, say }: { readonly nowMs: number; readonly say: (line: string) => void },
): Promise<Demo> {
  const anybody = await db.selectFrom('person').select('id').limit(1).executeTakeFirst()
  if (anybody) return { status: 'not-empty' }
  const people = await writePeople(db, nowMs)
  const landlord = await openOrganisation(db, people(LANDLORD.email), DEMO_ORGANISATION.slug)
  if (!landlord) throw new Error('The demo organisation was not written')
  const made = new Map<string, MadeBuilding>()
  let serial = 0
  for (const building of DEMO_BUILDINGS) {
    say(`${building.name}: ${building.units.length} units`)
    const one = await inTransaction(landlord.db, async (trx) => {
      const written = await writeBuilding(trx, {
        building,
        recordedAtMs: nowMs - 29 * DAY_MS,
        livingSince: addDays(civilOf(nowMs, building.zone).day, -200),
        tenantOf: (unit) =>
          building.slug === TENANTS_UNIT.building && unit.code === TENANTS_UNIT.code
            ? { name: TENANT.name, email: TENANT.email, personId: people(TENANT.email) }
            : { ...demoTenant(serial++), personId: null },
      })
      await addAccess(trx, { personId: people(ELECTRICIAN.email), propertyId: written.propertyId, role: 'electrician' }, nowMs)
      await addAccess(trx, { personId: people(OWNER.email), propertyId: written.propertyId, role: 'owner' }, nowMs)
      return written
    })
    made.set(building.slug, one)
  }
  for (const daysAgo of HISTORY_DAYS) {
    say(`history: ${daysAgo} days ago`)
    await evaluateAll(landlord.db, made, nowMs - daysAgo * DAY_MS)
    if (daysAgo === 14) await writeHistory({ connection: db, landlord: landlord.db, electricianId: people(ELECTRICIAN.email), made, nowMs })
  }
  await evaluateAll(landlord.db, made, nowMs)
  return { status: 'filled' }
}

async function evaluateAll(db: OrgDb, made: ReadonlyMap<string, MadeBuilding>, atMs: number): Promise<void> {
  for (const { propertyId } of made.values()) await evaluateProperty(db, { propertyId, nowMs: atMs })
}

async function writePeople(db: Connection, nowMs: number): Promise<(email: string) => PersonId> {
  const passwordHash = await hashPassword(DEMO_PASSWORD)
  return db.transaction().execute(async (trx) => {
    const organisationId = await addOrganisation(trx, { ...DEMO_ORGANISATION, measure: 'metric', createdAtMs: nowMs - 60 * DAY_MS })
    if (!organisationId) throw new Error('The demo organisation exists already')
    const ids = new Map<string, PersonId>()
    for (const { email, name, role } of DEMO_PEOPLE) {
      const personId = await addPerson(trx, { email, name, passwordHash, emailConfirmedAtMs: nowMs, createdAtMs: nowMs })
      await addMembership(orgTrx(trx, scopeForNewMember(organisationId, personId, [role])), { personId, role, createdAtMs: nowMs })
      ids.set(email, personId)
    }
    return (email: string) => {
      const id = ids.get(email)
      if (!id) throw new Error(`Nobody in the demo has the address ${email}`)
      return id
    }
  })
}
