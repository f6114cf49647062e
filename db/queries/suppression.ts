/** Addresses that an organisation sends nothing to, or nothing of one kind: after a bounce, or because their owner said so. */
import type { MessageKind } from '../enums.ts'
import type { OrgDb, OrgTrx } from '../org-db.ts'
import type { SuppressionTable } from '../tables/suppression.ts'

export interface Suppression {
  readonly email: string
  /** `*`: every kind. */
  readonly kind: MessageKind | '*'
  readonly reason: SuppressionTable['reason']
  readonly detail: string
  readonly atMs: number
}

/** The first word stays: when it began. */
export async function addSuppression(db: OrgTrx, { email, kind, reason, detail, atMs }: Suppression): Promise<void> {
  await db
    .insertInto('suppression', { email: email.toLowerCase(), kind, reason, detail, at_ms: atMs })
    .onConflict((conflict) => conflict.doNothing())
    .execute()
}

/** Whether there was one to remove. */
export async function removeSuppression(
  db: OrgTrx,
  { email, kind, reason }: Pick<Suppression, 'email' | 'kind' | 'reason'>,
): Promise<boolean> {
  const result = await db
    .deleteFrom('suppression')
    .where('email', '=', email.toLowerCase())
    .where('kind', '=', kind)
    .where('reason', '=', reason)
    .executeTakeFirst()
  return result.numDeletedRows > 0n
}

export async function listSuppressions(db: OrgDb): Promise<readonly Suppression[]> {
  const rows = await db.selectFrom('suppression').selectAll('suppression').orderBy('suppression.at_ms', 'desc').execute()
  return rows.map((row) => ({ email: row.email, kind: row.kind, reason: row.reason, detail: row.detail, atMs: row.at_ms }))
}

/** What keeps a letter of a kind from an address; `null` = nothing. */
export async function findSuppression(db: OrgDb, email: string, kind: MessageKind): Promise<Suppression | null> {
  const row = await db
    .selectFrom('suppression')
    .where('suppression.email', '=', email.toLowerCase())
    .where('suppression.kind', 'in', ['*', kind])
    .selectAll('suppression')
    .executeTakeFirst()
  return row ? { email: row.email, kind: row.kind, reason: row.reason, detail: row.detail, atMs: row.at_ms } : null
}

/** Addresses that asked for no more letters of a kind. */
export async function unsubscribedFrom(db: OrgDb, kind: MessageKind): Promise<ReadonlySet<string>> {
  const rows = await db
    .selectFrom('suppression')
    .where('suppression.kind', '=', kind)
    .where('suppression.reason', '=', 'unsubscribe')
    .select('suppression.email')
    .execute()
  return new Set(rows.map((row) => row.email))
}
