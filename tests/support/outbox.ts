/** An organisation's outbox with letters in it. */
import type { Kysely } from 'kysely'
import type { OrgDb } from '#db/org-db.ts'
import { inTransaction } from '#db/org-db.ts'
import { addMessage, type OrganisationLetter } from '#db/queries/message.ts'
import type { Database } from '#db/schema.ts'
import { unseal } from '#lib/mail/seal.server.ts'
import { letter } from '#lib/mail/letter.ts'

export const LETTER_AT_MS = Date.UTC(2026, 1, 2, 17)

export function tipLetter(change: Partial<OrganisationLetter> = {}): OrganisationLetter {
  const parts = letter({ title: 'Press the timer by 06:05', paragraphs: ['Hot for two showers from 07:00.'], footer: ['Quill Court 2B'] })
  return {
    kind: 'tip',
    propertyId: null,
    unitId: null,
    personId: null,
    toEmail: 'tenant@quill.example',
    cause: 'tip:2026-02-03',
    subject: 'Tomorrow: press the timer by 06:05',
    ...parts,
    nowMs: LETTER_AT_MS,
    domain: 'dwellhour.example',
    ...change,
  }
}

export const queue = (db: OrgDb, change: Partial<OrganisationLetter> = {}) => inTransaction(db, (trx) => addMessage(trx, tipLetter(change)))

/** A stored letter's bodies as its recipient gets them. */
export const asSent = (row: { readonly text: string; readonly html: string; readonly headers: string; readonly private_parts: string }) =>
  unseal({ text: row.text, html: row.html, headers: JSON.parse(row.headers) as Record<string, string> }, JSON.parse(row.private_parts))

/** State and error of each letter, oldest first. */
export const states = async (db: Kysely<Database>) =>
  db
    .selectFrom('message')
    .select(['message_id', 'to_email', 'state', 'attempts', 'error', 'next_attempt_at_ms'])
    .orderBy('to_email')
    .execute()
