/** The two ways a letter leaves: SMTP through nodemailer, or the local post room, a folder of .eml files for development. */
import { mkdir, readdir, readFile, rename, writeFile } from 'node:fs/promises'
import { join } from 'node:path'
import nodemailer, { type SendMailOptions } from 'nodemailer'
import type { DueLetter } from '#db/queries/mail.ts'
import type { Config } from '#lib/config.server.ts'

export type TransportOutcome =
  | { readonly kind: 'sent' }
  | { readonly kind: 'try-later'; readonly reason: string }
  | { readonly kind: 'refused'; readonly reason: string }
  /** The dialogue broke after the message was handed over: it may have arrived. */
  | { readonly kind: 'unknown'; readonly reason: string }
export type Transport = (letter: DueLetter) => Promise<TransportOutcome>

const SMTP_TIMEOUT_MS = 30_000

export function transportFor(config: Config): Transport {
  return config.smtpUrl
    ? smtpTransport(config.smtpUrl, config.mailFrom)
    : postRoomTransport(join(config.dataDir, 'post-room'), config.mailFrom)
}

function smtpTransport(smtpUrl: string, from: string): Transport {
  const mailer = nodemailer.createTransport(smtpUrl, {
    connectionTimeout: SMTP_TIMEOUT_MS,
    socketTimeout: SMTP_TIMEOUT_MS,
    greetingTimeout: SMTP_TIMEOUT_MS,
  } as object)
  return async (letter) => {
    try {
      await mailer.sendMail(mailOf(letter, from))
      return { kind: 'sent' }
    } catch (error) {
      return outcomeOf(error as SmtpError)
    }
  }
}

interface SmtpError extends Error {
  readonly responseCode?: number
  readonly code?: string
  readonly command?: string
}

function outcomeOf(error: SmtpError): TransportOutcome {
  // Server words may repeat the address, so only the code is kept.
  const reason = error.responseCode
    ? `The mail server answered ${error.responseCode}.`
    : `No answer from the mail server (${error.code ?? error.name}).`
  if (error.responseCode) return error.responseCode >= 500 ? { kind: 'refused', reason } : { kind: 'try-later', reason }
  // After DATA the letter's text has begun to travel; without the closing answer nobody knows.
  return error.command === 'DATA' ? { kind: 'unknown', reason } : { kind: 'try-later', reason }
}

function postRoomTransport(folder: string, from: string): Transport {
  const composer = nodemailer.createTransport({ streamTransport: true, buffer: true, newline: 'windows' })
  return async (letter) => {
    const { message } = await composer.sendMail(mailOf(letter, from))
    await mkdir(folder, { recursive: true })
    const file = join(folder, `${String(letter.queuedAtMs).padStart(15, '0')}-${letter.id}`)
    await writeFile(`${file}.tmp`, message as Buffer)
    await rename(`${file}.tmp`, `${file}.eml`)
    return { kind: 'sent' }
  }
}

const mailOf = (letter: DueLetter, from: string): SendMailOptions => ({
  from,
  to: letter.toEmail,
  subject: letter.subject,
  text: letter.text,
  html: letter.html,
  messageId: letter.messageId,
  date: new Date(letter.queuedAtMs),
  headers: { 'Auto-Submitted': 'auto-generated', ...letter.headers },
  attachments: letter.attachments.map((attachment) => ({
    filename: attachment.filename,
    cid: attachment.contentId,
    contentType: attachment.contentType,
    content: Buffer.from(attachment.base64, 'base64'),
    contentDisposition: 'inline',
  })),
})

/** Letters in the post room, newest first; an empty list where there is none. */
export async function readPostRoom(config: Config, limit: number): Promise<readonly { readonly name: string; readonly source: string }[]> {
  const folder = join(config.dataDir, 'post-room')
  const names = await readdir(folder).catch(() => [] as string[])
  const newest = names
    .filter((name) => name.endsWith('.eml'))
    .sort()
    .reverse()
    .slice(0, limit)
  return Promise.all(newest.map(async (name) => ({ name, source: await readFile(join(folder, name), 'utf8') })))
}
