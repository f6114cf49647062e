/** `account_mail`: mail that belongs to a person and no organisation: confirmation and reset. */
import type { Insertable, Selectable, Updateable } from 'kysely'
import type { MessageId } from '../ids.ts'
import type { MailState } from '../enums.ts'

export interface AccountMailTable {
  id: MessageId
  to_email: string
  kind: string
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

export type AccountMailRow = Selectable<AccountMailTable>
export type NewAccountMail = Insertable<AccountMailTable>
export type AccountMailPatch = Updateable<AccountMailTable>
