/** The door to organisation-owned rows: what it refuses at compile time, and what it narrows at run time. */
import type { Kysely } from 'kysely'
import { beforeEach, describe, expect, it } from 'vitest'
import { newId, type OrganisationId, type PersonId, type PropertyId, type TariffId } from '#db/ids.ts'
import { inTransaction, type OrgDb, type OrgScope, type OrgTrx, orgDb } from '#db/org-db.ts'
import type { Database } from '#db/schema.ts'
import { scopeForNewMember } from '#lib/auth/scope.server.ts'
import { freshDatabase } from '../support/database.ts'

const NOW_MS = Date.UTC(2026, 11, 1, 12)

async function twoOrganisations(): Promise<{ db: Kysely<Database>; ours: OrgDb; theirs: OrgDb }> {
  const db = await freshDatabase()
  const person = newId<PersonId>()
  await db
    .insertInto('person')
    .values({ id: person, email: 'a@b.example', name: 'A', password_hash: null, email_confirmed_at_ms: NOW_MS, created_at_ms: NOW_MS })
    .execute()
  const open = async (slug: string): Promise<OrgDb> => {
    const id = newId<OrganisationId>()
    await db.insertInto('organisation').values({ id, slug, name: slug, measure: 'metric', created_at_ms: NOW_MS }).execute()
    return orgDb(db, scopeForNewMember(id, person, ['landlord']))
  }
  return { db, ours: await open('ours'), theirs: await open('theirs') }
}

const addTariff = async (db: OrgDb, name: string): Promise<TariffId> => {
  const id = newId<TariffId>()
  await inTransaction(db, (trx) => trx.insertInto('tariff', { id, name, zone: 'Europe/London', created_at_ms: NOW_MS }).execute())
  return id
}

describe('orgDb', () => {
  let world: Awaited<ReturnType<typeof twoOrganisations>>
  beforeEach(async () => {
    world = await twoOrganisations()
  })

  it("finds nothing of another organisation's rows", async () => {
    const id = await addTariff(world.theirs, 'Theirs')
    expect(await world.ours.selectFrom('tariff').where('tariff.id', '=', id).selectAll('tariff').execute()).toEqual([])
    expect(await world.theirs.selectFrom('tariff').where('tariff.id', '=', id).selectAll('tariff').execute()).toHaveLength(1)
  })

  it("changes and deletes nothing of another organisation's rows", async () => {
    const id = await addTariff(world.theirs, 'Theirs')
    await world.ours.updateTable('tariff', { name: 'Taken' }).where('id', '=', id).execute()
    await world.ours.deleteFrom('tariff').where('id', '=', id).execute()
    const row = await world.db.selectFrom('tariff').where('id', '=', id).selectAll().executeTakeFirstOrThrow()
    expect(row.name).toBe('Theirs')
  })

  it('names the organisation in the compiled SQL of each kind of statement', () => {
    const { ours } = world
    const compiled = [
      ours.selectFrom('tariff').selectAll('tariff').compile().sql,
      ours.updateTable('tariff', { name: 'x' }).compile().sql,
      ours.deleteFrom('tariff').compile().sql,
      ours.insertInto('tariff', { id: newId<TariffId>(), name: 'x', zone: 'UTC', created_at_ms: 0 }).compile().sql,
    ]
    for (const sql of compiled) expect(sql).toContain('"organisation_id"')
  })

  it('lets SQLite refuse a row that points across organisations', async () => {
    const theirTariff = await addTariff(world.theirs, 'Theirs')
    const insert = inTransaction(world.ours, (trx) =>
      trx
        .insertInto('property', {
          id: newId<PropertyId>(),
          slug: 'p',
          name: 'P',
          address: '',
          zone: 'UTC',
          country: 'GB',
          currency: 'GBP',
          rule_profile: 'gb-bs7671',
          hygiene_policy: 'store-60',
          supply_voltage_v: 230,
          phases: 1,
          service_rating_a: 100,
          base_load_w: 0,
          climate: '{}',
          tariff_id: theirTariff,
          sending_paused_at_ms: null,
          created_at_ms: NOW_MS,
        })
        .execute(),
    )
    await expect(insert).rejects.toThrow(/FOREIGN KEY/)
  })

  it('keeps nothing of a transaction that throws', async () => {
    const failed = inTransaction(world.ours, async (trx) => {
      await trx.insertInto('tariff', { id: newId<TariffId>(), name: 'half', zone: 'UTC', created_at_ms: NOW_MS }).execute()
      throw new Error('half-way')
    })
    await expect(failed).rejects.toThrow('half-way')
    expect(await world.ours.selectFrom('tariff').selectAll('tariff').execute()).toEqual([])
  })

  it('does not compile when misused', () => {
    const misuses = (ours: OrgDb, trx: OrgTrx, db: Kysely<Database>, wider: { organisation_id: OrganisationId; name: string }) => {
      const reads = (scoped: OrgDb) => scoped.scope
      const writes = (scoped: OrgTrx) => scoped.inTransaction
      // @ts-expect-error TS2345: a bare connection is not a scope.
      reads(db)
      // @ts-expect-error TS2345: a write asks for a transaction.
      writes(ours)
      // @ts-expect-error TS2345: a table without an organisation is not behind this door.
      ours.selectFrom('person')
      // @ts-expect-error TS2322: the organisation comes from the scope, never from a row.
      trx.updateTable('tariff', { organisation_id: newId<OrganisationId>() })
      // @ts-expect-error TS2345: nor smuggled in a wider variable.
      trx.updateTable('tariff', wider)
      // @ts-expect-error TS2345: a plain string is not an id.
      ours.selectFrom('tariff').where('tariff.id', '=', 'abc' as string)
      // @ts-expect-error TS2741: a literal is not a scope.
      const forged: OrgScope = { organisationId: newId<OrganisationId>(), actor: { kind: 'job', name: 'x' } }
      return forged
    }
    expect(misuses).toBeTypeOf('function')
  })
})
