/** Mail as it is written and shown: organisation mail in `message`, account mail in `account_mail`; one row per recipient, kind and cause. */
import type { Transaction } from 'kysely'
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

export interface MessageSummary {
  readonly id: MessageId
  readonly kind: MessageKind
  readonly toEmail: string
  readonly subject: string
  readonly state: MailState
  readonly attempts: number
  readonly queuedAtMs: number
  readonly nextAttemptAtMs: number
  readonly sentAtMs: number | null
  readonly error: string | null
  /** The property it is about, if it is about one. */
  readonly property: { readonly name: string; readonly zone: string; readonly sendingPausedAtMs: number | null } | null
}
export interface MessageAsSent extends MessageSummary {
  readonly text: string
  readonly html: string
  readonly attachments: readonly Attachment[]
}

const withProperty = (db: OrgDb) =>
  db
    .selectFrom('message')
    .leftJoin('property', (join) =>
      join.onRef('property.organisation_id', '=', 'message.organisation_id').onRef('property.id', '=', 'message.property_id'),
    )
    .select([
      'message.id',
      'message.kind',
      'message.to_email',
      'message.subject',
      'message.state',
      'message.attempts',
      'message.queued_at_ms',
      'message.next_attempt_at_ms',
      'message.sent_at_ms',
      'message.error',
      'property.name as property_name',
      'property.zone as property_zone',
      'property.sending_paused_at_ms as property_paused_at_ms',
    ])

type SummaryRow = Awaited<ReturnType<ReturnType<typeof withProperty>['execute']>>[number]

const toSummary = (row: SummaryRow): MessageSummary => ({
  id: row.id,
  kind: row.kind,
  toEmail: row.to_email,
  subject: row.subject,
  state: row.state,
  attempts: row.attempts,
  queuedAtMs: row.queued_at_ms,
  nextAttemptAtMs: row.next_attempt_at_ms,
  sentAtMs: row.sent_at_ms,
  error: row.error,
  property:
    row.property_name === null || row.property_zone === null
      ? null
      : { name: row.property_name, zone: row.property_zone, sendingPausedAtMs: row.property_paused_at_ms },
})

/** The organisation's newest mail, without bodies. */
export async function listMessages(db: OrgDb, limit: number): Promise<readonly MessageSummary[]> {
  const rows = await withProperty(db).orderBy('message.queued_at_ms', 'desc').orderBy('message.id').limit(limit).execute()
  return rows.map(toSummary)
}

export async function countMessagesByState(db: OrgDb): Promise<Readonly<Partial<Record<MailState, number>>>> {
  const rows = await db
    .selectFrom('message')
    .select((eb) => ['message.state', eb.fn.countAll<number>().as('count')])
    .groupBy('message.state')
    .execute()
  return Object.fromEntries(rows.map((row) => [row.state, row.count]))
}

export async function findMessage(db: OrgDb, id: MessageId): Promise<MessageAsSent | null> {
  const row = await withProperty(db)
    .select(['message.text', 'message.html', 'message.attachments'])
    .where('message.id', '=', id)
    .executeTakeFirst()
  if (!row) return null
  return { ...toSummary(row), text: row.text, html: row.html, attachments: fromJson<readonly Attachment[]>(row.attachments) }
}
