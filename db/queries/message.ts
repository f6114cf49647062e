/** Mail as it is written: organisation mail in `message`, account mail in `account_mail`; one row per recipient, kind and cause. */
import type { Transaction } from 'kysely'
import type { MessageKind } from '../enums.ts'
import { type MessageId, newId, type PersonId, type PropertyId, type TenancyId, type UnitId } from '../ids.ts'
import { toJson } from '../json.ts'
import type { OrgDb, OrgTrx } from '../org-db.ts'
import type { Database } from '../schema.ts'

export interface Attachment {
  readonly contentId: string
  readonly filename: string
  readonly contentType: string
  readonly base64: string
}
/**
 * A part of a letter that only its recipient may read; a mark stands for it in the bodies. A one-use token is kept until the letter
 * has left; a signed link is kept as its claims, which open nothing without the signing key.
 */
export type PrivatePart =
  | { readonly token: string }
  | {
      readonly claims: { readonly purpose: string; readonly expiresAtMs: number; readonly subject: Readonly<Record<string, string>> }
    }
  | { readonly removed: true }

export interface Letter {
  readonly toEmail: string
  readonly cause: string
  readonly subject: string
  readonly text: string
  readonly html: string
  readonly headers?: Readonly<Record<string, string>>
  readonly attachments?: readonly Attachment[]
  readonly privateParts?: readonly PrivatePart[]
  readonly nowMs: number
  /** From then on it is of no use and is not sent; without it, it stays true. */
  readonly expiresAtMs?: number
  /** Domain of the Message-ID. */
  readonly domain: string
}
export interface OrganisationLetter extends Letter {
  readonly kind: MessageKind
  readonly propertyId: PropertyId | null
  readonly unitId: UnitId | null
  readonly personId: PersonId | null
  /** Of the tenant it tells about their unit: their choice of tips holds for it. */
  readonly tenancyId?: TenancyId
}
export type Queued = 'queued' | 'already-queued'

function outboxRow(letter: Letter) {
  const id = newId<MessageId>()
  return {
    id,
    to_email: letter.toEmail.toLowerCase(),
    cause: letter.cause,
    subject: letter.subject,
    text: letter.text,
    html: letter.html,
    headers: toJson(letter.headers ?? {}),
    attachments: toJson(letter.attachments ?? []),
    private_parts: toJson(letter.privateParts ?? []),
    state: 'queued' as const,
    attempts: 0,
    next_attempt_at_ms: letter.nowMs,
    // Fixed when queued, so that every attempt carries the same one.
    message_id: `<${id}@${letter.domain}>`,
    queued_at_ms: letter.nowMs,
    expires_at_ms: letter.expiresAtMs ?? null,
    sent_at_ms: null,
    error: null,
  }
}

export async function addMessage(db: OrgTrx, letter: OrganisationLetter): Promise<Queued> {
  const row = {
    ...outboxRow(letter),
    kind: letter.kind,
    property_id: letter.propertyId,
    unit_id: letter.unitId,
    person_id: letter.personId,
    tenancy_id: letter.tenancyId ?? null,
  }
  const result = await db
    .insertInto('message', row)
    .onConflict((conflict) => conflict.doNothing())
    .executeTakeFirst()
  return result.numInsertedOrUpdatedRows ? 'queued' : 'already-queued'
}

export async function addAccountMail(trx: Transaction<Database>, letter: Letter & { readonly kind: string }): Promise<Queued> {
  const result = await trx
    .insertInto('account_mail')
    .values({ ...outboxRow(letter), kind: letter.kind })
    .onConflict((conflict) => conflict.doNothing())
    .executeTakeFirst()
  return result.numInsertedOrUpdatedRows ? 'queued' : 'already-queued'
}

/** The cause of the newest letter of a kind to an address whose cause begins with `prefix`, and when it was written; one that never left does not count. */
export async function findLastCause(
  db: OrgTrx,
  { toEmail, kind, prefix }: { readonly toEmail: string; readonly kind: MessageKind; readonly prefix: string },
): Promise<{ readonly cause: string; readonly queuedAtMs: number } | null> {
  const row = await db
    .selectFrom('message')
    .where('message.to_email', '=', toEmail.toLowerCase())
    .where('message.kind', '=', kind)
    .where('message.cause', '>=', prefix)
    .where('message.cause', '<', `${prefix}\uffff`)
    .where('message.state', 'not in', ['expired', 'suppressed', 'failed', 'bounced'])
    .select(['message.cause', 'message.queued_at_ms'])
    .orderBy('message.queued_at_ms', 'desc')
    .limit(1)
    .executeTakeFirst()
  return row ? { cause: row.cause, queuedAtMs: row.queued_at_ms } : null
}

/** Whose tenancies a letter of this kind and cause was written to, whatever became of it. */
export async function listToldTenancies(
  db: OrgDb,
  { kind, cause }: { readonly kind: MessageKind; readonly cause: string },
): Promise<ReadonlySet<TenancyId>> {
  const rows = await db
    .selectFrom('message')
    .where('message.kind', '=', kind)
    .where('message.cause', '=', cause)
    .select('message.tenancy_id')
    .execute()
  return new Set(rows.flatMap((row) => (row.tenancy_id ? [row.tenancy_id] : [])))
}
