/** The schema as it really is after all migrations. */
import { sql } from 'kysely'
import { describe, expect, it } from 'vitest'
import { freshDatabase } from '../support/database.ts'

describe('migrateToLatest', () => {
  it('makes every table STRICT', async () => {
    const db = await freshDatabase()
    const tables = await sql<{ name: string; strict: number }>`
      select name, strict from pragma_table_list
      where schema = 'main' and type = 'table' and name not like 'sqlite%' and name not like 'kysely%'`.execute(db)
    expect(tables.rows.length).toBeGreaterThan(25)
    expect(tables.rows.filter((row) => row.strict !== 1)).toEqual([])
  })

  it('carries the organisation in every foreign key between two owned tables', async () => {
    const db = await freshDatabase()
    const keys = await sql<{ child: string; parent: string; id: number; columns: string }>`
      select m.name as child, f."table" as parent, f.id, group_concat(f."from") as columns
      from sqlite_master m join pragma_foreign_key_list(m.name) f
      where m.type = 'table' group by m.name, f.id`.execute(db)
    const owned = new Set(
      (
        await sql<{ name: string }>`
        select m.name from sqlite_master m join pragma_table_info(m.name) c on c.name = 'organisation_id' and c."notnull" = 1
        where m.type = 'table'`.execute(db)
      ).rows.map((row) => row.name),
    )
    const between = keys.rows.filter((key) => owned.has(key.child) && owned.has(key.parent))
    expect(between.length).toBeGreaterThan(20)
    expect(between.filter((key) => !key.columns.split(',').includes('organisation_id'))).toEqual([])
  })

  it('runs nothing the second time', async () => {
    const db = await freshDatabase()
    const { migrateToLatest } = await import('#db/migrate.ts')
    expect(await migrateToLatest(db)).toEqual([])
  })
})
