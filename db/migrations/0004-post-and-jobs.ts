/** Mail, digests, feedback, audit and jobs. */
import { type Kysely, sql } from 'kysely'
import { MAIL_STATES, MESSAGE_KINDS } from '../enums.ts'
import { list } from './list.ts'

const STATEMENTS = [
  `create table message (
    organisation_id text not null references organisation (id),
    id text not null,
    property_id text,
    unit_id text,
    person_id text references person (id),
    to_email text not null,
    kind text not null check (kind in (${list(MESSAGE_KINDS)})),
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
    primary key (organisation_id, id),
    foreign key (organisation_id, property_id) references property (organisation_id, id),
    foreign key (organisation_id, unit_id) references unit (organisation_id, id),
    unique (organisation_id, to_email, kind, cause)
  ) strict`,
  `create index message_due on message (state, next_attempt_at_ms)`,
  `create table digest (
    organisation_id text not null references organisation (id),
    id text not null,
    property_id text not null,
    month text not null check (month glob '[0-9][0-9][0-9][0-9]-[0-9][0-9]'),
    edition integer not null check (edition > 0),
    figures text not null check (json_valid(figures)),
    reason text,
    created_at_ms integer not null,
    primary key (organisation_id, id),
    foreign key (organisation_id, property_id) references property (organisation_id, id),
    unique (organisation_id, property_id, month, edition)
  ) strict`,
  `create trigger digest_is_frozen before update on digest begin select raise(abort, 'a digest never changes; write a new edition'); end`,
  `create table feedback (
    organisation_id text not null references organisation (id),
    id text not null,
    tenancy_id text not null,
    day text not null,
    verdict text not null check (verdict in ('hot', 'cold')),
    given_at_ms integer not null,
    primary key (organisation_id, id),
    foreign key (organisation_id, tenancy_id) references tenancy (organisation_id, id),
    unique (organisation_id, tenancy_id, day)
  ) strict`,
  `create table audit_entry (
    organisation_id text not null references organisation (id),
    id text not null,
    at_ms integer not null,
    person_id text references person (id),
    action text not null,
    subject_kind text not null,
    subject_id text not null,
    before text,
    after text,
    primary key (organisation_id, id)
  ) strict`,
  `create index audit_entry_time on audit_entry (organisation_id, at_ms)`,
  `create table job_lease (
    job text not null,
    scope text not null,
    period text not null,
    organisation_id text references organisation (id),
    holder text not null,
    lease_until_ms integer not null,
    attempts integer not null,
    done_at_ms integer,
    primary key (job, scope, period)
  ) strict`,
  `create table job_run (
    id text primary key,
    job text not null,
    scope text not null,
    period text not null,
    organisation_id text references organisation (id),
    started_at_ms integer not null,
    finished_at_ms integer,
    counts text check (counts is null or json_valid(counts)),
    error text
  ) strict`,
  `create index job_run_organisation on job_run (organisation_id, started_at_ms)`,
]

export async function up(db: Kysely<unknown>): Promise<void> {
  for (const statement of STATEMENTS) await sql.raw(statement).execute(db)
}
