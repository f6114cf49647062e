/** What the Post page shows: the newest letters with their state, and one of them as it is sent. */
import type { MailState } from '#db/enums.ts'
import { parseMessageId } from '#db/ids.ts'
import type { OrgDb } from '#db/org-db.ts'
import { countMessagesByState, findMessage, listMessages, type MessageAsSent, type MessageSummary } from '#db/queries/message.ts'
import { requireRole } from '#lib/auth/permission.ts'
import { notFound } from '#lib/http/app-error.ts'
import { withInlineImages } from '#lib/mail/inline-images.ts'

/** About a month of a building of 60 units. */
export const MOST_MESSAGES = 500

export interface PostPage {
  readonly messages: readonly MessageSummary[]
  readonly total: number
  readonly counts: Readonly<Partial<Record<MailState, number>>>
  readonly opened: MessageAsSent | null
}

export async function loadMessages(db: OrgDb, { messageId }: { readonly messageId: string | null }): Promise<PostPage> {
  requireRole(db, ['landlord'], 'read the post')
  const opened = messageId === null ? null : await openMessage(db, messageId)
  const counts = await countMessagesByState(db)
  const total = Object.values(counts).reduce((sum, count) => sum + count, 0)
  return { messages: await listMessages(db, MOST_MESSAGES), total, counts, opened }
}

async function openMessage(db: OrgDb, messageId: string): Promise<MessageAsSent> {
  const id = parseMessageId(messageId)
  const message = id ? await findMessage(db, id) : null
  if (!message) throw notFound('message')
  return { ...message, html: withInlineImages(message.html, message.attachments) }
}
