/** The headers of every answer that the server renders. */

/** Inline styles come from the charts' and table's geometry; scripts only from our own files, and Astro's hydration by hash. */
const BASE: Readonly<Record<string, string>> = {
  'x-content-type-options': 'nosniff',
  'referrer-policy': 'same-origin',
  'x-frame-options': 'DENY',
  'permissions-policy': 'camera=(self), geolocation=(), microphone=(), payment=()',
  'cross-origin-opener-policy': 'same-origin',
}

export function secured(response: Response, { signedIn = false }: { readonly signedIn?: boolean } = {}): Response {
  const headers = new Headers(response.headers)
  for (const [name, value] of Object.entries(BASE)) headers.set(name, value)
  if (signedIn && !headers.has('cache-control')) headers.set('cache-control', 'private, no-store')
  return new Response(response.body, { status: response.status, statusText: response.statusText, headers })
}
