/** Invitations: by landlords only, once, until they expire or are revoked; what they give is what they named. */
import type { Kysely } from 'kysely'
import { beforeEach, describe, expect, it } from 'vitest'
import type { OrgDb } from '#db/org-db.ts'
import { findPersonByEmail } from '#db/queries/account.ts'
import { listAccess, listMembers } from '#db/queries/organisation.ts'
import type { Database } from '#db/schema.ts'
import { DEMO_BUILDINGS } from '#lib/demo/buildings.ts'
import { acceptInvitation } from '#lib/invitation/accept-invitation.server.ts'
import { invitePerson } from '#lib/invitation/invite-person.server.ts'
import { revokeInvitation } from '#lib/invitation/revoke-invitation.server.ts'
import { removeMember } from '#lib/organisation/remove-member.server.ts'
import { makeBuilding } from '../../support/building.ts'
import { freshDatabase } from '../../support/database.ts'
import { makeLandlord, makePerson, NOW_MS, scopeFor } from '../../support/factories.ts'

const DAY_MS = 86_400_000
const NEWCOMER = { name: 'Marek', password: 'three phases at night' }
const building = DEMO_BUILDINGS[0] as (typeof DEMO_BUILDINGS)[number]

let db: Kysely<Database>
let ours: OrgDb
beforeEach(async () => {
  db = await freshDatabase()
  ours = await makeLandlord(db)
})

const invite = async (over: Record<string, unknown> = {}) => {
  const input = { email: 'marek@people.example', name: 'Marek', role: 'landlord', propertyId: null, tenancyId: null, ...over }
  const id = await invitePerson(ours, { input, organisationName: 'Ours', nowMs: NOW_MS })
  const mail = await db.selectFrom('message').select('text').where('cause', '=', id).executeTakeFirstOrThrow()
  return { id, token: /\/invitation\/([\w-]+)/.exec(mail.text)?.[1] ?? '' }
}
const accept = (token: string, nowMs = NOW_MS) => acceptInvitation(db, { token, signedIn: null, input: NEWCOMER, nowMs })

describe('acceptInvitation', () => {
  it('makes a confirmed member with the invited role', async () => {
    await accept((await invite()).token)
    expect((await listMembers(ours)).map((member) => [member.email, member.role])).toContainEqual(['marek@people.example', 'landlord'])
    expect((await findPersonByEmail(db, 'marek@people.example'))?.email_confirmed_at_ms).toBe(NOW_MS)
  })
  it('lets one of ten at once win', async () => {
    const { token } = await invite()
    const results = await Promise.allSettled(Array.from({ length: 10 }, () => accept(token)))
    expect(results.filter((result) => result.status === 'fulfilled')).toHaveLength(1)
  })
  it('refuses a link that has expired or was revoked', async () => {
    const late = await invite()
    await expect(accept(late.token, NOW_MS + 14 * DAY_MS)).rejects.toMatchObject({ code: 'expired' })
    await revokeInvitation(ours, { invitationId: late.id, nowMs: NOW_MS })
    await expect(accept(late.token)).rejects.toMatchObject({ code: 'expired' })
  })
  it('asks a known person to sign in under the invited address', async () => {
    await makePerson(db)
    const { token } = await invite()
    await accept(token)
    const again = await invite({ role: 'landlord', name: 'Again' })
    await expect(accept(again.token)).rejects.toMatchObject({ code: 'conflict' })
  })
  it('gives an electrician the one property that was named', async () => {
    const { propertyId } = await makeBuilding(ours, building)
    await accept((await invite({ role: 'electrician', propertyId })).token)
    expect(await listAccess(ours)).toMatchObject([{ propertyId, role: 'electrician' }])
  })
  it('links a tenancy to the tenant who accepts', async () => {
    const { units } = await makeBuilding(ours, building)
    const tenancyId = units.get('Flat 1')?.tenancyId
    const { personId } = await accept((await invite({ role: 'tenant', tenancyId })).token)
    const row = await db
      .selectFrom('tenancy')
      .where('id', '=', tenancyId as NonNullable<typeof tenancyId>)
      .select('person_id')
      .executeTakeFirstOrThrow()
    expect(row.person_id).toBe(personId)
  })
})

describe('invitePerson', () => {
  it('is for landlords only', async () => {
    const personId = await makePerson(db)
    const owner = await scopeFor(db, { organisationId: ours.scope.organisationId, personId, roles: ['owner'] })
    await expect(invitePerson(owner, { input: {}, organisationName: 'Ours', nowMs: NOW_MS })).rejects.toMatchObject({ code: 'forbidden' })
  })
  it("answers not found for another organisation's property", async () => {
    const theirs = await makeLandlord(db)
    const { propertyId } = await makeBuilding(theirs, building)
    await expect(invite({ role: 'owner', propertyId })).rejects.toMatchObject({ code: 'not-found' })
  })
})

describe('removeMember', () => {
  it('keeps the last landlord', async () => {
    const [last] = await listMembers(ours)
    await expect(removeMember(ours, { personId: last?.personId, role: 'landlord', nowMs: NOW_MS })).rejects.toMatchObject({
      code: 'conflict',
    })
  })
  it("answers not found for another organisation's member", async () => {
    const theirs = await makeLandlord(db)
    const [stranger] = await listMembers(theirs)
    await expect(removeMember(ours, { personId: stranger?.personId, role: 'landlord', nowMs: NOW_MS })).rejects.toMatchObject({
      code: 'not-found',
    })
  })
})
