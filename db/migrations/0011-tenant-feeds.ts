/** A tenancy's secret calendar address, and one more kind of flag. */
import { type Kysely, sql } from 'kysely'
import { FLAG_KINDS } from '../enums.ts'
import { list } from './list.ts'

/**
 * SQLite cannot change a CHECK in place, so a database whose flags were made before the kind is given its flags anew
 * (https://sqlite.org/lang_altertable.html, 7). What points to flags waits aside meanwhile: the old table is dropped empty of references.
 */
const STATEMENTS = [
  `create table calendar_feed (
    organisation_id text not null references organisation (id),
    tenancy_id text not null,
    id text not null unique,
    created_at_ms integer not null,
    primary key (organisation_id, tenancy_id),
    foreign key (organisation_id, tenancy_id) references tenancy (organisation_id, id)
  ) strict`,
  `create temporary table visit_flag_aside as select * from visit_flag`,
  `delete from visit_flag`,
  `create table flag_next (
    organisation_id text not null references organisation (id),
    id text not null,
    property_id text not null,
    unit_id text,
    kind text not null check (kind in (${list(FLAG_KINDS)})),
    severity text not null check (severity in ('dangerous', 'cold', 'attention')),
    summary text not null,
    evidence text not null check (json_valid(evidence)),
    opened_at_ms integer not null,
    seen_at_ms integer not null,
    closed_at_ms integer,
    closed_because text check (closed_because in ('computation', 'dismissed')),
    closed_by text references person (id),
    close_note text,
    dismissed_until text,
    primary key (organisation_id, id),
    foreign key (organisation_id, property_id) references property (organisation_id, id),
    foreign key (organisation_id, property_id, unit_id) references unit (organisation_id, property_id, id),
    check ((closed_at_ms is null) = (closed_because is null))
  ) strict`,
  `insert into flag_next select organisation_id, id, property_id, unit_id, kind, severity, summary, evidence, opened_at_ms,
    seen_at_ms, closed_at_ms, closed_because, closed_by, close_note, dismissed_until from flag`,
  `drop table flag`,
  `alter table flag_next rename to flag`,
  `create unique index flag_open_once on flag (organisation_id, property_id, coalesce(unit_id, ''), kind) where closed_at_ms is null`,
  `insert into visit_flag select * from visit_flag_aside`,
  `drop table visit_flag_aside`,
]

export async function up(db: Kysely<unknown>): Promise<void> {
  for (const statement of STATEMENTS) await sql.raw(statement).execute(db)
}
