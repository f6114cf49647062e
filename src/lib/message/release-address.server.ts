/** Lets letters go to an address again that had bounced. An address whose owner said "no more" is theirs to release, not ours. */
import { inTransaction, type OrgDb } from '#db/org-db.ts'
import { addAudit } from '#db/queries/audit.ts'
import { removeSuppression } from '#db/queries/suppression.ts'
import { requireRole } from '#lib/auth/permission.ts'
import { notFound } from '#lib/http/app-error.ts'
import { parseInput } from '#lib/http/parse.ts'
import { releaseSchema } from './schemas.ts'

export async function releaseAddress(db: OrgDb, { input, nowMs }: { readonly input: unknown; readonly nowMs: number }): Promise<void> {
  requireRole(db, ['landlord'], 'let letters go to an address again')
  const { email } = parseInput(releaseSchema, input)
  await inTransaction(db, async (trx) => {
    if (!(await removeSuppression(trx, { email, kind: '*', reason: 'bounce' }))) throw notFound('bounced address')
    await addAudit(trx, { atMs: nowMs, action: 'release', subjectKind: 'address', subjectId: email.toLowerCase() })
  })
}
