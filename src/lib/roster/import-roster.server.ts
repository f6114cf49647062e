/** Imports a roster: all rows in one transaction or none; a known unit code is updated, an unknown one is added. */
import type { PropertyId, TenancyId } from '#db/ids.ts'
import { inTransaction, type OrgDb } from '#db/org-db.ts'
import { addAudit } from '#db/queries/audit.ts'
import { findProperty, type Property } from '#db/queries/property.ts'
import { requireRole } from '#lib/auth/permission.ts'
import { civilOf } from '#lib/core/time/civil.ts'
import { AppError, invalid, notFound } from '#lib/http/app-error.ts'
import { ROSTER_LIMITS } from './columns.ts'
import { loadKnown } from './load-known.server.ts'
import { readRoster, type Roster } from './read-roster.ts'
import { writeRow } from './write-row.server.ts'

export interface RosterRequest {
  readonly propertyId: PropertyId
  readonly text: string
  readonly nowMs: number
}
export interface RosterChange {
  readonly added: number
  readonly updated: number
  readonly unchanged: number
  /** Those that the import has begun. */
  readonly tenancies: readonly TenancyId[]
}

/** Reads without writing: what the preview shows. */
export async function previewRoster(db: OrgDb, { propertyId, text, nowMs }: RosterRequest): Promise<Roster> {
  requireRole(db, ['landlord'], 'import a roster')
  const property = await findProperty(db, propertyId)
  if (!property) throw notFound('property')
  return readChecked(db, { property, text, nowMs })
}

export async function importRoster(db: OrgDb, { propertyId, text, nowMs }: RosterRequest): Promise<RosterChange> {
  requireRole(db, ['landlord'], 'import a roster')
  return inTransaction(db, async (trx) => {
    const property = await findProperty(trx, propertyId)
    if (!property) throw notFound('property')
    const { rows, problems } = await readChecked(trx, { property, text, nowMs })
    if (problems.length > 0)
      throw invalid(
        problems.map(({ line, column, message }) => ({
          field: column ? `line ${line}, ${column}` : `line ${line}`,
          message: `Line ${line}${column && `, ${column}`}: ${message}`,
        })),
      )
    if (rows.length === 0) throw invalid([{ field: 'roster', message: 'The table has no rows. Nothing was changed.' }])
    const tenancies: TenancyId[] = []
    for (const row of rows) {
      const begun = await writeRow(trx, { row, propertyId, nowMs })
      if (begun) tenancies.push(begun)
    }
    const added = rows.filter((row) => row.unitId === null).length
    const updated = rows.filter((row) => row.unitId !== null && row.changes.length > 0).length
    const counts = { added, updated, unchanged: rows.length - added - updated }
    await addAudit(trx, { atMs: nowMs, action: 'import', subjectKind: 'roster', subjectId: propertyId, after: counts })
    return { ...counts, tenancies }
  })
}

interface Reading {
  readonly property: Property
  readonly text: string
  readonly nowMs: number
}

async function readChecked(db: OrgDb, { property, text, nowMs }: Reading): Promise<Roster> {
  if (Buffer.byteLength(text) > ROSTER_LIMITS.bytes)
    throw new AppError('too-large', `The table is over ${ROSTER_LIMITS.bytes / 1024} kB. Nothing was changed. Split it.`)
  const { supplyVoltageV, zone } = property
  return readRoster(text, { supplyVoltageV, today: civilOf(nowMs, zone).day, known: await loadKnown(db, property) })
}
