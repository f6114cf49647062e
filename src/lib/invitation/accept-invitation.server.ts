/**
 * Accepts an invitation: a new person sets name and password, a known one must be signed in under the invited address.
 * The link went to that address, so accepting confirms it. Ten at once: one wins.
 */
import type { PersonId } from '#db/ids.ts'
import { orgTrx } from '#db/org-db.ts'
import { addPerson, type Connection, findPersonByEmail } from '#db/queries/account.ts'
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

export async function acceptInvitation(
  db: Connection,
  acceptance: Acceptance,
): Promise<{ readonly personId: PersonId; readonly slug: string }> {
  const { token, signedIn, nowMs } = acceptance
  const found = await readInvitation(db, token, nowMs)
  if (!found) throw gone()
  const newcomer = (await findPersonByEmail(db, found.email)) === undefined
  const fields = newcomer ? parseInput(acceptSchema, acceptance.input) : null
  const passwordHash = fields ? await hashPassword(fields.password) : null
  return db.transaction().execute(async (trx) => {
    const known = await findPersonByEmail(trx, found.email)
    if (known && signedIn?.id !== known.id)
      throw new AppError('conflict', `Sign in as ${found.email} first, then open the link again. The invitation is still open.`)
    const personId =
      known?.id ??
      (await addPerson(trx, {
        email: found.email,
        name: fields?.name ?? found.name,
        passwordHash,
        emailConfirmedAtMs: nowMs,
        createdAtMs: nowMs,
      }))
    const scoped = orgTrx(trx, scopeForNewMember(found.organisationId, personId, [found.role]))
    if (!(await takeInvitation(scoped, found.id, nowMs))) throw gone()
    await addMembership(scoped, { personId, role: found.role, createdAtMs: nowMs })
    if (found.propertyId && (found.role === 'electrician' || found.role === 'owner'))
      await addAccess(scoped, { personId, propertyId: found.propertyId, role: found.role }, nowMs)
    if (found.tenancyId) await changeTenancyPerson(scoped, found.tenancyId, personId)
    await addAudit(scoped, { atMs: nowMs, action: 'accept', subjectKind: 'invitation', subjectId: found.id, after: { role: found.role } })
    return { personId, slug: found.organisationSlug }
  })
}
