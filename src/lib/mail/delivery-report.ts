/** Reads a delivery status notification (RFC 3464, inside the multipart/report of RFC 6522): whose letter it is about and what became of it. */
import PostalMime, { type Attachment } from 'postal-mime'

export type DeliveryReport =
  | {
      readonly kind: 'report'
      /** Of our letter that it is about, with its angle brackets. */
      readonly messageId: string
      readonly recipients: readonly { readonly action: string; readonly status: string }[]
    }
  | { readonly kind: 'no-report'; readonly because: string }

export async function readDeliveryReport(source: string | Uint8Array): Promise<DeliveryReport> {
  // The returned letter stays apart: parsed in place it would pass for the report itself.
  const mail = await PostalMime.parse(source, { forceRfc822Attachments: true, attachmentEncoding: 'utf8' })
  const part = (...types: string[]) => mail.attachments.find(({ mimeType }) => types.includes(mimeType.toLowerCase()))
  const status = part('message/delivery-status')
  if (!status) return { kind: 'no-report', because: 'It is no delivery status report (RFC 3464).' }
  const returned = part('message/rfc822', 'text/rfc822-headers', 'message/rfc822-headers', 'message/global', 'message/global-headers')
  const messageId = returned ? fieldsOf(textOf(returned)).get('message-id') : undefined
  if (!messageId) return { kind: 'no-report', because: 'It does not name the letter that it is about.' }
  // RFC 3464 2.1: the first block is about the message, each one after it about a recipient.
  const [, ...recipients] = textOf(status)
    .trim()
    .split(/\r?\n(?:[ \t]*\r?\n)+/)
  return {
    kind: 'report',
    messageId,
    recipients: recipients.map(fieldsOf).flatMap((fields) => {
      const [action, code] = [fields.get('action')?.toLowerCase(), /^\d\.\d{1,3}\.\d{1,3}/.exec(fields.get('status') ?? '')?.[0]]
      return action && code ? [{ action, status: code }] : []
    }),
  }
}

const textOf = ({ content }: Attachment): string => (typeof content === 'string' ? content : new TextDecoder().decode(content))

/** Header fields of RFC 5322 up to the first empty line, names in small letters, folded lines joined; the first of a name counts. */
function fieldsOf(text: string): ReadonlyMap<string, string> {
  const fields = new Map<string, string>()
  const [head = ''] = text.replace(/^(?:[ \t]*\r?\n)+/, '').split(/\r?\n[ \t]*\r?\n/)
  for (const line of head.replaceAll(/\r?\n[ \t]+/g, ' ').split(/\r?\n/)) {
    const colon = line.indexOf(':')
    const name = line.slice(0, colon).trim().toLowerCase()
    if (colon > 0 && !fields.has(name)) fields.set(name, line.slice(colon + 1).trim())
  }
  return fields
}
