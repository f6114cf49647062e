/** `message`: the organisation's mail: queued with its cause in one transaction, sent at most once per recipient and cause. */
import type { Insertable, Selectable, Updateable } from 'kysely'
import type { OrganisationId, PersonId, PropertyId, UnitId, TenancyId, MessageId } from '../ids.ts'
import type { MailState, MessageKind } from '../enums.ts'

export interface MessageTable {
  organisation_id: OrganisationId
  id: MessageId
  property_id: PropertyId | null
  unit_id: UnitId | null
  /** Of the tenant it tells about their unit. */
  tenancy_id: TenancyId | null
  person_id: PersonId | null
  to_email: string
  kind: MessageKind
  cause: string
  subject: string
  text: string
  html: string
  headers: string
  attachments: string
  /** What only the recipient may read, in the order of the marks that stand for it in the bodies. */
  private_parts: string
  /** After it the letter is of no use and is not sent any more. */
  expires_at_ms: number | null
  state: MailState
  attempts: number
  next_attempt_at_ms: number
  message_id: string
  queued_at_ms: number
  sent_at_ms: number | null
  error: string | null
}

export type MessageRow = Selectable<MessageTable>
export type NewMessage = Insertable<MessageTable>
export type MessagePatch = Updateable<MessageTable>
