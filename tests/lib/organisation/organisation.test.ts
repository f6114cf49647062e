/** Organisations and their members by their rules: founding, one person in many, and who sees which property. */
import type { Kysely } from 'kysely'
import { beforeEach, describe, expect, it } from 'vitest'
import { inTransaction, type OrgDb } from '#db/org-db.ts'
import type { PropertyId } from '#db/ids.ts'
import { addMembership, listAccess, listMembers, listOrganisationsOf } from '#db/queries/organisation.ts'
import type { Database } from '#db/schema.ts'
import { openOrganisation } from '#lib/auth/scope.server.ts'
import { DEMO_BUILDINGS } from '#lib/demo/buildings.ts'
import { createOrganisation } from '#lib/organisation/create-organisation.server.ts'
import { giveAccess } from '#lib/organisation/give-access.server.ts'
import { loadPeople } from '#lib/organisation/load-people.server.ts'
import { removeMember } from '#lib/organisation/remove-member.server.ts'
import { takeAccess } from '#lib/organisation/take-access.server.ts'
import { makeBuilding } from '../../support/building.ts'
import { freshDatabase } from '../../support/database.ts'
import { makeLandlord, makePerson, NOW_MS, scopeFor } from '../../support/factories.ts'
import { personOf } from '../../support/world.ts'

let db: Kysely<Database>
beforeEach(async () => {
  db = await freshDatabase()
})

describe('createOrganisation', () => {
  const found = async (slug: string, name = 'North Street Homes') =>
    createOrganisation(db, { personId: await makePerson(db), input: { name, slug, measure: 'metric' }, nowMs: NOW_MS })

  it('makes whoever founds it its landlord, and writes it down', async () => {
    const personId = await makePerson(db)
    await createOrganisation(db, { personId, input: { name: 'North Street', slug: 'North-Street', measure: 'us' }, nowMs: NOW_MS })
    const opened = await openOrganisation(db, personId, 'north-street')
    expect(opened?.organisation).toMatchObject({ name: 'North Street', measure: 'us', roles: ['landlord'] })
    expect(await db.selectFrom('audit_entry').select(['action', 'subject_kind', 'person_id']).execute()).toEqual([
      { action: 'create', subject_kind: 'organisation', person_id: personId },
    ])
  })
  it.each(['ab', '-north', 'north-', 'north street', 'nörth', 'north/street', 'new', 'api', 'x'.repeat(41)])(
    'refuses the address %j and names the field',
    async (slug) => {
      await expect(found(slug)).rejects.toMatchObject({ code: 'invalid', details: { fields: [{ field: 'slug' }] } })
    },
  )
  it('gives an address to one of ten at once', async () => {
    const results = await Promise.allSettled(Array.from({ length: 10 }, () => found('north-street')))
    expect(results.filter((result) => result.status === 'fulfilled')).toHaveLength(1)
    expect(await db.selectFrom('membership').selectAll().execute()).toHaveLength(1)
  })
})

describe('openOrganisation', () => {
  it('shows one person a different role in each of their organisations, and neither to the other', async () => {
    const personId = await makePerson(db)
    const [first, second] = [await makeLandlord(db, 'first'), await makeLandlord(db, 'second')]
    await scopeFor(db, { organisationId: first.scope.organisationId, personId, roles: ['electrician'] })
    await scopeFor(db, { organisationId: second.scope.organisationId, personId, roles: ['owner', 'tenant'] })
    expect((await openOrganisation(db, personId, 'first'))?.organisation.roles).toEqual(['electrician'])
    expect((await openOrganisation(db, personId, 'second'))?.organisation.roles).toEqual(['owner', 'tenant'])
    expect(await openOrganisation(db, personOf(first), 'second')).toBeNull()
    expect((await listOrganisationsOf(db, personId)).map(({ slug }) => slug)).toEqual(['first', 'second'])
  })
})

describe('access to properties', () => {
  let ours: OrgDb
  let electrician: OrgDb
  let propertyId: PropertyId
  beforeEach(async () => {
    ours = await makeLandlord(db, 'ours')
    propertyId = (await makeBuilding(ours, DEMO_BUILDINGS[0] as (typeof DEMO_BUILDINGS)[number])).propertyId
    electrician = await scopeFor(db, {
      organisationId: ours.scope.organisationId,
      personId: await makePerson(db),
      roles: ['electrician'],
    })
  })
  const target = () => ({ personId: personOf(electrician), propertyId, role: 'electrician', nowMs: NOW_MS })

  it('is given and taken by a landlord, twice without harm, and written down each time', async () => {
    await giveAccess(ours, target())
    await giveAccess(ours, target())
    expect(await listAccess(ours)).toEqual([{ personId: personOf(electrician), propertyId, role: 'electrician' }])
    await takeAccess(ours, target())
    expect(await listAccess(ours)).toEqual([])
    const actions = await db.selectFrom('audit_entry').select('action').where('subject_kind', '=', 'member').execute()
    expect(actions.map(({ action }) => action)).toEqual(['give-access', 'give-access', 'take-access'])
  })
  it('is refused to anybody else, who can’t even look', async () => {
    for (const change of [giveAccess, takeAccess]) await expect(change(electrician, target())).rejects.toMatchObject({ code: 'forbidden' })
    await expect(loadPeople(electrician, NOW_MS)).rejects.toMatchObject({ code: 'forbidden' })
  })
  it("answers not found for another organisation's person or property", async () => {
    const theirs = await makeLandlord(db)
    const stranger = await scopeFor(db, {
      organisationId: theirs.scope.organisationId,
      personId: await makePerson(db),
      roles: ['electrician'],
    })
    const theirProperty = (await makeBuilding(theirs, DEMO_BUILDINGS[0] as (typeof DEMO_BUILDINGS)[number])).propertyId
    for (const change of [giveAccess, takeAccess]) {
      await expect(change(ours, { ...target(), personId: personOf(stranger) })).rejects.toMatchObject({ code: 'not-found' })
      await expect(change(ours, { ...target(), propertyId: theirProperty })).rejects.toMatchObject({ code: 'not-found' })
    }
  })
  it('is not for roles that see everything or only their own unit', async () => {
    await expect(giveAccess(ours, { ...target(), role: 'landlord' })).rejects.toMatchObject({ code: 'not-found' })
    await expect(giveAccess(ours, { ...target(), role: 'owner' })).rejects.toMatchObject({ code: 'not-found' })
  })
  it('ends with the role, so that coming back in it opens nothing by itself', async () => {
    await giveAccess(ours, target())
    expect(await openOrganisation(db, personOf(electrician), 'ours')).not.toBeNull()
    await removeMember(ours, { personId: personOf(electrician), role: 'electrician', nowMs: NOW_MS })
    expect(await listAccess(ours)).toEqual([])
    expect(await openOrganisation(db, personOf(electrician), 'ours')).toBeNull()
  })
  it('is shown per person and role, and a person in two roles is counted once', async () => {
    await giveAccess(ours, target())
    await inTransaction(ours, (trx) => addMembership(trx, { personId: personOf(electrician), role: 'owner', createdAtMs: NOW_MS }))
    const people = await loadPeople(ours, NOW_MS)
    expect([people.personCount, people.members.length]).toEqual([2, 3])
    const open = people.members.map(({ role, openProperties }) => [role, openProperties.length])
    expect(open).toEqual(expect.arrayContaining([['electrician', 1], ['owner', 0], ['landlord', 0]])) // prettier-ignore
  })
})

describe('removeMember', () => {
  it('keeps one landlord when two remove each other at once', async () => {
    const first = await makeLandlord(db)
    const second = await scopeFor(db, {
      organisationId: first.scope.organisationId,
      personId: await makePerson(db),
      roles: ['landlord'],
    })
    const remove = (by: OrgDb, whom: OrgDb) => removeMember(by, { personId: personOf(whom), role: 'landlord', nowMs: NOW_MS })
    const results = await Promise.allSettled([remove(first, second), remove(second, first)])
    expect(results.filter((result) => result.status === 'fulfilled')).toHaveLength(1)
    expect((await listMembers(first)).filter(({ role }) => role === 'landlord')).toHaveLength(1)
  })
})
