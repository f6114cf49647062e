/**
 * Every request's beginning and end: who asks (session), in which organisation (from the address, never from the session),
 * with which scope; then the headers that every answer carries. Nothing else mints a scope for a request.
 */
import { defineMiddleware } from 'astro:middleware'
import { parsePersonId } from '#db/ids.ts'
import { lucia } from '#lib/auth/lucia.server.ts'
import { openOrganisation } from '#lib/auth/scope.server.ts'
import { processConfig } from '#lib/config.server.ts'
import { database } from '#lib/database.server.ts'
import { AppError } from '#lib/http/app-error.ts'
import { secured } from '#lib/http/security-headers.ts'
import { logUnknown, toResponse } from '#lib/http/to-response.ts'

/** Links in mail carry their own proof and are posted to by mail programs. */
const SIGNED_LINKS = '/t/'
const IN_ORGANISATION = /^\/(api\/)?o\/([^/]+)(?:\/|$)/

export const onRequest = defineMiddleware(async (context, next) => {
  const { locals, url, request } = context
  locals.nowMs = Date.now()
  locals.user = null
  locals.organisation = null
  locals.db = null
  const isApi = url.pathname.startsWith('/api/')
  try {
    if (!url.pathname.startsWith(SIGNED_LINKS) && isCrossSite(request)) {
      return secured(
        toResponse(new AppError('forbidden', 'This request came from another site and was refused. Nothing was changed.'), url.pathname),
      )
    }
    const user = await recognise(context)
    locals.user = user
    const place = IN_ORGANISATION.exec(url.pathname)
    if (place) {
      if (!user) {
        if (isApi)
          return secured(
            toResponse(
              new AppError('not-signed-in', 'You are not signed in, or your session has ended. Sign in and try again.'),
              url.pathname,
            ),
          )
        return secured(context.redirect(`/sign-in?next=${encodeURIComponent(url.pathname + url.search)}`))
      }
      const opened = await openOrganisation(database(), user.id, place[2] ?? '')
      if (!opened) {
        if (isApi) return secured(toResponse(new AppError('not-found', 'There is no such page here.'), url.pathname))
        return secured(await context.rewrite('/404'))
      }
      locals.organisation = opened.organisation
      locals.db = opened.db
    }
    return secured(await next(), { signedIn: user !== null })
  } catch (error) {
    if (error instanceof AppError) {
      if (isApi) return secured(toResponse(error, url.pathname))
      const page = error.code === 'forbidden' ? '/403' : error.code === 'not-found' ? '/404' : null
      if (page) return secured(await context.rewrite(page), { signedIn: true })
    }
    if (isApi) return secured(toResponse(error, url.pathname))
    locals.errorId = logUnknown(error)
    return secured(await context.rewrite('/500'))
  }
})

type Context = Parameters<Parameters<typeof defineMiddleware>[0]>[0]

/** Reads the session cookie; a session in the second half of its life is prolonged, a dead one's cookie is cleared. */
async function recognise({ cookies }: Context): Promise<App.Locals['user']> {
  const sessionId = cookies.get(lucia().sessionCookieName)?.value
  if (!sessionId) return null
  const { session, user } = await lucia().validateSession(sessionId)
  const cookie = session?.fresh ? lucia().createSessionCookie(session.id) : session ? null : lucia().createBlankSessionCookie()
  if (cookie) cookies.set(cookie.name, cookie.value, cookie.attributes)
  const personId = user ? parsePersonId(user.id) : null
  return user && personId ? { id: personId, email: user.email, name: user.name } : null
}

/** A writing request must come from our own pages: browsers say where from, and programs without a browser carry no cookie of ours. */
function isCrossSite(request: Request): boolean {
  if (request.method === 'GET' || request.method === 'HEAD') return false
  const site = request.headers.get('sec-fetch-site')
  if (site) return site !== 'same-origin' && site !== 'none'
  const origin = request.headers.get('origin')
  if (!origin) return false
  // The Host header is the client's own; the configured address is the other name this server answers to.
  return new URL(origin).host !== request.headers.get('host') && origin !== new URL(processConfig().baseUrl).origin
}
