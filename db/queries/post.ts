/** Organisation mail as its landlord reads it: narrowed, a page at a time, one letter opened. */
import type { MailState, MessageKind } from '../enums.ts'
import type { MessageId, PersonId, PropertyId, TenancyId, UnitId } from '../ids.ts'
import { fromJson } from '../json.ts'
import type { OrgDb } from '../org-db.ts'
import type { Attachment, PrivatePart } from './message.ts'

export interface MessageSummary {
  readonly id: MessageId
  readonly kind: MessageKind
  readonly toEmail: string
  readonly subject: string
  readonly state: MailState
  readonly attempts: number
  readonly queuedAtMs: number
  readonly nextAttemptAtMs: number
  readonly expiresAtMs: number | null
  readonly sentAtMs: number | null
  readonly error: string | null
  readonly unitCode: string | null
  /** The property it is about, if it is about one. */
  readonly property: { readonly name: string; readonly zone: string; readonly sendingPausedAtMs: number | null } | null
}
/** What narrows the post; `null` = all. */
export interface PostFilter {
  readonly states: readonly MailState[] | null
  readonly kind: MessageKind | null
  readonly propertyId: PropertyId | null
  readonly unitCode: string | null
}

const withPlace = (db: OrgDb) =>
  db
    .selectFrom('message')
    .leftJoin('property', (join) =>
      join.onRef('property.organisation_id', '=', 'message.organisation_id').onRef('property.id', '=', 'message.property_id'),
    )
    .leftJoin('unit', (join) => join.onRef('unit.organisation_id', '=', 'message.organisation_id').onRef('unit.id', '=', 'message.unit_id'))

function narrowed(db: OrgDb, { states, kind, propertyId, unitCode }: PostFilter) {
  let query = withPlace(db)
  if (states) query = query.where('message.state', 'in', states)
  if (kind) query = query.where('message.kind', '=', kind)
  if (propertyId) query = query.where('message.property_id', '=', propertyId)
  if (unitCode) query = query.where((eb) => eb(eb.fn<string>('lower', ['unit.code']), '=', unitCode.toLowerCase()))
  return query
}

const COLUMNS = [
  'message.id',
  'message.kind',
  'message.to_email',
  'message.subject',
  'message.state',
  'message.attempts',
  'message.queued_at_ms',
  'message.next_attempt_at_ms',
  'message.expires_at_ms',
  'message.sent_at_ms',
  'message.error',
  'unit.code as unit_code',
  'property.name as property_name',
  'property.zone as property_zone',
  'property.sending_paused_at_ms as property_paused_at_ms',
] as const
const summaries = (db: OrgDb, filter: PostFilter) => narrowed(db, filter).select(COLUMNS)
type SummaryRow = Awaited<ReturnType<ReturnType<typeof summaries>['execute']>>[number]

const toSummary = (row: SummaryRow): MessageSummary => ({
  id: row.id,
  kind: row.kind,
  toEmail: row.to_email,
  subject: row.subject,
  state: row.state,
  attempts: row.attempts,
  queuedAtMs: row.queued_at_ms,
  nextAttemptAtMs: row.next_attempt_at_ms,
  expiresAtMs: row.expires_at_ms,
  sentAtMs: row.sent_at_ms,
  error: row.error,
  unitCode: row.unit_code,
  property:
    row.property_name === null || row.property_zone === null
      ? null
      : { name: row.property_name, zone: row.property_zone, sendingPausedAtMs: row.property_paused_at_ms },
})

/** One page of the organisation's mail, newest first, without bodies. */
export async function listMessages(
  db: OrgDb,
  filter: PostFilter,
  page: { readonly limit: number; readonly offset: number },
): Promise<readonly MessageSummary[]> {
  const rows = await summaries(db, filter)
    .orderBy('message.queued_at_ms', 'desc')
    .orderBy('message.id')
    .limit(page.limit)
    .offset(page.offset)
    .execute()
  return rows.map(toSummary)
}

export async function countMessagesByState(db: OrgDb, filter: PostFilter): Promise<Readonly<Partial<Record<MailState, number>>>> {
  const rows = await narrowed(db, filter)
    .select((eb) => ['message.state', eb.fn.countAll<number>().as('count')])
    .groupBy('message.state')
    .execute()
  return Object.fromEntries(rows.map((row) => [row.state, row.count]))
}

export interface StoredMessage extends MessageSummary {
  readonly text: string
  readonly html: string
  readonly headers: Readonly<Record<string, string>>
  readonly attachments: readonly Attachment[]
  readonly privateParts: readonly PrivatePart[]
  readonly cause: string
  readonly propertyId: PropertyId | null
  readonly unitId: UnitId | null
  readonly personId: PersonId | null
  readonly tenancyId: TenancyId | null
}

const ALL: PostFilter = { states: null, kind: null, propertyId: null, unitCode: null }

export async function findMessage(db: OrgDb, id: MessageId): Promise<StoredMessage | null> {
  const row = await summaries(db, ALL)
    .select(['message.text', 'message.html', 'message.headers', 'message.attachments', 'message.private_parts'])
    .select(['message.cause', 'message.property_id', 'message.unit_id', 'message.person_id', 'message.tenancy_id'])
    .where('message.id', '=', id)
    .executeTakeFirst()
  if (!row) return null
  return {
    ...toSummary(row),
    text: row.text,
    html: row.html,
    headers: fromJson<Record<string, string>>(row.headers),
    attachments: fromJson<readonly Attachment[]>(row.attachments),
    privateParts: fromJson<readonly PrivatePart[]>(row.private_parts),
    cause: row.cause,
    propertyId: row.property_id,
    unitId: row.unit_id,
    personId: row.person_id,
    tenancyId: row.tenancy_id,
  }
}

/** How the organisation's letters went since `sinceMs`, by state, and when the last one left. */
export async function summariseDelivery(
  db: OrgDb,
  sinceMs: number,
): Promise<{ readonly lastSentAtMs: number | null; readonly counts: Readonly<Partial<Record<MailState, number>>> }> {
  const last = await db
    .selectFrom('message')
    .select((eb) => eb.fn.max('message.sent_at_ms').as('at_ms'))
    .executeTakeFirst()
  const rows = await db
    .selectFrom('message')
    .where('message.queued_at_ms', '>=', sinceMs)
    .select((eb) => ['message.state', eb.fn.countAll<number>().as('count')])
    .groupBy('message.state')
    .execute()
  return { lastSentAtMs: last?.at_ms ?? null, counts: Object.fromEntries(rows.map((row) => [row.state, row.count])) }
}
