/**
 * Keeps what only a recipient may read apart from a letter's bodies: a mark stands for each link's secret and is filled in as the
 * letter leaves, the same at every attempt. Whoever else reads the stored letter sees dots in its place.
 */
import { randomUUID } from 'node:crypto'
import type { PrivatePart } from '#db/queries/message.ts'
import { signToken, signingSecret, type TokenClaims } from './link.server.ts'

/** As it stands in the finished bodies, with the claims it was signed from if it can be signed again. */
export interface Secret {
  readonly token: string
  readonly claims?: TokenClaims
}
interface Bodies {
  readonly text: string
  readonly html: string
  readonly headers?: Readonly<Record<string, string>> | undefined
}
export interface Sealed {
  readonly text: string
  readonly html: string
  readonly headers: Readonly<Record<string, string>>
  readonly privateParts: readonly PrivatePart[]
}

/** A mark carries a number nobody can guess, so that no entered text can be one. */
const MARK = /\{\{[0-9a-f-]{36}:(\d+)\}\}/g
const HIDDEN = '…'

export function seal({ text, html, headers = {} }: Bodies, secrets: readonly Secret[]): Sealed {
  const number = randomUUID()
  const hide = (body: string): string =>
    secrets.reduce((hidden, { token }, index) => hidden.replaceAll(token, `{{${number}:${index}}}`), body)
  return {
    text: hide(text),
    html: hide(html),
    headers: eachValue(headers, hide),
    privateParts: secrets.map(({ token, claims }) => (claims ? { claims } : { token })),
  }
}

/** The bodies as the recipient gets them. */
export function unseal<T extends Omit<Sealed, 'privateParts'>>(letter: T, parts: readonly PrivatePart[]): T {
  const fill = (body: string): string => body.replace(MARK, (mark, index: string) => filled(parts[Number(index)]) ?? mark)
  return { ...letter, text: fill(letter.text), html: fill(letter.html), headers: eachValue(letter.headers, fill) }
}

function filled(part: PrivatePart | undefined): string | null {
  if (!part || 'removed' in part) return null
  return 'token' in part ? part.token : signToken(part.claims, signingSecret())
}

/** A body as anybody but its recipient may read it. */
export const redacted = (body: string): string => body.replace(MARK, HIDDEN)

const eachValue = (headers: Readonly<Record<string, string>>, change: (value: string) => string): Readonly<Record<string, string>> =>
  Object.fromEntries(Object.entries(headers).map(([name, value]) => [name, change(value)]))
