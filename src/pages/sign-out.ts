/** Ends this browser's session; a POST, so that no link can sign anybody out. */
import type { APIRoute } from 'astro'
import { endSession } from '#lib/auth/start-session.server.ts'

export const POST: APIRoute = async ({ cookies, redirect }) => {
  await endSession(cookies)
  return redirect('/sign-in', 303)
}
