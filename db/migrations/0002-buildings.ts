/** Properties, units, tenancies, tariffs and invitations. */
import { type Kysely, sql } from 'kysely'
import { ROLES } from '../enums.ts'
import { list } from './list.ts'

const STATEMENTS = [
  `create table tariff (
    organisation_id text not null references organisation (id),
    id text not null,
    name text not null,
    zone text not null,
    created_at_ms integer not null,
    primary key (organisation_id, id)
  ) strict`,
  `create table tariff_version (
    organisation_id text not null references organisation (id),
    id text not null,
    tariff_id text not null,
    effective_from text not null,
    version text not null check (json_valid(version)),
    record text check (record is null or json_valid(record)),
    source text not null,
    created_at_ms integer not null,
    primary key (organisation_id, id),
    foreign key (organisation_id, tariff_id) references tariff (organisation_id, id),
    unique (organisation_id, tariff_id, effective_from)
  ) strict`,
  `create table property (
    organisation_id text not null references organisation (id),
    id text not null,
    slug text not null,
    name text not null,
    address text not null,
    zone text not null,
    country text not null,
    currency text not null,
    rule_profile text not null check (rule_profile in ('us-nec-2023', 'gb-bs7671', 'iec-60364')),
    hygiene_policy text not null,
    supply_voltage_v real not null check (supply_voltage_v > 0),
    phases integer not null check (phases in (1, 3)),
    service_rating_a real not null check (service_rating_a > 0),
    base_load_w real not null check (base_load_w >= 0),
    climate text not null check (json_valid(climate)),
    tariff_id text,
    sending_paused_at_ms integer,
    created_at_ms integer not null,
    primary key (organisation_id, id),
    foreign key (organisation_id, tariff_id) references tariff (organisation_id, id),
    unique (organisation_id, slug)
  ) strict`,
  `create table property_access (
    organisation_id text not null references organisation (id),
    person_id text not null references person (id),
    property_id text not null,
    role text not null check (role in ('electrician', 'owner')),
    created_at_ms integer not null,
    primary key (organisation_id, person_id, property_id, role),
    foreign key (organisation_id, property_id) references property (organisation_id, id)
  ) strict`,
  `create table unit (
    organisation_id text not null references organisation (id),
    id text not null,
    property_id text not null,
    code text not null,
    floor integer,
    stack text,
    created_at_ms integer not null,
    primary key (organisation_id, id),
    foreign key (organisation_id, property_id) references property (organisation_id, id),
    unique (organisation_id, property_id, code),
    unique (organisation_id, property_id, id)
  ) strict`,
  `create table tenancy (
    organisation_id text not null references organisation (id),
    id text not null,
    unit_id text not null,
    person_id text references person (id),
    name text not null,
    email text not null collate nocase,
    from_day text not null,
    to_day text check (to_day is null or to_day > from_day),
    tips text not null default 'daily' check (tips in ('daily', 'weekly', 'on-change', 'never')),
    created_at_ms integer not null,
    primary key (organisation_id, id),
    foreign key (organisation_id, unit_id) references unit (organisation_id, id)
  ) strict`,
  `create index tenancy_unit on tenancy (organisation_id, unit_id, from_day)`,
  `create index tenancy_person on tenancy (person_id)`,
  `create table invitation (
    organisation_id text not null references organisation (id),
    id text not null,
    email text not null collate nocase,
    name text not null,
    role text not null check (role in (${list(ROLES)})),
    property_id text,
    tenancy_id text,
    token_hash text not null unique,
    created_at_ms integer not null,
    expires_at_ms integer not null,
    accepted_at_ms integer,
    revoked_at_ms integer,
    invited_by text references person (id),
    primary key (organisation_id, id),
    foreign key (organisation_id, property_id) references property (organisation_id, id),
    foreign key (organisation_id, tenancy_id) references tenancy (organisation_id, id)
  ) strict`,
]

export async function up(db: Kysely<unknown>): Promise<void> {
  for (const statement of STATEMENTS) await sql.raw(statement).execute(db)
}
