/** What the Post page shows: letters with their state, narrowed as the address says; one of them as it is sent, its private links hidden. */
import type { MailState } from '#db/enums.ts'
import { parseMessageId } from '#db/ids.ts'
import type { OrgDb } from '#db/org-db.ts'
import { countMessagesByState, findMessage, listMessages, type MessageSummary, type PostFilter } from '#db/queries/post.ts'
import { listProperties, type Property } from '#db/queries/property.ts'
import { listSuppressions, type Suppression } from '#db/queries/suppression.ts'
import { requireRole } from '#lib/auth/permission.ts'
import { notFound } from '#lib/http/app-error.ts'
import { withInlineImages } from '#lib/mail/inline-images.ts'
import { redacted } from '#lib/mail/seal.server.ts'
import { canResend } from './resend-message.server.ts'
import type { ResendOutcome } from './resend.ts'
import { type PostQuery, postQuerySchema, statesOf } from './schemas.ts'

/** What a desk shows without a long wait. */
export const LETTERS_A_PAGE = 100

export interface OpenedMessage extends MessageSummary {
  readonly text: string
  readonly html: string
  /** Whether it carries the headers of RFC 8058. */
  readonly isStoppedInOneClick: boolean
  readonly hasPrivateLinks: boolean
  readonly resend: ResendOutcome
}
export interface PostPage {
  readonly query: PostQuery
  readonly messages: readonly MessageSummary[]
  /** Letters that the address asks for, on all pages. */
  readonly found: number
  /** Of all letters, whatever is asked for. */
  readonly counts: Readonly<Partial<Record<MailState, number>>>
  readonly properties: readonly Property[]
  readonly suppressions: readonly Suppression[]
  readonly opened: OpenedMessage | null
}

const ALL: PostFilter = { states: null, kind: null, propertyId: null, unitCode: null }

export interface PostAsked {
  readonly messageId: string | null
  readonly query: Readonly<Record<string, string | null>>
  readonly nowMs: number
}

export async function loadMessages(db: OrgDb, { messageId, query: asked, nowMs }: PostAsked): Promise<PostPage> {
  requireRole(db, ['landlord'], 'read the post')
  const query = postQuerySchema.parse({ state: null, kind: null, property: null, unit: null, page: 1, ...asked })
  const properties = await listProperties(db)
  const filter: PostFilter = {
    states: query.state && statesOf(query.state),
    kind: query.kind,
    propertyId: properties.find(({ slug }) => slug === query.property)?.id ?? null,
    unitCode: query.unit,
  }
  const found = Object.values(await countMessagesByState(db, filter)).reduce((sum, count) => sum + count, 0)
  return {
    query,
    messages: await listMessages(db, filter, { limit: LETTERS_A_PAGE, offset: (query.page - 1) * LETTERS_A_PAGE }),
    found,
    counts: await countMessagesByState(db, ALL),
    properties,
    suppressions: await listSuppressions(db),
    opened: messageId === null ? null : await openMessage(db, messageId, nowMs),
  }
}

async function openMessage(db: OrgDb, messageId: string, nowMs: number): Promise<OpenedMessage> {
  const id = parseMessageId(messageId)
  const message = id ? await findMessage(db, id) : null
  if (!message) throw notFound('message')
  const { privateParts, headers, ...shown } = message
  return {
    ...shown,
    text: redacted(message.text),
    html: withInlineImages(redacted(message.html), message.attachments),
    isStoppedInOneClick: 'List-Unsubscribe-Post' in headers,
    hasPrivateLinks: privateParts.length > 0,
    resend: await canResend(db, message, nowMs),
  }
}
