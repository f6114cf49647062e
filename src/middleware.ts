/**
 * Every request's beginning and end: who asks (session), in which organisation (from the address, never from the session),
 * with which scope; then the headers that every answer carries. Nothing else mints a scope for a request.
 */
import type { APIContext, MiddlewareHandler } from 'astro'
import { parsePersonId } from '#db/ids.ts'
import { lucia } from '#lib/auth/lucia.server.ts'
import { openOrganisation } from '#lib/auth/scope.server.ts'
import { processConfig } from '#lib/config.server.ts'
import { database } from '#lib/database.server.ts'
import { AppError, notFound } from '#lib/http/app-error.ts'
import { isCrossSite } from '#lib/http/cross-site.ts'
import { secured } from '#lib/http/security-headers.ts'
import { logUnknown, toResponse } from '#lib/http/to-response.ts'

/** Links in mail carry their own proof and are posted to by mail programs. */
const SIGNED_LINKS = '/t/'
/** A form of ours stays one under any address, so it is never let through as a link. */
const isSignedLink = (url: URL): boolean => url.pathname.startsWith(SIGNED_LINKS) && !url.searchParams.has('_action')
const IN_ORGANISATION = /^\/(?:api\/)?o\/([^/]+)(?:\/|$)/
const isApi = ({ url }: APIContext): boolean => url.pathname.startsWith('/api/')

export const onRequest: MiddlewareHandler = async (context, next) => {
  const { locals, url } = context
  locals.nowMs = Date.now()
  locals.user = null
  locals.organisation = null
  locals.db = null
  const before = sessionIn(context)
  const answered = (response: Response): Response => secure(sessionIn(context) === before ? response : forgetKeptPages(response))
  try {
    if (!isSignedLink(url) && isCrossSite(context.request, processConfig().baseUrl)) {
      throw new AppError('forbidden', 'This request came from another site and was refused. Nothing was changed.')
    }
    locals.user = await recognise(context)
    const slug = IN_ORGANISATION.exec(url.pathname)?.[1]
    if (slug !== undefined) await open(context, slug)
    const response = await next()
    // A route of /api that is not there, or not for this method, is a problem document like every other.
    const unanswered = isApi(context) && response.status === 404 && !response.headers.get('content-type')?.includes('json')
    return answered(unanswered ? toResponse(notFound('address'), url.pathname) : response)
  } catch (error) {
    return answered(await refuse(context, error))
  }
}

const secure = (response: Response): Response => secured(response, { https: processConfig().baseUrl.startsWith('https:') })

const sessionIn = ({ cookies }: APIContext): string => cookies.get(lucia().sessionCookieName)?.value ?? ''

/** Whoever signs in or out of a shared phone leaves none of the pages that it keeps to the next (W3C Clear Site Data). */
function forgetKeptPages(response: Response): Response {
  const headers = new Headers(response.headers)
  headers.set('clear-site-data', '"storage"')
  return new Response(response.body, { status: response.status, statusText: response.statusText, headers })
}

/** Reads the session cookie; a session in the second half of its life is prolonged, a dead one's cookie is cleared. */
async function recognise({ cookies }: APIContext): Promise<App.Locals['user']> {
  const sessionId = cookies.get(lucia().sessionCookieName)?.value
  if (!sessionId) return null
  const { session, user } = await lucia().validateSession(sessionId)
  const cookie = session?.fresh ? lucia().createSessionCookie(session.id) : session ? null : lucia().createBlankSessionCookie()
  if (cookie) cookies.set(cookie.name, cookie.value, cookie.attributes)
  const personId = user ? parsePersonId(user.id) : null
  return user && personId ? { id: personId, email: user.email, name: user.name } : null
}

/** Opens the organisation of the address for whoever is signed in; unknown and not theirs are one answer. */
async function open({ locals }: APIContext, slug: string): Promise<void> {
  if (!locals.user) throw new AppError('not-signed-in', 'You are not signed in, or your session has ended. Sign in and try again.')
  const opened = await openOrganisation(database(), locals.user.id, slug)
  if (!opened) throw notFound('page')
  locals.organisation = opened.organisation
  locals.db = opened.db
}

/** The answer to what was thrown: a problem document for `/api`, the way to the sign-in, or a page that says it. */
async function refuse(context: APIContext, error: unknown): Promise<Response> {
  const { url, locals } = context
  if (isApi(context)) return toResponse(error, url.pathname)
  if (error instanceof AppError) {
    if (error.code === 'not-signed-in') return context.redirect(`/sign-in?next=${encodeURIComponent(url.pathname + url.search)}`, 303)
    if (error.code === 'not-found') return errorPage(context, '/404')
    if (error.code === 'forbidden') {
      locals.refusal = error.message
      return errorPage(context, '/403')
    }
  }
  locals.errorId = logUnknown(error)
  return errorPage(context, '/500')
}

/** A fresh GET: the form that failed is neither read nor carried out again. */
function errorPage({ url, request, rewrite }: APIContext, page: '/403' | '/404' | '/500'): Promise<Response> {
  const cookie = request.headers.get('cookie')
  return rewrite(new Request(new URL(page, url), { headers: cookie && page !== '/500' ? { cookie } : {} }))
}
