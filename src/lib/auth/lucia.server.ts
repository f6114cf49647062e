/** Sessions of signed-in people: Lucia with the Kysely store; the cookie is http-only, same-site, secure where the address is https. */
import { Lucia, TimeSpan } from 'lucia'
import { processConfig } from '#lib/config.server.ts'
import { database } from '#lib/database.server.ts'
import { KyselyAdapter } from './kysely-adapter.server.ts'

export const SESSION_DAYS = 30

/** Every cookie of ours: no script reads it, no other site's form sends it, and over https it never travels in the clear. */
export const cookieRules = () =>
  ({ httpOnly: true, sameSite: 'lax', secure: processConfig().baseUrl.startsWith('https:'), path: '/' }) as const

const make = () => {
  const { sameSite, secure, path } = cookieRules()
  return new Lucia(new KyselyAdapter(database), {
    sessionExpiresIn: new TimeSpan(SESSION_DAYS, 'd'),
    // Lucia itself makes the cookie http-only.
    sessionCookie: { name: 'dwellhour_session', attributes: { sameSite, secure, path } },
    getUserAttributes: ({ email, name }) => ({ email, name }),
  })
}

let made: ReturnType<typeof make> | null = null
/** Made at first use, so that a build needs no settings. */
export const lucia = () => (made ??= make())

declare module 'lucia' {
  interface Register {
    Lucia: Lucia<Record<never, never>, { readonly email: string; readonly name: string }>
    DatabaseUserAttributes: { readonly email: string; readonly name: string }
  }
}
