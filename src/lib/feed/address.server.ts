/**
 * The secret half of a calendar address, computed from its id and the signing key: whoever reads the database or a backup of it
 * cannot open a calendar, and yet the tenant is shown the address whenever they ask.
 */
import { createHmac, timingSafeEqual } from 'node:crypto'
import { type FeedId, parseFeedId } from '#db/ids.ts'
import { processConfig } from '#lib/config.server.ts'
import { signingSecret } from '#lib/mail/link.server.ts'

/** 128 bits of an HMAC are past guessing (RFC 2104, 5: not fewer than half of the hash, not fewer than 80 bits). */
const SECRET_BYTES = 16

const secretOf = (id: FeedId): Buffer => createHmac('sha256', signingSecret()).update(`calendar ${id}`).digest().subarray(0, SECRET_BYTES)

export const feedAddress = (id: FeedId): string => `${processConfig().baseUrl}/calendar/${id}.${secretOf(id).toString('hex')}.ics`

/** The id in the last part of an address, or `null` when it is not one of ours. */
export function readFeedAddress(part: string): FeedId | null {
  const [, named, secret] = /^([0-9a-f-]{36})\.([0-9a-f]{32})\.ics$/.exec(part) ?? []
  const id = parseFeedId(named)
  return id && secret && timingSafeEqual(Buffer.from(secret, 'hex'), secretOf(id)) ? id : null
}
