/** Invitations: by landlords only, once, until they expire or are revoked; what they give is what they named. */
import type { Kysely } from 'kysely'
import { beforeEach, describe, expect, it } from 'vitest'
import type { OrgDb } from '#db/org-db.ts'
import { addPerson, findPersonByEmail } from '#db/queries/account.ts'
import { listAccess, listMembers, listOpenInvitations } from '#db/queries/organisation.ts'
import type { Database } from '#db/schema.ts'
import { DEMO_BUILDINGS } from '#lib/demo/buildings.ts'
import { acceptInvitation } from '#lib/invitation/accept-invitation.server.ts'
import { invitePerson } from '#lib/invitation/invite-person.server.ts'
import { loadInvitation } from '#lib/invitation/load-invitation.server.ts'
import { resendInvitation } from '#lib/invitation/resend-invitation.server.ts'
import { revokeInvitation } from '#lib/invitation/revoke-invitation.server.ts'
import { removeMember } from '#lib/organisation/remove-member.server.ts'
import { makeBuilding } from '../../support/building.ts'
import { freshDatabase } from '../../support/database.ts'
import { makeLandlord, makePerson, NOW_MS, scopeFor } from '../../support/factories.ts'
import { asSent } from '../../support/outbox.ts'

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
  const mail = await db.selectFrom('message').selectAll().where('cause', '=', id).executeTakeFirstOrThrow()
  return { id, token: /\/invitation\/([\w-]+)/.exec(asSent(mail).text)?.[1] ?? '' }
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
    for (const result of results) if (result.status === 'rejected') expect(result.reason).toMatchObject({ code: 'expired' })
    expect(await listMembers(ours)).toHaveLength(2)
  })
  it('refuses a link that has expired or was revoked', async () => {
    const late = await invite()
    await expect(accept(late.token, NOW_MS + 14 * DAY_MS)).rejects.toMatchObject({ code: 'expired' })
    await revokeInvitation(ours, { invitationId: late.id, nowMs: NOW_MS })
    await expect(accept(late.token)).rejects.toMatchObject({ code: 'expired' })
  })
  it('asks a known person to sign in under the invited address', async () => {
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

describe('acceptInvitation and accounts', () => {
  const personWith = (fields: Partial<Parameters<typeof addPerson>[1]>) =>
    addPerson(db, {
      email: 'marek@people.example',
      name: 'Somebody',
      passwordHash: '$argon2id$v=19$m=19456,t=2,p=1$AAAAAAAAAAAAAAAAAAAAAA$AAAA',
      emailConfirmedAtMs: NOW_MS,
      createdAtMs: NOW_MS,
      ...fields,
    })
  it('lets a signed-in person of that address accept with one press, keeping name and password', async () => {
    const id = await personWith({})
    const { token } = await invite()
    const signedIn = { id, email: 'marek@people.example' }
    expect(await acceptInvitation(db, { token, signedIn, input: {}, nowMs: NOW_MS })).toMatchObject({ personId: id })
    expect((await findPersonByEmail(db, 'marek@people.example'))?.name).toBe('Somebody')
  })
  it('refuses whoever is signed in under another address, and leaves the invitation open', async () => {
    await personWith({})
    const other = { id: await makePerson(db), email: 'other@people.example' }
    const { token } = await invite()
    await expect(acceptInvitation(db, { token, signedIn: other, input: NEWCOMER, nowMs: NOW_MS })).rejects.toMatchObject({
      code: 'conflict',
    })
    expect(await loadInvitation(db, { token, user: other, nowMs: NOW_MS })).toMatchObject({ mustSignIn: true, otherIsSignedIn: true })
  })
  it('makes a newcomer their own account, whoever else is signed in here', async () => {
    const other = { id: await makePerson(db), email: 'other@people.example' }
    const { token } = await invite()
    const accepted = await acceptInvitation(db, { token, signedIn: other, input: NEWCOMER, nowMs: NOW_MS })
    expect(accepted.personId).not.toBe(other.id)
    expect((await findPersonByEmail(db, 'marek@people.example'))?.id).toBe(accepted.personId)
  })
  it('outranks a sign-up that was never confirmed: its password no longer opens anything', async () => {
    const id = await personWith({ emailConfirmedAtMs: null, passwordHash: 'set by a stranger' })
    const { token } = await invite()
    expect((await loadInvitation(db, { token, user: null, nowMs: NOW_MS }))?.isNew).toBe(true)
    expect((await accept(token)).personId).toBe(id)
    expect((await findPersonByEmail(db, 'marek@people.example'))?.password_hash).toMatch(/^\$argon2id/)
  })
})

describe('resendInvitation', () => {
  const resend = (invitationId: unknown, by: OrgDb = ours, nowMs = NOW_MS) =>
    resendInvitation(by, { invitationId, organisationName: 'Ours', nowMs })
  const newestToken = async () => {
    const mail = await db.selectFrom('message').selectAll().orderBy('queued_at_ms', 'desc').executeTakeFirstOrThrow()
    return /\/invitation\/([\w-]+)/.exec(asSent(mail).text)?.[1] ?? ''
  }
  it('mails a new link for another fourteen days and ends the one before', async () => {
    const { id, token } = await invite()
    const laterMs = NOW_MS + 15 * DAY_MS
    await resend(id, ours, laterMs)
    const again = await newestToken()
    expect(again).not.toBe(token)
    await expect(accept(token)).rejects.toMatchObject({ code: 'expired' })
    await expect(accept(again, laterMs + 13 * DAY_MS)).resolves.toBeTruthy()
  })
  it('is for landlords, and not for what is accepted, revoked or another organisation’s', async () => {
    const { id, token } = await invite()
    const personId = await makePerson(db)
    const owner = await scopeFor(db, { organisationId: ours.scope.organisationId, personId, roles: ['owner'] })
    await expect(resend(id, owner)).rejects.toMatchObject({ code: 'forbidden' })
    await expect(resend(id, await makeLandlord(db))).rejects.toMatchObject({ code: 'not-found' })
    await accept(token)
    await expect(resend(id)).rejects.toMatchObject({ code: 'not-found' })
    const second = await invite({ email: 'second@people.example' })
    await revokeInvitation(ours, { invitationId: second.id, nowMs: NOW_MS })
    await expect(resend(second.id)).rejects.toMatchObject({ code: 'not-found' })
  })
})

describe('revokeInvitation', () => {
  it('is for landlords, and answers not found for another organisation’s', async () => {
    const { id } = await invite()
    const personId = await makePerson(db)
    const tenant = await scopeFor(db, { organisationId: ours.scope.organisationId, personId, roles: ['tenant'] })
    await expect(revokeInvitation(tenant, { invitationId: id, nowMs: NOW_MS })).rejects.toMatchObject({ code: 'forbidden' })
    await expect(revokeInvitation(await makeLandlord(db), { invitationId: id, nowMs: NOW_MS })).rejects.toMatchObject({ code: 'not-found' })
  })
})

describe('invitePerson', () => {
  it('replaces an open invitation to the same, and leaves one to something else', async () => {
    const first = await invite()
    const { propertyId } = await makeBuilding(ours, building)
    const other = await invite({ role: 'owner', propertyId })
    const second = await invite()
    await expect(accept(first.token)).rejects.toMatchObject({ code: 'expired' })
    expect((await listOpenInvitations(ours)).map(({ id }) => id).sort()).toEqual([other.id, second.id].sort())
  })
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
