/** People, sessions, organisations and their members. */
import { type Kysely, sql } from 'kysely'
import { ROLES, MAIL_STATES } from '../enums.ts'
import { list } from './list.ts'

const STATEMENTS = [
  `create table person (
    id text primary key,
    email text not null unique collate nocase,
    name text not null,
    password_hash text,
    email_confirmed_at_ms integer,
    created_at_ms integer not null
  ) strict`,
  `create table session (
    id text primary key,
    person_id text not null references person (id) on delete cascade,
    expires_at_ms integer not null,
    created_at_ms integer not null
  ) strict`,
  `create index session_person on session (person_id)`,
  `create table account_token (
    token_hash text primary key,
    person_id text not null references person (id) on delete cascade,
    purpose text not null check (purpose in ('confirm', 'reset')),
    expires_at_ms integer not null,
    used_at_ms integer,
    created_at_ms integer not null
  ) strict`,
  `create table signin_attempt (
    id integer primary key,
    key text not null,
    at_ms integer not null
  ) strict`,
  `create index signin_attempt_key on signin_attempt (key, at_ms)`,
  `create table account_mail (
    id text primary key,
    to_email text not null,
    kind text not null,
    cause text not null,
    subject text not null,
    text text not null,
    html text not null,
    headers text not null default '{}' check (json_valid(headers)),
    attachments text not null default '[]' check (json_valid(attachments)),
    state text not null check (state in (${list(MAIL_STATES)})),
    attempts integer not null default 0,
    next_attempt_at_ms integer not null,
    message_id text not null unique,
    queued_at_ms integer not null,
    sent_at_ms integer,
    error text,
    unique (to_email, kind, cause)
  ) strict`,
  `create index account_mail_due on account_mail (state, next_attempt_at_ms)`,
  `create table organisation (
    id text primary key,
    slug text not null unique check (slug glob '[a-z0-9]*'),
    name text not null,
    measure text not null check (measure in ('metric', 'us')),
    created_at_ms integer not null
  ) strict`,
  `create table membership (
    organisation_id text not null references organisation (id),
    person_id text not null references person (id),
    role text not null check (role in (${list(ROLES)})),
    created_at_ms integer not null,
    primary key (organisation_id, person_id, role)
  ) strict`,
  `create index membership_person on membership (person_id)`,
]

export async function up(db: Kysely<unknown>): Promise<void> {
  for (const statement of STATEMENTS) await sql.raw(statement).execute(db)
}
