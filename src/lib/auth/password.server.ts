/** Passwords by argon2id. Parameters: OWASP password storage cheat sheet, m = 19 MiB, t = 2, p = 1. */
import { hash, verify } from '@node-rs/argon2'

// 2 = argon2id: the package's enum is ambient and cannot be read under isolated modules.
const OPTIONS = { algorithm: 2, memoryCost: 19_456, timeCost: 2, parallelism: 1 }

export const hashPassword = (password: string): Promise<string> => hash(password, OPTIONS)

/** Hash of a password nobody has: unknown accounts take as long as known ones. */
let decoy: Promise<string> | null = null

export async function verifyPassword(stored: string | null, password: string): Promise<boolean> {
  decoy ??= hashPassword('no account has this password')
  const matches = await verify(stored ?? (await decoy), password)
  return stored !== null && matches
}
