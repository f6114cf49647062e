/** The local post room: where letters go while no mail server is configured, and how the development page reads them. */
import { readdir, readFile } from 'node:fs/promises'
import { join } from 'node:path'
import PostalMime from 'postal-mime'
import type { Config } from '#lib/config.server.ts'
import { withInlineImages } from './inline-images.ts'

export const postRoomFolder = (config: Config): string => join(config.dataDir, 'post-room')

/** Sorts by time of queuing; ends in the letter's id. */
export const postedName = (letter: { readonly queuedAtMs: number; readonly messageId: string }): string =>
  `${String(letter.queuedAtMs).padStart(15, '0')}-${letter.messageId.slice(1, letter.messageId.indexOf('@'))}`

export interface PostedLetter {
  /** File name without `.eml`. */
  readonly name: string
  readonly to: string
  readonly subject: string
  readonly date: string
  readonly text: string
  /** As received, with inline images put in by their content id. */
  readonly html: string
}

const NAME = /^[0-9]{15}-[0-9a-f-]{36}$/

/** Names of the letters, newest first. */
export async function listPosted(config: Config, limit: number): Promise<readonly string[]> {
  const names = await readdir(postRoomFolder(config)).catch(() => [] as string[])
  const letters = names.filter((name) => name.endsWith('.eml')).map((name) => name.slice(0, -'.eml'.length))
  return letters.sort().reverse().slice(0, limit)
}

/** One letter as its reader's program would take it apart; `null` when there is none of that name. */
export async function readPosted(config: Config, name: string): Promise<PostedLetter | null> {
  if (!NAME.test(name)) return null
  const source = await readFile(join(postRoomFolder(config), `${name}.eml`)).catch(() => null)
  if (!source) return null
  const mail = await PostalMime.parse(source, { attachmentEncoding: 'base64' })
  const images = mail.attachments.map(({ contentId, mimeType, content }) => ({
    contentId: (contentId ?? '').replace(/^<|>$/g, ''),
    contentType: mimeType,
    base64: String(content),
  }))
  return {
    name,
    to: mail.to?.map((to) => to.address).join(', ') ?? '',
    subject: mail.subject ?? '',
    date: mail.date ?? '',
    text: mail.text ?? '',
    html: withInlineImages(mail.html ?? '', images),
  }
}
