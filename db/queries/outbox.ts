/** Mail as it leaves: letters of all organisations and of accounts, claimed one at a time. Delivery belongs to nobody, so it takes the connection itself. */
import type { Kysely, Transaction } from 'kysely'
import type { MailState, MessageKind } from '../enums.ts'
import { fromJson, toJson } from '../json.ts'
import type { Database } from '../schema.ts'
import type { Attachment, PrivatePart } from './message.ts'

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
  readonly privateParts: readonly PrivatePart[]
  /** This attempt included. */
  readonly attempts: number
  readonly queuedAtMs: number
}

const COLUMNS = [
  'message_id',
  'to_email',
  'subject',
  'text',
  'html',
  'headers',
  'attachments',
  'private_parts',
  'attempts',
  'queued_at_ms',
] as const

const nextOf = {
  account_mail: (db: Kysely<Database>, nowMs: number) =>
    db
      .selectFrom('account_mail')
      .select(COLUMNS)
      .where('state', '=', 'queued')
      .where('next_attempt_at_ms', '<=', nowMs)
      .where((eb) => eb.or([eb('expires_at_ms', 'is', null), eb('expires_at_ms', '>', nowMs)]))
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
      .where((eb) => eb.or([eb('message.expires_at_ms', 'is', null), eb('message.expires_at_ms', '>', nowMs)]))
      .where('property.sending_paused_at_ms', 'is', null)
      .orderBy('message.next_attempt_at_ms')
      .limit(1),
}

export type Claim =
  | { readonly kind: 'send'; readonly letter: DueLetter }
  /** Its address gets none of these: settled as `suppressed` without a word to the mail server. */
  | { readonly kind: 'suppressed' }

/** Takes the next due letter for sending: its state `sending` is committed before this returns. */
export async function claimDueLetter(db: Kysely<Database>, nowMs: number): Promise<Claim | null> {
  for (const outbox of OUTBOXES) {
    const claim = await db.transaction().execute((trx) => claimOf(trx, outbox, nowMs))
    if (claim) return claim
  }
  return null
}

async function claimOf(trx: Transaction<Database>, outbox: Outbox, nowMs: number): Promise<Claim | null> {
  const due = await nextOf[outbox](trx, nowMs).executeTakeFirst()
  if (!due) return null
  const suppressedBy = outbox === 'message' ? await suppressedBecause(trx, due.message_id) : null
  if (suppressedBy !== null) {
    await trx
      .updateTable(outbox)
      .set({ state: 'suppressed', error: suppressedBy, private_parts: withoutTokens(due.private_parts) })
      .where('message_id', '=', due.message_id)
      .execute()
    return { kind: 'suppressed' }
  }
  const attempts = due.attempts + 1
  await trx.updateTable(outbox).set({ state: 'sending', attempts }).where('message_id', '=', due.message_id).execute()
  return {
    kind: 'send',
    letter: {
      outbox,
      messageId: due.message_id,
      toEmail: due.to_email,
      subject: due.subject,
      text: due.text,
      html: due.html,
      headers: fromJson<Record<string, string>>(due.headers),
      attachments: fromJson<Attachment[]>(due.attachments),
      privateParts: fromJson<PrivatePart[]>(due.private_parts),
      attempts,
      queuedAtMs: due.queued_at_ms,
    },
  }
}

/** What a tenant's choice of tips holds for. */
const TENANT_LETTERS: readonly MessageKind[] = ['tip', 'schedule-changed']

async function suppressedBecause(trx: Transaction<Database>, messageId: string): Promise<string | null> {
  const tenancy = await trx
    .selectFrom('message')
    .innerJoin('tenancy', (join) =>
      join.onRef('tenancy.organisation_id', '=', 'message.organisation_id').onRef('tenancy.id', '=', 'message.tenancy_id'),
    )
    .where('message.message_id', '=', messageId)
    .where('message.kind', 'in', TENANT_LETTERS)
    .where('tenancy.tips', '=', 'never')
    .select('tenancy.id')
    .executeTakeFirst()
  if (tenancy) return 'The tenant asked for no more of these.'
  const row = await trx
    .selectFrom('message')
    .innerJoin('suppression', (join) =>
      join
        .onRef('suppression.organisation_id', '=', 'message.organisation_id')
        .onRef('suppression.email', '=', 'message.to_email')
        .on((eb) => eb.or([eb('suppression.kind', '=', '*'), eb('suppression.kind', '=', eb.ref('message.kind'))])),
    )
    .where('message.message_id', '=', messageId)
    .select('suppression.detail')
    .executeTakeFirst()
  return row?.detail ?? null
}

/** One-use tokens go with the letter; what a landlord or a copy of the database shows afterwards opens nothing. */
const withoutTokens = (privateParts: string): string =>
  toJson(fromJson<PrivatePart[]>(privateParts).map((part): PrivatePart => ('claims' in part ? part : { removed: true })))

export interface Delivery {
  readonly state: MailState
  readonly error: string | null
  readonly sentAtMs: number | null
  readonly nextAttemptAtMs: number
}
/** Why an address gets no more letters of the organisation whose letter it refused. */
export interface Refusal {
  readonly detail: string
  readonly atMs: number
}

/** Writes how an attempt ended; an attempt that was meanwhile given up as interrupted stays so. */
export async function settleLetter(
  db: Kysely<Database>,
  letter: Pick<DueLetter, 'outbox' | 'messageId' | 'attempts' | 'privateParts'>,
  delivery: Delivery & { readonly suppress?: Refusal | null },
): Promise<void> {
  const { state, error, sentAtMs, nextAttemptAtMs, suppress } = delivery
  await db.transaction().execute(async (trx) => {
    const result = await trx
      .updateTable(letter.outbox)
      .set({
        state,
        error,
        sent_at_ms: sentAtMs,
        next_attempt_at_ms: nextAttemptAtMs,
        ...(state === 'queued' ? {} : { private_parts: withoutTokens(toJson(letter.privateParts)) }),
      })
      .where('message_id', '=', letter.messageId)
      .where('state', '=', 'sending')
      .where('attempts', '=', letter.attempts)
      .executeTakeFirst()
    if (suppress && letter.outbox === 'message' && result.numUpdatedRows > 0n) await suppressAddress(trx, letter.messageId, suppress)
  })
}

/** An address that refused one organisation's letter says nothing about another's, which must not learn of it either. */
async function suppressAddress(trx: Transaction<Database>, messageId: string, { detail, atMs }: Refusal): Promise<void> {
  const row = await trx
    .selectFrom('message')
    .where('message_id', '=', messageId)
    .select(['organisation_id', 'to_email'])
    .executeTakeFirstOrThrow()
  await trx
    .insertInto('suppression')
    .values({ organisation_id: row.organisation_id, email: row.to_email, kind: '*', reason: 'bounce', detail, at_ms: atMs })
    .onConflict((conflict) => conflict.doNothing())
    .execute()
}

/** Letters found in `sending` while nobody sends: nobody knows whether they left, so they are shown and not repeated. */
export const markInterrupted = (trx: Transaction<Database>): Promise<number> =>
  endAll(trx, { in: 'sending' }, { state: 'ambiguous', error: 'Sending was interrupted; it may or may not have arrived.' })

/** Letters that are out of date before they could leave, whatever held them. */
export const markExpired = (trx: Transaction<Database>, nowMs: number): Promise<number> =>
  endAll(trx, { in: 'queued', expiredBy: nowMs }, { state: 'expired', error: null })

async function endAll(
  trx: Transaction<Database>,
  which: { readonly in: MailState; readonly expiredBy?: number },
  end: { readonly state: MailState; readonly error: string | null },
): Promise<number> {
  let count = 0
  for (const outbox of OUTBOXES) {
    let query = trx.selectFrom(outbox).where('state', '=', which.in).select(['message_id', 'private_parts'])
    if (which.expiredBy !== undefined) query = query.where('expires_at_ms', '<=', which.expiredBy)
    for (const row of await query.execute()) {
      await trx
        .updateTable(outbox)
        .set({ ...end, private_parts: withoutTokens(row.private_parts) })
        .where('message_id', '=', row.message_id)
        .execute()
      count++
    }
  }
  return count
}

/** Whether a round of delivery has anything to do; reads only. */
export async function hasWork(db: Kysely<Database>, nowMs: number): Promise<boolean> {
  for (const outbox of OUTBOXES) {
    const letters = db.selectFrom(outbox).select('message_id').limit(1)
    const due = await nextOf[outbox](db, nowMs).executeTakeFirst()
    const interrupted = await letters.where('state', '=', 'sending').executeTakeFirst()
    const expired = await letters.where('state', '=', 'queued').where('expires_at_ms', '<=', nowMs).executeTakeFirst()
    if (due ?? interrupted ?? expired) return true
  }
  return false
}

export type Bounced = 'recorded' | 'already-recorded' | 'no-such-letter'

/** A report that came after the letter had left. */
export async function recordBounce(
  db: Kysely<Database>,
  { messageId, error, suppress }: { readonly messageId: string; readonly error: string; readonly suppress: Refusal | null },
): Promise<Bounced> {
  return db.transaction().execute(async (trx) => {
    for (const outbox of OUTBOXES) {
      const row = await trx.selectFrom(outbox).where('message_id', '=', messageId).select('state').executeTakeFirst()
      if (!row) continue
      if (row.state !== 'sent' && row.state !== 'ambiguous') return 'already-recorded'
      await trx.updateTable(outbox).set({ state: 'bounced', error }).where('message_id', '=', messageId).execute()
      if (suppress && outbox === 'message') await suppressAddress(trx, messageId, suppress)
      return 'recorded'
    }
    return 'no-such-letter'
  })
}
