/** Writes a new edition of a month, with the reason, and mails it; the editions before stay as they were sent. */
import type { DigestId } from '#db/ids.ts'
import type { OrgDb } from '#db/org-db.ts'
import { findLastEdition } from '#db/queries/digest.ts'
import { requireRole } from '#lib/auth/permission.ts'
import { notFound } from '#lib/http/app-error.ts'
import { parseInput } from '#lib/http/parse.ts'
import { loadDigest } from './load-digests.server.ts'
import { correctionSchema } from './schemas.ts'
import { writeDigest } from './write-digest.server.ts'

export interface CorrectDigest {
  readonly digestId: unknown
  readonly input: unknown
  readonly nowMs: number
}

/** Answers the new edition. */
export async function correctDigest(db: OrgDb, { digestId, input, nowMs }: CorrectDigest): Promise<DigestId> {
  requireRole(db, ['landlord'], 'correct a digest')
  const { reason } = parseInput(correctionSchema, input)
  const { propertyId, month } = (await loadDigest(db, digestId)).digest
  await writeDigest(db, { propertyId, month, reason, nowMs })
  const last = await findLastEdition(db, propertyId, month)
  if (!last) throw notFound('digest')
  return last.id
}
