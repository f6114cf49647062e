/** Puts a letter into the outbox inside the transaction of what caused it; the same recipient, kind and cause never twice. */
import type { Transaction } from 'kysely'
import type { OrgTrx } from '#db/org-db.ts'
import { addAccountMail, addMessage, type Letter, type OrganisationLetter, type Queued } from '#db/queries/message.ts'
import type { Database } from '#db/schema.ts'
import { processConfig } from '#lib/config.server.ts'
import { seal, type Secret } from './seal.server.ts'

/** A letter as its feature wrote it. */
type Written<L extends Letter> = Omit<L, 'domain' | 'privateParts'> & {
  /** What only the recipient may read of the links in the bodies. */
  readonly secrets?: readonly Secret[]
}

export const messageDomain = (): string => new URL(processConfig().baseUrl).hostname

function prepared<L extends Letter>({ secrets = [], ...letter }: Written<L>) {
  return { ...letter, ...seal(letter, secrets), domain: messageDomain() }
}

export const queueMessage = (db: OrgTrx, letter: Written<OrganisationLetter>): Promise<Queued> => addMessage(db, prepared(letter))

export const queueAccountMail = (
  trx: Transaction<Database>,
  letter: Written<Letter> & { readonly kind: 'confirm' | 'reset' },
): Promise<Queued> => addAccountMail(trx, { ...prepared(letter), kind: letter.kind })
