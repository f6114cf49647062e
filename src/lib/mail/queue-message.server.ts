/** Puts a letter into the outbox inside the transaction of what caused it; the same recipient, kind and cause never twice. */
import type { Transaction } from 'kysely'
import type { OrgTrx } from '#db/org-db.ts'
import { addAccountMail, addMessage, type Letter, type OrganisationLetter, type Queued } from '#db/queries/message.ts'
import type { Database } from '#db/schema.ts'
import { processConfig } from '#lib/config.server.ts'

const messageDomain = (): string => new URL(processConfig().baseUrl).hostname

export const queueMessage = (db: OrgTrx, letter: Omit<OrganisationLetter, 'domain'>): Promise<Queued> =>
  addMessage(db, { ...letter, domain: messageDomain() })

export const queueAccountMail = (
  trx: Transaction<Database>,
  letter: Omit<Letter, 'domain'> & { readonly kind: 'confirm' | 'reset' },
): Promise<Queued> => addAccountMail(trx, { ...letter, domain: messageDomain() })
