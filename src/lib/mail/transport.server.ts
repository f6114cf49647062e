/** The two ways a letter leaves: SMTP through nodemailer, or the local post room, a folder of .eml files for development. */
import { mkdir, rename, writeFile } from 'node:fs/promises'
import { join } from 'node:path'
import nodemailer, { type SendMailOptions } from 'nodemailer'
import type { DueLetter } from '#db/queries/outbox.ts'
import type { Config } from '#lib/config.server.ts'
import { isDeadAddress } from './bounce.ts'
import { postedName, postRoomFolder } from './post-room.server.ts'

export type TransportOutcome =
  | { readonly kind: 'sent' }
  | { readonly kind: 'try-later'; readonly reason: string }
  | { readonly kind: 'refused'; readonly reason: string }
  /** The address itself was refused; `forGood`: because there is no such mailbox, not because of what was sent to it. */
  | { readonly kind: 'bounced'; readonly reason: string; readonly forGood: boolean }
  /** The dialogue broke after the message was handed over: it may have arrived. */
  | { readonly kind: 'unknown'; readonly reason: string }
export interface Transport {
  send(letter: DueLetter): Promise<TransportOutcome>
  close(): void
}

const SMTP_TIMEOUT_MS = 30_000
/** A server that answers byte by byte never times out by silence; the lease of the outbox must outlast this. */
export const LETTER_DEADLINE_MS = 120_000

export const transportFor = (config: Config): Transport =>
  config.smtpUrl ? smtpTransport(config.smtpUrl, config.mailFrom) : postRoomTransport(postRoomFolder(config), config.mailFrom)

export function smtpTransport(smtpUrl: string, from: string, timeoutMs = SMTP_TIMEOUT_MS): Transport {
  const timeouts = { connectionTimeout: timeoutMs, socketTimeout: timeoutMs, greetingTimeout: timeoutMs }
  const mailer = nodemailer.createTransport({ url: smtpUrl, ...timeouts })
  // The library pipes a message into the connection only once the server has accepted DATA: from then on a broken
  // connection leaves it open whether the letter arrived, and the library's error no longer tells.
  const handedOver = new Set<string>()
  mailer.use('stream', (mail, done) => {
    const message = mail.message
    const createReadStream = message.createReadStream.bind(message)
    message.createReadStream = (...options) => {
      const stream = createReadStream(...options)
      const pipe = stream.pipe.bind(stream)
      stream.pipe = (destination, ...rest) => {
        handedOver.add(String(mail.data.messageId))
        return pipe(destination, ...rest)
      }
      return stream
    }
    done()
  })
  const send = async (letter: DueLetter): Promise<TransportOutcome> => {
    try {
      await mailer.sendMail(mailOf(letter, from))
      return { kind: 'sent' }
    } catch (error) {
      return outcomeOf(error as SmtpError, handedOver.has(letter.messageId))
    } finally {
      handedOver.delete(letter.messageId)
    }
  }
  return { send: (letter) => withDeadline(send(letter)), close: () => mailer.close() }
}

interface SmtpError extends Error {
  readonly responseCode?: number
  /** The server's own words, with the enhanced status code of RFC 2034 where it gives one. */
  readonly response?: string
  readonly code?: string
  readonly command?: string
}

/** Replies about this very letter; a refusal at any other step is about the connection or the sign-in, so the letter waits. */
const ABOUT_THE_LETTER: readonly (string | undefined)[] = ['MAIL FROM', 'RCPT TO', 'DATA']

/** RFC 5321 4.2.3: mailbox unavailable, user not local, mailbox name not allowed. */
const NO_MAILBOX: readonly number[] = [550, 551, 553]
const enhancedStatus = (response = ''): string | null => /^\d{3}[ -](\d\.\d{1,3}\.\d{1,3})\b/.exec(response)?.[1] ?? null

/** RFC 5321 4.2.1: 4yz asks to try again, 5yz is final. Server words may repeat the address, so only the code is kept. */
export function outcomeOf(error: SmtpError, handedOver: boolean): TransportOutcome {
  const { responseCode, command } = error
  if (responseCode && responseCode >= 400) {
    const status = enhancedStatus(error.response)
    const reason = `The mail server answered ${responseCode}${status ? ` (${status})` : ''}.`
    if (responseCode < 500 || !ABOUT_THE_LETTER.includes(command)) return { kind: 'try-later', reason }
    if (command !== 'RCPT TO') return { kind: 'refused', reason }
    return { kind: 'bounced', reason, forGood: status ? isDeadAddress(status) : NO_MAILBOX.includes(responseCode) }
  }
  const reason = `No answer from the mail server (${error.code ?? error.name}).`
  return handedOver ? { kind: 'unknown', reason } : { kind: 'try-later', reason }
}

async function withDeadline(sending: Promise<TransportOutcome>): Promise<TransportOutcome> {
  let timer: NodeJS.Timeout | undefined
  const deadline = new Promise<TransportOutcome>((resolve) => {
    timer = setTimeout(() => resolve({ kind: 'unknown', reason: 'The mail server took too long to answer.' }), LETTER_DEADLINE_MS)
  })
  return Promise.race([sending, deadline]).finally(() => clearTimeout(timer))
}

function postRoomTransport(folder: string, from: string): Transport {
  const composer = nodemailer.createTransport({ streamTransport: true, buffer: true, newline: 'windows' })
  const send = async (letter: DueLetter): Promise<TransportOutcome> => {
    try {
      const { message } = await composer.sendMail(mailOf(letter, from))
      await mkdir(folder, { recursive: true, mode: 0o700 })
      const file = join(folder, postedName(letter))
      await writeFile(`${file}.tmp`, message as Buffer)
      // The name is the letter's own, so a second attempt could only replace the first.
      await rename(`${file}.tmp`, `${file}.eml`)
      return { kind: 'sent' }
    } catch (error) {
      return { kind: 'try-later', reason: `The post room could not be written (${(error as NodeJS.ErrnoException).code ?? 'unknown'}).` }
    }
  }
  return { send, close: () => undefined }
}

const mailOf = (letter: DueLetter, from: string): SendMailOptions => ({
  from,
  to: letter.toEmail,
  subject: letter.subject,
  text: letter.text,
  html: letter.html,
  messageId: letter.messageId,
  date: new Date(letter.queuedAtMs),
  // RFC 3834 5.1: nobody's vacation notice answers a letter that a program wrote.
  headers: { 'Auto-Submitted': 'auto-generated', ...letter.headers },
  attachments: letter.attachments.map((attachment) => ({
    filename: attachment.filename,
    cid: attachment.contentId,
    contentType: attachment.contentType,
    content: Buffer.from(attachment.base64, 'base64'),
    contentDisposition: 'inline',
  })),
})
