/** Letters expire, bounce and keep what only their reader may see apart from their bodies; addresses that get nothing are on record. */
import { randomUUID } from 'node:crypto'
import { type Kysely, sql } from 'kysely'
import { MAIL_STATES, MESSAGE_KINDS } from '../enums.ts'
import { list } from './list.ts'

const LETTER_COLUMNS = `
    subject text not null,
    text text not null,
    html text not null,
    headers text not null default '{}' check (json_valid(headers)),
    attachments text not null default '[]' check (json_valid(attachments)),
    private_parts text not null default '[]' check (json_valid(private_parts)),
    state text not null check (state in (${list(MAIL_STATES)})),
    attempts integer not null default 0,
    next_attempt_at_ms integer not null,
    message_id text not null unique,
    queued_at_ms integer not null,
    expires_at_ms integer,
    sent_at_ms integer,
    error text`
const KEPT = 'subject, text, html, headers, attachments, state, attempts, next_attempt_at_ms, message_id, queued_at_ms, sent_at_ms, error'
const MESSAGE_KEPT = `organisation_id, id, property_id, unit_id, person_id, to_email, kind, cause, ${KEPT}`
const ACCOUNT_MAIL_KEPT = `id, to_email, kind, cause, ${KEPT}`

/** SQLite cannot change a CHECK in place, so both outboxes are made anew (https://sqlite.org/lang_altertable.html, 7). Nothing points to them. */
const STATEMENTS = [
  `create table message_next (
    organisation_id text not null references organisation (id),
    id text not null,
    property_id text,
    unit_id text,
    tenancy_id text,
    person_id text references person (id),
    to_email text not null,
    kind text not null check (kind in (${list(MESSAGE_KINDS)})),
    cause text not null,${LETTER_COLUMNS},
    primary key (organisation_id, id),
    foreign key (organisation_id, property_id) references property (organisation_id, id),
    foreign key (organisation_id, unit_id) references unit (organisation_id, id),
    foreign key (organisation_id, tenancy_id) references tenancy (organisation_id, id),
    unique (organisation_id, to_email, kind, cause)
  ) strict`,
  `insert into message_next (${MESSAGE_KEPT}) select ${MESSAGE_KEPT} from message`,
  `drop table message`,
  `alter table message_next rename to message`,
  `create index message_due on message (state, next_attempt_at_ms)`,
  `create index message_expiry on message (expires_at_ms) where state = 'queued' and expires_at_ms is not null`,
  `create index message_newest on message (organisation_id, queued_at_ms)`,
  `create table account_mail_next (
    id text primary key,
    to_email text not null,
    kind text not null,
    cause text not null,${LETTER_COLUMNS},
    unique (to_email, kind, cause)
  ) strict`,
  `insert into account_mail_next (${ACCOUNT_MAIL_KEPT}) select ${ACCOUNT_MAIL_KEPT} from account_mail`,
  `drop table account_mail`,
  `alter table account_mail_next rename to account_mail`,
  `create index account_mail_due on account_mail (state, next_attempt_at_ms)`,
  `create index account_mail_expiry on account_mail (expires_at_ms) where state = 'queued' and expires_at_ms is not null`,
  `create table suppression (
    organisation_id text not null references organisation (id),
    email text not null,
    kind text not null check (kind = '*' or kind in (${list(MESSAGE_KINDS)})),
    reason text not null check (reason in ('bounce', 'unsubscribe')),
    detail text not null,
    at_ms integer not null,
    primary key (organisation_id, email, kind)
  ) strict`,
]

export async function up(db: Kysely<unknown>): Promise<void> {
  for (const statement of STATEMENTS) await sql.raw(statement).execute(db)
  for (const table of ['message', 'account_mail']) await hideTokens(db, table)
}

const TOKEN = /(\/(?:invitation|confirm|reset|t)\/)([A-Za-z0-9_.-]{20,})/g

interface Row {
  readonly message_id: string
  readonly text: string
  readonly html: string
  readonly headers: string
  readonly state: string
}

/** Takes the tokens out of bodies that are there already; a letter still to be sent keeps them beside its body. */
async function hideTokens(db: Kysely<unknown>, table: string): Promise<void> {
  const { rows } = await sql<Row>`select message_id, text, html, headers, state from ${sql.table(table)}`.execute(db)
  for (const row of rows) {
    const seal = randomUUID()
    const tokens: string[] = []
    const hidden = (text: string): string =>
      text.replace(TOKEN, (_, path: string, token: string) => {
        if (!tokens.includes(token)) tokens.push(token)
        return `${path}{{${seal}:${tokens.indexOf(token)}}}`
      })
    const [text, html, headers] = [hidden(row.text), hidden(row.html), hidden(row.headers)]
    if (tokens.length === 0) continue
    const waits = row.state === 'queued' || row.state === 'sending'
    const parts = JSON.stringify(tokens.map((token) => (waits ? { token } : { removed: true })))
    await sql`update ${sql.table(table)} set text = ${text}, html = ${html}, headers = ${headers}, private_parts = ${parts}
      where message_id = ${row.message_id}`.execute(db)
  }
}
