/** The migration that gives flags one more kind: a database that holds flags and visits keeps both. */
import { Migrator, sql } from 'kysely'
import { describe, expect, it } from 'vitest'
import { openDatabase } from '#db/connection.ts'
import { MIGRATIONS } from '#db/migrations/index.ts'

const TABLES = [
  `insert into organisation values ('o', 'house', 'House', 'metric', 0)`,
  `insert into person (id, email, name, created_at_ms) values ('p', 'p@people.example', 'P', 0)`,
  `insert into property (organisation_id, id, slug, name, address, zone, country, currency, rule_profile, hygiene_policy,
    supply_voltage_v, phases, service_rating_a, base_load_w, climate, created_at_ms)
    values ('o', 'h', 'h', 'H', '', 'Europe/London', 'GB', 'GBP', 'gb-bs7671', 'store-60', 230, 1, 100, 0, '{}', 0)`,
  `insert into unit (organisation_id, id, property_id, code, created_at_ms) values ('o', 'u', 'h', '1', 0)`,
  `insert into flag (organisation_id, id, property_id, unit_id, kind, severity, summary, evidence, opened_at_ms, seen_at_ms)
    values ('o', 'f', 'h', 'u', 'misses-recovery', 'cold', 's', '{}', 1, 2)`,
  `insert into visit (organisation_id, id, property_id, unit_id, electrician_id, state, note, proposal, created_at_ms)
    values ('o', 'v', 'h', 'u', 'p', 'planned', '', '{}', 0)`,
  `insert into visit_flag values ('o', 'v', 'f')`,
]

describe('0011-tenant-feeds', () => {
  it('keeps flags, what points to them and their one-open rule, and lets the new kind in', async () => {
    const db = openDatabase(':memory:')
    const migrator = new Migrator({ db, provider: { getMigrations: () => Promise.resolve({ ...MIGRATIONS }) } })
    const before =
      Object.keys(MIGRATIONS)
        .filter((name) => name < '0011')
        .at(-1) ?? ''
    expect((await migrator.migrateTo(before)).error).toBeUndefined()
    for (const statement of TABLES) await sql.raw(statement).execute(db)
    expect((await migrator.migrateToLatest()).error).toBeUndefined()
    expect(await db.selectFrom('visit_flag').selectAll().execute()).toEqual([{ organisation_id: 'o', visit_id: 'v', flag_id: 'f' }])
    expect(await db.selectFrom('flag').select(['id', 'kind', 'opened_at_ms']).execute()).toEqual([
      { id: 'f', kind: 'misses-recovery', opened_at_ms: 1 },
    ])
    expect((await sql`pragma foreign_key_check`.execute(db)).rows).toEqual([])
    const add = (id: string, kind: string) =>
      sql
        .raw(
          `insert into flag (organisation_id, id, property_id, unit_id, kind, severity, summary, evidence, opened_at_ms, seen_at_ms)
           values ('o', '${id}', 'h', 'u', '${kind}', 'cold', 's', '{}', 1, 2)`,
        )
        .execute(db)
    await add('g', 'model-disagrees')
    await expect(add('i', 'model-disagrees')).rejects.toThrow(/UNIQUE/)
    await expect(add('k', 'no-such-kind')).rejects.toThrow(/CHECK/)
    await expect(sql`delete from flag where id = 'f'`.execute(db)).rejects.toThrow(/FOREIGN KEY/)
  })
})
