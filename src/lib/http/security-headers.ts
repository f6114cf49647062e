/** The headers of every answer that the server renders. */

const BASE: Readonly<Record<string, string>> = {
  'x-content-type-options': 'nosniff',
  'referrer-policy': 'same-origin',
  'x-frame-options': 'DENY',
  'permissions-policy': 'camera=(self), geolocation=(), microphone=(), payment=()',
  'cross-origin-opener-policy': 'same-origin',
}
/** Scripts and style sheets are named by hash where the page is rendered; geometry of charts and tables is in style attributes. */
const STYLE_ATTRIBUTES = "style-src-attr 'unsafe-inline';"
/** What is no page loads nothing, whoever opens it. */
const NO_PAGE = "default-src 'none'; frame-ancestors 'none'"
/** Two years. Without `includeSubDomains`: other names under this one may belong to other services. */
const HTTPS_ONLY = 'max-age=63072000'

export function secured(response: Response, { https }: { readonly https: boolean }): Response {
  const headers = new Headers(response.headers)
  for (const [name, value] of Object.entries(BASE)) headers.set(name, value)
  if (https) headers.set('strict-transport-security', HTTPS_ONLY)
  const policy = headers.get('content-security-policy')
  if (policy) {
    if (!policy.includes(STYLE_ATTRIBUTES)) headers.set('content-security-policy', `${policy} ${STYLE_ATTRIBUTES}`)
  } else if (!headers.get('content-type')?.startsWith('text/html')) headers.set('content-security-policy', NO_PAGE)
  // A page names its person, its token or its organisation: none may be kept by a cache or shown after signing out.
  if (!headers.has('cache-control')) headers.set('cache-control', 'private, no-store')
  return new Response(response.body, { status: response.status, statusText: response.statusText, headers })
}
