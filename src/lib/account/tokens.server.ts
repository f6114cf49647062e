/** One-use tokens in links: 256 random bits; only the hash is stored. */
import { randomBytes } from 'node:crypto'

export const CONFIRM_HOURS = 24
export const RESET_HOURS = 1
const HOUR_MS = 3_600_000

export const newToken = (): string => randomBytes(32).toString('base64url')
export const expiryMs = (nowMs: number, hours: number): number => nowMs + hours * HOUR_MS
