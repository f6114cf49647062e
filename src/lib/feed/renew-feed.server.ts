/** Gives a tenancy a secret calendar address, a new one in the place of an old one, which answers "not found" from then on. */
import { inTransaction, type OrgDb } from '#db/org-db.ts'
import { addAudit } from '#db/queries/audit.ts'
import { replaceFeed } from '#db/queries/feed.ts'
import { openTenancy, type TenancyChoice } from '#lib/tip/own-tenancy.server.ts'

/** Only the tenant: the address is theirs, and `openTenancy` lets nobody else in. */
export async function renewFeed(db: OrgDb, { tenancyId, nowMs }: TenancyChoice): Promise<void> {
  const { tenancy } = await openTenancy(db, { tenancyId, nowMs })
  await inTransaction(db, async (trx) => {
    await replaceFeed(trx, tenancy.id, nowMs)
    await addAudit(trx, { atMs: nowMs, action: 'renew', subjectKind: 'calendar', subjectId: tenancy.id })
  })
}
