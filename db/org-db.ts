/** The only door to organisation-owned rows: every statement it starts is already narrowed to one organisation. */
import type {
  DeleteQueryBuilder,
  DeleteResult,
  Insertable,
  InsertQueryBuilder,
  InsertResult,
  Kysely,
  SelectQueryBuilder,
  Updateable,
  UpdateQueryBuilder,
  UpdateResult,
} from 'kysely'
import type { Role } from './enums.ts'
import type { Brand, OrganisationId, PersonId } from './ids.ts'
import type { Database } from './schema.ts'

/** Who acts: a person with their roles in this organisation, or a job by its name. */
export type Actor =
  | { readonly kind: 'person'; readonly personId: PersonId; readonly roles: readonly Role[] }
  | { readonly kind: 'job'; readonly name: string }

/** Proof that somebody may act in an organisation; minted in `src/lib/auth` and nowhere else. */
export type OrgScope = Brand<{ readonly organisationId: OrganisationId; readonly actor: Actor }, 'OrgScope'>

export type OrgTable = { [T in keyof Database]: Database[T] extends { organisation_id: OrganisationId } ? T : never }[keyof Database]

/** A row without its owner; `never` also refuses a wider variable that carries one. */
type Unowned<Row> = Omit<Row, 'organisation_id'> & { organisation_id?: never }

export interface OrgDb {
  readonly scope: OrgScope
  selectFrom<T extends OrgTable>(table: T): SelectQueryBuilder<Database, T, object>
  insertInto<T extends OrgTable>(table: T, row: Unowned<Insertable<Database[T]>>): InsertQueryBuilder<Database, T, InsertResult>
  updateTable<T extends OrgTable>(table: T, patch: Unowned<Updateable<Database[T]>>): UpdateQueryBuilder<Database, T, T, UpdateResult>
  deleteFrom<T extends OrgTable>(table: T): DeleteQueryBuilder<Database, T, DeleteResult>
}

/** An OrgDb whose statements commit or fail together; writers ask for this. */
export interface OrgTrx extends OrgDb {
  readonly inTransaction: true
}

function statements(db: Kysely<Database>, scope: OrgScope): Omit<OrgDb, 'scope'> {
  // Kysely can't resolve a column of a generic table name, so each owned table is treated as one
  // stand-in table here. Safe because OrgTable only admits tables that have `organisation_id`.
  const owned = db as unknown as Kysely<{ owned: { organisation_id: OrganisationId } }>
  const { organisationId } = scope
  return {
    selectFrom: (table: OrgTable) =>
      owned.selectFrom(table as 'owned').where(`${table}.organisation_id` as 'owned.organisation_id', '=', organisationId),
    insertInto: (table: OrgTable, row: object) => owned.insertInto(table as 'owned').values({ ...row, organisation_id: organisationId }),
    updateTable: (table: OrgTable, patch: object) =>
      owned
        .updateTable(table as 'owned')
        .set(patch)
        .where('organisation_id', '=', organisationId),
    deleteFrom: (table: OrgTable) => owned.deleteFrom(table as 'owned').where('organisation_id', '=', organisationId),
  } as unknown as Omit<OrgDb, 'scope'>
}

// An OrgDb remembers its connection so that `inTransaction` can open a transaction on it; nobody else can reach it.
const connections = new WeakMap<OrgDb, Kysely<Database>>()

export function orgDb(db: Kysely<Database>, scope: OrgScope): OrgDb {
  const narrowed: OrgDb = { scope, ...statements(db, scope) }
  connections.set(narrowed, db)
  return narrowed
}

/** Runs `work` in one transaction. Inside, use only what `work` was given: a query on the outer OrgDb would wait for itself for ever. */
export async function inTransaction<T>(db: OrgDb, work: (trx: OrgTrx) => Promise<T>): Promise<T> {
  const connection = connections.get(db)
  if (!connection) throw new Error('inTransaction was given an OrgDb that is already in a transaction or was not made by orgDb')
  return connection.transaction().execute((trx) => work({ scope: db.scope, ...statements(trx, db.scope), inTransaction: true }))
}

/** Narrows a transaction that is already open; for verbs that write a person and their organisation's rows together. */
export function orgTrx(trx: Kysely<Database> & { readonly isTransaction: true }, scope: OrgScope): OrgTrx {
  return { scope, ...statements(trx, scope), inTransaction: true }
}
