/** Stops everything a property sends, or lets it go on: what waits stays waiting, and what goes out of date meanwhile is not sent. */
import { inTransaction, type OrgDb } from '#db/org-db.ts'
import { addAudit } from '#db/queries/audit.ts'
import { changeSendingPaused, findPropertyBySlug } from '#db/queries/property.ts'
import { requireRole } from '#lib/auth/permission.ts'
import { notFound } from '#lib/http/app-error.ts'
import { parseInput } from '#lib/http/parse.ts'
import { pauseSchema } from './schemas.ts'

export async function pauseSending(db: OrgDb, { input, nowMs }: { readonly input: unknown; readonly nowMs: number }): Promise<void> {
  requireRole(db, ['landlord'], 'pause sending')
  const { property: slug, sending } = parseInput(pauseSchema, input)
  await inTransaction(db, async (trx) => {
    const property = await findPropertyBySlug(trx, slug)
    if (!property) throw notFound('property')
    const pausedBefore = property.sendingPausedAtMs !== null
    const paused = sending === 'pause'
    if (paused === pausedBefore) return
    await changeSendingPaused(trx, property.id, paused ? nowMs : null)
    await addAudit(trx, {
      atMs: nowMs,
      action: sending,
      subjectKind: 'sending',
      subjectId: property.id,
      before: { paused: pausedBefore },
      after: { paused },
    })
  })
}
