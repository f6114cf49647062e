/**
 * The outbox: organisation mail in `message`, account mail in `account_mail`. Written with its cause in one transaction;
 * one row per recipient and cause. Delivery goes across organisations and so takes the connection itself.
 */
import type { Kysely, Transaction } from 'kysely'
import type { MailState, MessageKind } from '../enums.ts'
import { type MessageId, newId, type PersonId, type PropertyId, type UnitId } from '../ids.ts'
import { fromJson, toJson } from '../json.ts'
import type { OrgDb, OrgTrx } from '../org-db.ts'
import type { Database } from '../schema.ts'

export interface Attachment {
  readonly contentId: string
  readonly filename: string
  readonly contentType: string
  readonly base64: string
}
export interface Letter {
  readonly toEmail: string
  readonly cause: string
  readonly subject: string
  readonly text: string
  readonly html: string
  readonly headers?: Readonly<Record<string, string>>
  readonly attachments?: readonly Attachment[]
  readonly nowMs: number
  /** Domain of the Message-ID. */
  readonly domain: string
}
export interface OrganisationLetter extends Letter {
  readonly kind: MessageKind
  readonly propertyId: PropertyId | null
  readonly unitId: UnitId | null
  readonly personId: PersonId | null
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
    state: 'queued' as const,
    attempts: 0,
    next_attempt_at_ms: letter.nowMs,
    // Fixed when queued, so that every attempt carries the same one.
    message_id: `<${id}@${letter.domain}>`,
    queued_at_ms: letter.nowMs,
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

export interface SentLetter {
  readonly id: MessageId
  readonly kind: MessageKind
  readonly toEmail: string
  readonly subject: string
  readonly text: string
  readonly html: string
  readonly state: MailState
  readonly attempts: number
  readonly queuedAtMs: number
  readonly sentAtMs: number | null
  readonly error: string | null
  readonly attachments: readonly Attachment[]
}

/** The organisation's newest mail, without bodies. */
export async function listMessages(db: OrgDb, limit: number): Promise<readonly Omit<SentLetter, 'text' | 'html' | 'attachments'>[]> {
  const rows = await db
    .selectFrom('message')
    .select([
      'message.id',
      'message.kind',
      'message.to_email',
      'message.subject',
      'message.state',
      'message.attempts',
      'message.queued_at_ms',
      'message.sent_at_ms',
      'message.error',
    ])
    .orderBy('message.queued_at_ms', 'desc')
    .limit(limit)
    .execute()
  return rows.map((row) => ({
    id: row.id,
    kind: row.kind,
    toEmail: row.to_email,
    subject: row.subject,
    state: row.state,
    attempts: row.attempts,
    queuedAtMs: row.queued_at_ms,
    sentAtMs: row.sent_at_ms,
    error: row.error,
  }))
}

export async function findMessage(db: OrgDb, id: MessageId): Promise<SentLetter | null> {
  const row = await db.selectFrom('message').where('message.id', '=', id).selectAll('message').executeTakeFirst()
  if (!row) return null
  return {
    id: row.id,
    kind: row.kind,
    toEmail: row.to_email,
    subject: row.subject,
    text: row.text,
    html: row.html,
    state: row.state,
    attempts: row.attempts,
    queuedAtMs: row.queued_at_ms,
    sentAtMs: row.sent_at_ms,
    error: row.error,
    attachments: fromJson<readonly Attachment[]>(row.attachments),
  }
}

export const OUTBOXES = ['message', 'account_mail'] as const
export type Outbox = (typeof OUTBOXES)[number]

export interface DueLetter {
  readonly outbox: Outbox
  readonly id: MessageId
  readonly messageId: string
  readonly toEmail: string
  readonly subject: string
  readonly text: string
  readonly html: string
  readonly headers: Readonly<Record<string, string>>
  readonly attachments: readonly Attachment[]
  readonly attempts: number
  readonly queuedAtMs: number
}

/** Takes the next due letter for sending: its state is `sending` before this returns. Paused properties' letters stay queued. */
export async function claimDueLetter(db: Kysely<Database>, nowMs: number): Promise<DueLetter | null> {
  for (const outbox of OUTBOXES) {
    const claimed = await db.transaction().execute(async (trx) => {
      const due =
        outbox === 'message'
          ? await trx
              .selectFrom('message')
              .leftJoin('property', (join) =>
                join.onRef('property.organisation_id', '=', 'message.organisation_id').onRef('property.id', '=', 'message.property_id'),
              )
              .where('message.state', '=', 'queued')
              .where('message.next_attempt_at_ms', '<=', nowMs)
              .where('property.sending_paused_at_ms', 'is', null)
              .selectAll('message')
              .orderBy('message.next_attempt_at_ms')
              .limit(1)
              .executeTakeFirst()
          : await trx
              .selectFrom('account_mail')
              .where('state', '=', 'queued')
              .where('next_attempt_at_ms', '<=', nowMs)
              .selectAll()
              .orderBy('next_attempt_at_ms')
              .limit(1)
              .executeTakeFirst()
      if (!due) return null
      await trx
        .updateTable(outbox)
        .set({ state: 'sending', attempts: due.attempts + 1 })
        .where('id', '=', due.id)
        .execute()
      return due
    })
    if (claimed) {
      return {
        outbox,
        id: claimed.id,
        messageId: claimed.message_id,
        toEmail: claimed.to_email,
        subject: claimed.subject,
        text: claimed.text,
        html: claimed.html,
        headers: fromJson<Record<string, string>>(claimed.headers),
        attachments: fromJson<Attachment[]>(claimed.attachments),
        attempts: claimed.attempts + 1,
        queuedAtMs: claimed.queued_at_ms,
      }
    }
  }
  return null
}

export interface Delivery {
  readonly state: MailState
  readonly error: string | null
  readonly sentAtMs: number | null
  readonly nextAttemptAtMs: number
}

export async function settleLetter(db: Kysely<Database>, letter: DueLetter, delivery: Delivery): Promise<void> {
  await db
    .updateTable(letter.outbox)
    .set({ state: delivery.state, error: delivery.error, sent_at_ms: delivery.sentAtMs, next_attempt_at_ms: delivery.nextAttemptAtMs })
    .where('id', '=', letter.id)
    .where('state', '=', 'sending')
    .execute()
}

/** Letters found in `sending` when the worker starts: nobody knows whether they left, so they are shown and not repeated. */
export async function markInterrupted(db: Kysely<Database>): Promise<number> {
  let count = 0
  for (const outbox of OUTBOXES) {
    const result = await db
      .updateTable(outbox)
      .set({ state: 'ambiguous', error: 'Sending was interrupted; it may or may not have arrived.' })
      .where('state', '=', 'sending')
      .executeTakeFirst()
    count += Number(result.numUpdatedRows)
  }
  return count
}
