/** What a tenant was last told by mail, to say whether anything has changed since. */
import type { TenancyId } from '../ids.ts'
import type { OrgDb } from '../org-db.ts'

export interface ToldTip {
  /** The local day it was about. */
  readonly day: string
  readonly subject: string
}

const DAY_LENGTH = '2026-12-02'.length

/** The cause of a tip's letter: one a tenancy and day. */
export const tipCause = (tenancyId: TenancyId, day: string): string => `${tenancyId}:${day}`

/** The newest tip to a tenant about a day before `beforeDay`; `null` when there was none, or their address is a new one. */
export async function findLastTip(
  db: OrgDb,
  { id: tenancyId, email }: { readonly id: TenancyId; readonly email: string },
  beforeDay: string,
): Promise<ToldTip | null> {
  const row = await db
    .selectFrom('message')
    .where('message.to_email', '=', email.toLowerCase())
    .where('message.kind', '=', 'tip')
    .where('message.cause', '>=', tipCause(tenancyId, ''))
    .where('message.cause', '<', tipCause(tenancyId, beforeDay))
    .select(['message.cause', 'message.subject'])
    .orderBy('message.cause', 'desc')
    .limit(1)
    .executeTakeFirst()
  // A tip that was sent again carries more behind its day.
  const from = tipCause(tenancyId, '').length
  return row ? { day: row.cause.slice(from, from + DAY_LENGTH), subject: row.subject } : null
}
