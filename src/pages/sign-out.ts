/** Ends this browser's session; a POST, so that no link can sign anybody out. */
import type { APIRoute } from 'astro'
import { endSession } from '#lib/auth/start-session.server.ts'
import { safeNext } from '#lib/http/form.ts'

export const POST: APIRoute = async ({ cookies, redirect, url }) => {
  await endSession(cookies)
  const next = safeNext(url.searchParams.get('next'))
  return redirect(next ? `/sign-in?next=${encodeURIComponent(next)}` : '/sign-in', 303)
}
