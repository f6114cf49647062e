/**
 * Accepts an invitation: a person with an account must be signed in under the invited address; anybody else sets name and
 * password. The link went to that address, so accepting confirms it. Ten at once: one wins.
 */
import type { PersonId } from '#db/ids.ts'
import { orgTrx } from '#db/org-db.ts'
import { addPerson, changePerson, type Connection, deleteSessionsOf, findPersonByEmail, type Person } from '#db/queries/account.ts'
import { addAudit } from '#db/queries/audit.ts'
import { addAccess, addMembership, findInvitationByToken, type FoundInvitation, takeInvitation } from '#db/queries/organisation.ts'
import { changeTenancyPerson } from '#db/queries/tenancy.ts'
import { hashToken } from '#lib/auth/kysely-adapter.server.ts'
import { hashPassword } from '#lib/auth/password.server.ts'
import { scopeForNewMember } from '#lib/auth/scope.server.ts'
import { AppError } from '#lib/http/app-error.ts'
import { parseInput } from '#lib/http/parse.ts'
import { acceptSchema } from './schemas.ts'

export interface Acceptance {
  readonly token: string
  /** The signed-in person, or `null`. */
  readonly signedIn: { readonly id: PersonId; readonly email: string } | null
  readonly input: unknown
  readonly nowMs: number
}

const gone = () => new AppError('expired', 'This invitation has been used, revoked or has expired. Ask whoever invited you for a new one.')

/** What the invitation's page shows before anything is accepted; `null` when it is no longer open. */
export const readInvitation = (db: Connection, token: string, nowMs: number): Promise<FoundInvitation | null> =>
  findInvitationByToken(db, hashToken(token), nowMs)

/** Somebody who can sign in. A sign-up that was never confirmed may be a stranger's: the invited address outranks it. */
export const hasAccount = (person: Person | undefined): boolean =>
  person !== undefined && person.password_hash !== null && person.email_confirmed_at_ms !== null

export async function acceptInvitation(
  db: Connection,
  { token, signedIn, input, nowMs }: Acceptance,
): Promise<{ readonly personId: PersonId; readonly slug: string; readonly opensShowers: boolean }> {
  const open = await readInvitation(db, token, nowMs)
  if (!open) throw gone()
  // Hashing takes its time, so it comes before the transaction, which holds the one connection.
  const newcomer = hasAccount(await findPersonByEmail(db, open.email)) ? null : await newcomerFrom(input)
  return db.transaction().execute(async (trx) => {
    const found = await readInvitation(trx, token, nowMs)
    if (!found) throw gone()
    const personId = await joiningPerson(trx, { email: found.email, newcomer, signedIn, nowMs })
    const scoped = orgTrx(trx, scopeForNewMember(found.organisationId, personId, [found.role]))
    if (!(await takeInvitation(scoped, found.id, nowMs))) throw gone()
    await addMembership(scoped, { personId, role: found.role, createdAtMs: nowMs })
    if (found.propertyId && (found.role === 'electrician' || found.role === 'owner'))
      await addAccess(scoped, { personId, propertyId: found.propertyId, role: found.role }, nowMs)
    if (found.tenancyId) await changeTenancyPerson(scoped, found.tenancyId, personId)
    await addAudit(scoped, { atMs: nowMs, action: 'accept', subjectKind: 'invitation', subjectId: found.id, after: { role: found.role } })
    // A tenant's first page asks when they shower.
    return { personId, slug: found.organisationSlug, opensShowers: found.role === 'tenant' && found.tenancyId !== null }
  })
}

interface Newcomer {
  readonly name: string
  readonly passwordHash: string
}

async function newcomerFrom(input: unknown): Promise<Newcomer> {
  const { name, password } = parseInput(acceptSchema, input)
  return { name, passwordHash: await hashPassword(password) }
}

interface Joining {
  readonly email: string
  readonly newcomer: Newcomer | null
  readonly signedIn: Acceptance['signedIn']
  readonly nowMs: number
}

/** Who accepts: the signed-in person of that address, or the newcomer with the password they have just set. */
async function joiningPerson(trx: Connection, { email, newcomer, signedIn, nowMs }: Joining): Promise<PersonId> {
  const known = await findPersonByEmail(trx, email)
  if (known && hasAccount(known)) {
    if (signedIn?.id === known.id) return known.id
    throw new AppError('conflict', `Sign in as ${email} first, then open the link again. The invitation is still open.`)
  }
  if (!newcomer) throw gone()
  if (!known) return addPerson(trx, { ...newcomer, email, emailConfirmedAtMs: nowMs, createdAtMs: nowMs })
  await changePerson(trx, known.id, { ...newcomer, emailConfirmedAtMs: nowMs })
  await deleteSessionsOf(trx, known.id)
  return known.id
}
