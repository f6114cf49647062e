/** A tariff version is never changed: a correction is a further edition from the same day, with its reason and its author. */
import { type Kysely, sql } from 'kysely'

const STATEMENTS = [
  `create table tariff_version_new (
    organisation_id text not null references organisation (id),
    id text not null,
    tariff_id text not null,
    effective_from text not null,
    edition integer not null check (edition > 0),
    version text not null check (json_valid(version)),
    record text check (record is null or json_valid(record)),
    source text not null,
    reason text,
    person_id text references person (id),
    created_at_ms integer not null,
    primary key (organisation_id, id),
    foreign key (organisation_id, tariff_id) references tariff (organisation_id, id),
    unique (organisation_id, tariff_id, effective_from, edition)
  ) strict`,
  `insert into tariff_version_new
    select organisation_id, id, tariff_id, effective_from, 1, version, record, source, null, null, created_at_ms from tariff_version`,
  'drop table tariff_version',
  'alter table tariff_version_new rename to tariff_version',
]

export async function up(db: Kysely<unknown>): Promise<void> {
  for (const statement of STATEMENTS) await sql.raw(statement).execute(db)
}
