/** What an invitation's page shows to whoever holds the link. */
import type { PersonId } from '#db/ids.ts'
import { type Connection, findPersonByEmail } from '#db/queries/account.ts'
import { hasAccount, readInvitation } from './accept-invitation.server.ts'

const ROLE_WORDS = { landlord: 'a landlord', tenant: 'a tenant', electrician: 'an electrician', owner: 'an owner' } as const

export interface InvitationAsked {
  readonly token: string
  readonly user: { readonly id: PersonId } | null
  readonly nowMs: number
}

export async function loadInvitation(db: Connection, { token, user, nowMs }: InvitationAsked) {
  const found = await readInvitation(db, token, nowMs)
  if (!found) return null
  const known = await findPersonByEmail(db, found.email)
  const { organisationName, email, name, role } = found
  const isNew = !hasAccount(known)
  /** Somebody else is signed in here; accepting or signing in ends their session. */
  const otherIsSignedIn = user !== null && user.id !== known?.id
  return {
    organisationName,
    email,
    name,
    roleWords: ROLE_WORDS[role],
    isNew,
    mustSignIn: !isNew && (user === null || otherIsSignedIn),
    otherIsSignedIn,
  }
}
