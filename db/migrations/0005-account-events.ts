/** Changes that a person makes to their own account, which belongs to no organisation; and tenancies of a unit never overlap. */
import { type Kysely, sql } from 'kysely'

const OVERLAPS = `exists (
    select 1 from tenancy other
    where other.organisation_id = new.organisation_id and other.unit_id = new.unit_id and other.id <> new.id
      and other.from_day < coalesce(new.to_day, '9999-12-31') and new.from_day < coalesce(other.to_day, '9999-12-31'))`
const REFUSE = "begin select raise(abort, 'two tenancies of a unit would overlap'); end"

const STATEMENTS = [
  `create table account_event (
    id text primary key,
    person_id text not null references person (id) on delete cascade,
    action text not null check (action in ('sign-up', 'confirm', 'change-password', 'sign-out-everywhere')),
    at_ms integer not null
  ) strict`,
  'create index account_event_person on account_event (person_id, at_ms)',
  `create trigger tenancy_starts_without_overlap before insert on tenancy when ${OVERLAPS} ${REFUSE}`,
  `create trigger tenancy_changes_without_overlap before update of from_day, to_day on tenancy when ${OVERLAPS} ${REFUSE}`,
]

export async function up(db: Kysely<unknown>): Promise<void> {
  for (const statement of STATEMENTS) await sql.raw(statement).execute(db)
}
