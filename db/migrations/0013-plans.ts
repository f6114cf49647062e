/** Accepted plans: agreed starts, appended to and never changed; an undone plan says when and by whom. */
import { type Kysely, sql } from 'kysely'

const STATEMENTS = [
  `create table plan (
    organisation_id text not null references organisation (id),
    id text not null,
    property_id text not null,
    number integer not null check (number > 0),
    from_day text not null,
    to_day text not null check (to_day > from_day),
    figures text not null check (json_valid(figures)),
    accepted_at_ms integer not null,
    accepted_by text references person (id),
    undone_at_ms integer,
    undone_by text references person (id),
    primary key (organisation_id, id),
    foreign key (organisation_id, property_id) references property (organisation_id, id),
    unique (organisation_id, property_id, number),
    check (undone_at_ms is not null or undone_by is null)
  ) strict`,
  `create table plan_start (
    organisation_id text not null references organisation (id),
    plan_id text not null,
    property_id text not null,
    unit_id text not null,
    tenancy_id text not null,
    day text not null,
    ready_by_at_ms integer not null,
    starts_at_ms integer not null,
    before_at_ms integer not null,
    primary key (organisation_id, plan_id, unit_id, day, ready_by_at_ms),
    foreign key (organisation_id, plan_id) references plan (organisation_id, id),
    foreign key (organisation_id, property_id, unit_id) references unit (organisation_id, property_id, id),
    foreign key (organisation_id, tenancy_id) references tenancy (organisation_id, id)
  ) strict`,
  `create index plan_start_day on plan_start (organisation_id, property_id, day)`,
  `create index plan_start_tenancy on plan_start (organisation_id, tenancy_id)`,
]

export async function up(db: Kysely<unknown>): Promise<void> {
  for (const statement of STATEMENTS) await sql.raw(statement).execute(db)
}
