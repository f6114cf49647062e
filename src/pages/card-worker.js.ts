/** The card's service worker, under an address that covers every organisation's card; it may fetch from here and nothing else. */
import type { APIRoute } from 'astro'
import worker from '#lib/offline/card-worker.js?raw'

const HEADERS = {
  'content-type': 'text/javascript; charset=utf-8',
  'cache-control': 'no-cache',
  'content-security-policy': "default-src 'none'; connect-src 'self'",
}

export const GET: APIRoute = () => new Response(worker, { headers: HEADERS })
