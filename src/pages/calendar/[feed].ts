/** A tenancy's calendar under its secret address, for calendar programs: no cookie, no session, an answer in kind. */
import type { APIRoute } from 'astro'
import { database } from '#lib/database.server.ts'
import { isUnchanged } from '#lib/http/conditional.ts'
import { loadFeed } from '#lib/feed/load-feed.server.ts'

const MS_PER_S = 1_000
/** Kept by the one program that asked and asked about again each time; never by anything in between. */
const KEPT_BY = 'private, no-cache'

export const GET: APIRoute = async ({ params, request, locals }) => {
  const feed = await loadFeed(database(), { part: params.feed ?? '', nowMs: locals.nowMs })
  if (feed.status === 'not-found')
    return words(404, 'There is no calendar under this address. It may have been renewed: look on your card.')
  if (feed.status === 'gone') return words(410, 'This tenancy is over, and its calendar with it.')
  const headers = {
    'cache-control': KEPT_BY,
    etag: feed.etag,
    'last-modified': new Date(feed.lastModifiedMs).toUTCString(),
    'x-robots-tag': 'noindex',
  }
  const lastModifiedMs = Math.floor(feed.lastModifiedMs / MS_PER_S) * MS_PER_S
  if (isUnchanged(request.headers, { etag: feed.etag, lastModifiedMs })) return new Response(null, { status: 304, headers })
  return new Response(feed.text, {
    headers: { ...headers, 'content-type': 'text/calendar; charset=utf-8', 'content-disposition': 'inline; filename="hot-water.ics"' },
  })
}

const words = (status: number, text: string): Response =>
  new Response(text, { status, headers: { 'content-type': 'text/plain; charset=utf-8', 'cache-control': 'no-store' } })
