/** The edge's rules by themselves: which writes are another site's, and which headers every answer carries. */
import { describe, expect, it } from 'vitest'
import { isCrossSite } from '#lib/http/cross-site.ts'
import { safeNext } from '#lib/http/form.ts'
import { secured } from '#lib/http/security-headers.ts'

const BASE = 'https://house.example'
const write = (headers: Record<string, string>, method = 'POST') =>
  isCrossSite(new Request(`${BASE}/sign-in`, { method, headers: { host: 'house.example', ...headers } }), BASE)

describe('isCrossSite', () => {
  it('believes what the browser says of the request’s origin (W3C Fetch Metadata, Sec-Fetch-Site)', () => {
    expect(write({ 'sec-fetch-site': 'same-origin' })).toBe(false)
    expect(write({ 'sec-fetch-site': 'none' })).toBe(false)
    expect(write({ 'sec-fetch-site': 'same-site' })).toBe(true)
    expect(write({ 'sec-fetch-site': 'cross-site', origin: BASE })).toBe(true)
  })
  it('goes by Origin where a browser says nothing else', () => {
    expect(write({ origin: BASE })).toBe(false)
    expect(write({ origin: 'https://other.example' })).toBe(true)
    expect(write({ origin: 'http://house.example:8080' })).toBe(true)
  })
  it('refuses an opaque origin (RFC 6454, 6.1: the string null)', () => {
    expect(write({ origin: 'null' })).toBe(true)
  })
  it('lets reading and programs without a browser pass', () => {
    expect(write({ 'sec-fetch-site': 'cross-site' }, 'GET')).toBe(false)
    expect(write({})).toBe(false)
  })
})

describe('secured', () => {
  const headersOf = (init: HeadersInit, https = true) => secured(new Response('x', { headers: init }), { https }).headers
  it('keeps every answer out of caches and frames, and its type as stated', () => {
    const headers = headersOf({ 'content-type': 'text/html' })
    expect(headers.get('cache-control')).toBe('private, no-store')
    expect(headers.get('x-frame-options')).toBe('DENY')
    expect(headers.get('x-content-type-options')).toBe('nosniff')
    expect(headers.get('strict-transport-security')).toMatch(/^max-age=\d+$/)
  })
  it('asks for https only where the address is https', () => {
    expect(headersOf({}, false).get('strict-transport-security')).toBeNull()
  })
  it('adds style attributes to a page’s policy once, also when a page was rendered in place of another', () => {
    const once = headersOf({ 'content-type': 'text/html', 'content-security-policy': "script-src 'self';" })
    const twice = headersOf(once)
    expect(twice.get('content-security-policy')).toBe("script-src 'self'; style-src-attr 'unsafe-inline';")
  })
  it('lets nothing be loaded by what is no page', () => {
    expect(headersOf({ 'content-type': 'text/csv' }).get('content-security-policy')).toBe("default-src 'none'; frame-ancestors 'none'")
  })
})

describe('safeNext', () => {
  it('goes to a path of our own', () => {
    expect(safeNext('/o/house/people?x=1')).toBe('/o/house/people?x=1')
  })
  it.each([
    'https://other.example',
    '//other.example',
    '/\\other.example',
    '/\t/other.example',
    'javascript:alert(1)',
    '',
    null,
    '/sign-out',
  ])('goes nowhere for %j', (next) => {
    expect(safeNext(next)).toBeNull()
  })
})
