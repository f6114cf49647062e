/** Mail as it leaves: letters of all organisations and of accounts, claimed one at a time. Delivery belongs to nobody, so it takes the connection itself. */
import type { Kysely } from 'kysely'
import type { MailState } from '../enums.ts'
import { fromJson } from '../json.ts'
import type { Database } from '../schema.ts'
import type { Attachment } from './message.ts'

/** Account mail goes first: somebody waits in front of a form for it. */
export const OUTBOXES = ['account_mail', 'message'] as const
export type Outbox = (typeof OUTBOXES)[number]

export interface DueLetter {
  readonly outbox: Outbox
  readonly messageId: string
  readonly toEmail: string
  readonly subject: string
  readonly text: string
  readonly html: string
  readonly headers: Readonly<Record<string, string>>
  readonly attachments: readonly Attachment[]
  /** This attempt included. */
  readonly attempts: number
  readonly queuedAtMs: number
}

const COLUMNS = ['message_id', 'to_email', 'subject', 'text', 'html', 'headers', 'attachments', 'attempts', 'queued_at_ms'] as const

const nextOf = {
  account_mail: (db: Kysely<Database>, nowMs: number) =>
    db
      .selectFrom('account_mail')
      .select(COLUMNS)
      .where('state', '=', 'queued')
      .where('next_attempt_at_ms', '<=', nowMs)
      .orderBy('next_attempt_at_ms')
      .limit(1),
  // A property whose sending is paused keeps its letters queued.
  message: (db: Kysely<Database>, nowMs: number) =>
    db
      .selectFrom('message')
      .leftJoin('property', (join) =>
        join.onRef('property.organisation_id', '=', 'message.organisation_id').onRef('property.id', '=', 'message.property_id'),
      )
      .select(COLUMNS.map((column) => `message.${column}` as const))
      .where('message.state', '=', 'queued')
      .where('message.next_attempt_at_ms', '<=', nowMs)
      .where('property.sending_paused_at_ms', 'is', null)
      .orderBy('message.next_attempt_at_ms')
      .limit(1),
}

/** Takes the next due letter for sending: its state `sending` is committed before this returns. */
export async function claimDueLetter(db: Kysely<Database>, nowMs: number): Promise<DueLetter | null> {
  for (const outbox of OUTBOXES) {
    const row = await db.transaction().execute(async (trx) => {
      const due = await nextOf[outbox](trx, nowMs).executeTakeFirst()
      if (!due) return null
      await trx
        .updateTable(outbox)
        .set({ state: 'sending', attempts: due.attempts + 1 })
        .where('message_id', '=', due.message_id)
        .execute()
      return due
    })
    if (row) {
      return {
        outbox,
        messageId: row.message_id,
        toEmail: row.to_email,
        subject: row.subject,
        text: row.text,
        html: row.html,
        headers: fromJson<Record<string, string>>(row.headers),
        attachments: fromJson<Attachment[]>(row.attachments),
        attempts: row.attempts + 1,
        queuedAtMs: row.queued_at_ms,
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

/** Writes how an attempt ended; an attempt that was meanwhile given up as interrupted stays so. */
export async function settleLetter(db: Kysely<Database>, letter: DueLetter, delivery: Delivery): Promise<void> {
  await db
    .updateTable(letter.outbox)
    .set({ state: delivery.state, error: delivery.error, sent_at_ms: delivery.sentAtMs, next_attempt_at_ms: delivery.nextAttemptAtMs })
    .where('message_id', '=', letter.messageId)
    .where('state', '=', 'sending')
    .where('attempts', '=', letter.attempts)
    .execute()
}

/** Letters found in `sending` while nobody sends: nobody knows whether they left, so they are shown and not repeated. */
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

/** Whether a round of delivery has anything to do; reads only. */
export async function hasWork(db: Kysely<Database>, nowMs: number): Promise<boolean> {
  for (const outbox of OUTBOXES) {
    const due = await nextOf[outbox](db, nowMs).executeTakeFirst()
    const interrupted = await db.selectFrom(outbox).select('message_id').where('state', '=', 'sending').limit(1).executeTakeFirst()
    if (due ?? interrupted) return true
  }
  return false
}
