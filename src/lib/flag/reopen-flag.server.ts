/** Takes a dismissal back: the flag is open again, as old as it was. */
import { parseFlagId } from '#db/ids.ts'
import { inTransaction, type OrgDb } from '#db/org-db.ts'
import { addAudit } from '#db/queries/audit.ts'
import { findFlag, listOpenFlags, openFlagAgain } from '#db/queries/flag.ts'
import { requireRole } from '#lib/auth/permission.ts'
import { AppError, notFound } from '#lib/http/app-error.ts'
import { parseInput } from '#lib/http/parse.ts'
import { reopenSchema } from './schemas.ts'

export async function reopenFlag(db: OrgDb, { input, nowMs }: { readonly input: unknown; readonly nowMs: number }): Promise<void> {
  requireRole(db, ['landlord'], 'reopen a flag')
  const id = parseFlagId(parseInput(reopenSchema, input).flagId)
  await inTransaction(db, async (trx) => {
    const flag = id && (await findFlag(trx, id))
    if (!flag) throw notFound('flag')
    if (!flag.closed) throw new AppError('conflict', 'This flag is open already. Nothing was changed; load the page again.')
    if (flag.closed.because === 'computation') {
      throw new AppError(
        'conflict',
        'The computation closed this flag because it no longer finds it. It opens again by itself when it does.',
      )
    }
    const open = await listOpenFlags(trx, { propertyId: flag.propertyId })
    if (open.some((other) => other.unitId === flag.unitId && other.kind === flag.kind)) {
      throw new AppError('conflict', 'The same finding is open already as a newer flag. Nothing was changed.')
    }
    await openFlagAgain(trx, flag.id)
    await addAudit(trx, {
      atMs: nowMs,
      action: 'flag.reopen',
      subjectKind: 'flag',
      subjectId: flag.id,
      before: { note: flag.closed.note, untilDay: flag.closed.untilDay },
    })
  })
}
