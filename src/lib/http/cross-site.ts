/** Tells a writing request of another site from one of our own pages, by what browsers say of its origin (Fetch Metadata, Origin). */

const SAFE = new Set(['GET', 'HEAD', 'OPTIONS'])

/**
 * Browsers state `Sec-Fetch-Site`, older ones `Origin`; programs without a browser state neither and carry no cookie that a
 * page could ride on. Source: OWASP cross-site request forgery prevention cheat sheet, "Fetch Metadata headers".
 */
export function isCrossSite(request: Request, baseUrl: string): boolean {
  if (SAFE.has(request.method)) return false
  const site = request.headers.get('sec-fetch-site')
  if (site) return site !== 'same-origin' && site !== 'none'
  const origin = request.headers.get('origin')
  if (origin === null) return false
  // `null` and other opaque origins are nobody's page of ours.
  if (!URL.canParse(origin)) return true
  // One machine has several names (localhost, 127.0.0.1): the configured one, or the one this request was sent to.
  return origin !== new URL(baseUrl).origin && new URL(origin).host !== request.headers.get('host')
}
