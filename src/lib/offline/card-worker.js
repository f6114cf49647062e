/**
 * Keeps a tenant's card readable without a connection: network first, then the page as it was last opened, then a plain page that
 * says so. It keeps only pages that the server marks with whose they are, and forgets all of them when that changes or access ends.
 */
const OWNER = 'x-offline-for'
const KEPT_AT = 'x-kept-at'
const PAGES = 'card of '
const FILES = 'card files'
const FALLBACK = '/offline'
/** The days that a card can speak of; older, it says nothing that is still so. */
const KEPT_MS = 8 * 86_400_000
/** Style sheets and scripts of a few editions of the product. */
const FILES_MAX = 60
/** Signed out, or no longer let in. */
const ACCESS_ENDED = [401, 403, 404, 410]

self.addEventListener('install', (event) => event.waitUntil(keepFallback().then(() => self.skipWaiting())))
self.addEventListener('activate', (event) => event.waitUntil(self.clients.claim()))
self.addEventListener('message', (event) => {
  if (event.data === 'keep' && event.source) event.waitUntil(keepOpenPage(event.source.url))
})
self.addEventListener('fetch', (event) => {
  const { request } = event
  const url = new URL(request.url)
  if (url.origin !== self.location.origin) return
  if (request.mode === 'navigate') event.respondWith(page(event))
  else if (request.method === 'GET' && url.pathname.startsWith('/_astro/')) event.respondWith(file(request))
})

async function page(event) {
  const { request } = event
  const isRead = request.method === 'GET'
  let response
  try {
    response = await fetch(request)
  } catch {
    return (isRead && (await keptPage(request))) || fallback()
  }
  if (isRead) event.waitUntil(remember(request.url, response.clone()))
  return response
}

async function remember(url, response) {
  const owner = response.headers.get(OWNER)
  if (response.type === 'opaqueredirect' || ACCESS_ENDED.includes(response.status)) return forgetAllBut(null)
  if (!owner || !response.ok) return
  await forgetAllBut(PAGES + owner)
  const html = await response.text()
  const headers = new Headers(response.headers)
  headers.set(KEPT_AT, String(Date.now()))
  const pages = await caches.open(PAGES + owner)
  await pages.put(url, new Response(html, { headers }))
  await keepFiles(html)
}

async function forgetAllBut(kept) {
  for (const name of await caches.keys()) if (name.startsWith(PAGES) && name !== kept) await caches.delete(name)
}

/** The page as it was, marked so that it says that it is not new. */
async function keptPage(request) {
  for (const name of (await caches.keys()).filter((one) => one.startsWith(PAGES))) {
    const pages = await caches.open(name)
    const found = await pages.match(request.url)
    if (!found) continue
    if (Date.now() - Number(found.headers.get(KEPT_AT)) > KEPT_MS) {
      await pages.delete(request.url)
      continue
    }
    const html = await found.text()
    return new Response(html.replace('<html ', '<html data-offline '), { headers: found.headers })
  }
  return null
}

async function fallback() {
  const found = await (await caches.open(FILES)).match(FALLBACK)
  return found ?? new Response('There is no connection. Nothing was sent.', { headers: { 'content-type': 'text/plain; charset=utf-8' } })
}

async function file(request) {
  const files = await caches.open(FILES)
  const found = await files.match(request)
  if (found) return found
  const response = await fetch(request)
  if (response.ok) await files.put(request, response.clone())
  return response
}

async function keepFallback() {
  const response = await fetch(FALLBACK)
  if (!response.ok) return
  await (await caches.open(FILES)).put(FALLBACK, response.clone())
  await keepFiles(await response.text())
}

async function keepFiles(html) {
  const files = await caches.open(FILES)
  for (const path of new Set(html.match(/\/_astro\/[\w.-]+\.(?:css|js)/g))) {
    if (await files.match(path)) continue
    const response = await fetch(path)
    if (response.ok) await files.put(path, response)
  }
  const kept = (await files.keys()).filter((request) => new URL(request.url).pathname !== FALLBACK)
  for (const request of kept.slice(0, Math.max(0, kept.length - FILES_MAX))) await files.delete(request)
}

/** A page that was loaded before this worker began asks to be kept: it is fetched once more. */
async function keepOpenPage(url) {
  if (!url.startsWith(self.registration.scope)) return
  try {
    await remember(url, await fetch(url, { redirect: 'manual' }))
  } catch {
    // The connection went meanwhile: the page is kept the next time it is opened.
  }
}
