/** A real SMTP server on 127.0.0.1 that keeps what it was given; it can refuse, break off and wait at chosen steps. */
import type { AddressInfo } from 'node:net'
import PostalMime, { type Email } from 'postal-mime'
import { SMTPServer } from 'smtp-server'

export interface SmtpRecipe {
  /** Reply code to RCPT TO, e.g. 450; `null` accepts. */
  readonly refuseRecipient?: (address: string) => number | null
  /** What the refusal of a recipient says, with its enhanced status code. */
  readonly refusalWords?: string
  /** Reply code after the message, e.g. 552; `null` accepts. */
  readonly refuseMessage?: (source: string) => number | null
  /** Drops the connection: before any of the message is read, or after all of it and before the reply. */
  readonly dropAt?: 'recipient' | 'after-message'
  readonly replyAfterMs?: number
}
export interface FakeSmtp {
  readonly url: string
  /** Messages accepted with 250, as they travelled. */
  readonly accepted: readonly string[]
  parsed(): Promise<readonly Email[]>
  close(): Promise<void>
}

const refusal = (code: number, words = 'refused by the recipe'): Error => Object.assign(new Error(words), { responseCode: code })

export async function fakeSmtp(recipe: SmtpRecipe = {}): Promise<FakeSmtp> {
  const accepted: string[] = []
  const drop = (session: { readonly id: string }) => {
    for (const connection of server.connections) if (connection.id === session.id) connection._socket.destroy()
  }
  const server = new SMTPServer({
    authOptional: true,
    disabledCommands: ['STARTTLS', 'AUTH'],
    logger: false,
    onRcptTo(address, session, done) {
      if (recipe.dropAt === 'recipient') return drop(session)
      const code = recipe.refuseRecipient?.(address.address) ?? null
      done(code === null ? null : refusal(code, recipe.refusalWords))
    },
    onData(stream, session, done) {
      const chunks: Buffer[] = []
      stream.on('data', (chunk: Buffer) => chunks.push(chunk))
      stream.on('end', () => {
        const source = Buffer.concat(chunks).toString('utf8')
        const code = recipe.refuseMessage?.(source) ?? null
        if (code !== null) return done(refusal(code))
        accepted.push(source)
        if (recipe.dropAt === 'after-message') return drop(session)
        if (recipe.replyAfterMs) setTimeout(() => done(null), recipe.replyAfterMs)
        else done(null)
      })
    },
  })
  server.on('error', () => undefined)
  await new Promise<void>((resolve) => server.listen(0, '127.0.0.1', resolve))
  const { port } = server.server.address() as AddressInfo
  return {
    url: `smtp://127.0.0.1:${port}`,
    accepted,
    parsed: () => Promise.all(accepted.map((source) => PostalMime.parse(source))),
    close: () => new Promise((resolve) => server.close(() => resolve())),
  }
}
