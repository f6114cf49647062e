/** Takes a tenancy's calendar address away: programs that still ask for it are told "not found". */
import { inTransaction, type OrgDb } from '#db/org-db.ts'
import { addAudit } from '#db/queries/audit.ts'
import { removeFeed } from '#db/queries/feed.ts'
import { openTenancy, type TenancyChoice } from '#lib/tip/own-tenancy.server.ts'

export async function stopFeed(db: OrgDb, { tenancyId, nowMs }: TenancyChoice): Promise<void> {
  const { tenancy } = await openTenancy(db, { tenancyId, nowMs })
  await inTransaction(db, async (trx) => {
    await removeFeed(trx, tenancy.id)
    await addAudit(trx, { atMs: nowMs, action: 'stop', subjectKind: 'calendar', subjectId: tenancy.id })
  })
}
