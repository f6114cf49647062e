/** Starts a session for a person whose password or invitation has just been checked; the session before it ends. */
import type { AstroCookies } from 'astro'
import type { PersonId } from '#db/ids.ts'
import { lucia } from './lucia.server.ts'

export async function startSession(cookies: AstroCookies, personId: PersonId): Promise<void> {
  const before = cookies.get(lucia().sessionCookieName)?.value
  if (before) await lucia().invalidateSession(before)
  const session = await lucia().createSession(personId, {})
  const cookie = lucia().createSessionCookie(session.id)
  cookies.set(cookie.name, cookie.value, cookie.attributes)
}

export async function endSession(cookies: AstroCookies): Promise<void> {
  const before = cookies.get(lucia().sessionCookieName)?.value
  if (before) await lucia().invalidateSession(before)
  const blank = lucia().createBlankSessionCookie()
  cookies.set(blank.name, blank.value, blank.attributes)
}
