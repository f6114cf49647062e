/** Imports a roster: all rows in one transaction or none; a known unit code is updated, an unknown one is added. */
import type { PropertyId, TenancyId, UnitId } from '#db/ids.ts'
import { toJson } from '#db/json.ts'
import { inTransaction, type OrgDb, type OrgTrx } from '#db/org-db.ts'
import { addAudit } from '#db/queries/audit.ts'
import { addHardwareRevision, listCurrentHardware } from '#db/queries/hardware.ts'
import { addPreference } from '#db/queries/preference.ts'
import { findProperty, type Property } from '#db/queries/property.ts'
import { addTenancy, changeTenancyEnd, listTenanciesBetween, type Tenancy } from '#db/queries/tenancy.ts'
import { addUnit, changeUnitPlace, listUnits } from '#db/queries/unit.ts'
import { actingPerson, requireRole } from '#lib/auth/permission.ts'
import { civilOf } from '#lib/core/time/civil.ts'
import { AppError, invalid, notFound } from '#lib/http/app-error.ts'
import { ROSTER_LIMITS } from './columns.ts'
import { readRoster, type Roster, type RosterRow } from './read-roster.ts'

export interface RosterChange {
  readonly added: number
  readonly updated: number
  readonly tenancies: readonly TenancyId[]
}

/** Reads without writing: what the preview shows. */
export async function previewRoster(
  db: OrgDb,
  { propertyId, text, nowMs }: { readonly propertyId: PropertyId; readonly text: string; readonly nowMs: number },
): Promise<Roster> {
  requireRole(db, ['landlord'], 'import a roster')
  const property = await findProperty(db, propertyId)
  if (!property) throw notFound('property')
  return readChecked(property, text, nowMs)
}

export async function importRoster(
  db: OrgDb,
  { propertyId, text, nowMs }: { readonly propertyId: PropertyId; readonly text: string; readonly nowMs: number },
): Promise<RosterChange> {
  requireRole(db, ['landlord'], 'import a roster')
  return inTransaction(db, async (trx) => {
    const property = await findProperty(trx, propertyId)
    if (!property) throw notFound('property')
    const { rows, problems } = readChecked(property, text, nowMs)
    if (problems.length > 0)
      throw invalid(
        problems.map((problem) => ({
          field: `line ${problem.line}, ${problem.column}`,
          message: `Line ${problem.line}, ${problem.column}: ${problem.message}`,
        })),
      )
    if (rows.length === 0) throw invalid([{ field: 'roster', message: 'The table has no rows. Nothing was changed.' }])
    const change = await writeRows(trx, { property, rows, nowMs })
    await addAudit(trx, {
      atMs: nowMs,
      action: 'import',
      subjectKind: 'roster',
      subjectId: propertyId,
      after: { added: change.added, updated: change.updated },
    })
    return change
  })
}

function readChecked(property: Property, text: string, nowMs: number): Roster {
  if (Buffer.byteLength(text) > ROSTER_LIMITS.bytes)
    throw new AppError('too-large', 'The table is over 2 MB. Nothing was changed. Split it.')
  return readRoster(text, { supplyVoltageV: property.supplyVoltageV, today: civilOf(nowMs, property.zone).day })
}

interface Write {
  readonly property: Property
  readonly rows: readonly RosterRow[]
  readonly nowMs: number
}

async function writeRows(trx: OrgTrx, { property, rows, nowMs }: Write): Promise<RosterChange> {
  const known = new Map((await listUnits(trx, property.id)).map((unit) => [unit.code, unit.id]))
  const hardware = await listCurrentHardware(trx, property.id)
  const today = civilOf(nowMs, property.zone).day
  const present = await listTenanciesBetween(trx, property.id, { fromDay: today, toDay: '9999-12-31' })
  const tenancies: TenancyId[] = []
  let added = 0
  for (const row of rows) {
    const before = known.get(row.code)
    if (before) await changeUnitPlace(trx, before, { floor: row.floor, stack: row.stack })
    else added++
    const unitId = before ?? (await addUnit(trx, { propertyId: property.id, code: row.code, floor: row.floor, stack: row.stack }, nowMs))
    // A revision only where something differs, so that re-importing an export adds none.
    const current = hardware.get(unitId)
    if (row.installation && (!current || toJson(current.installation) !== toJson(row.installation))) {
      await addHardwareRevision(trx, {
        unitId,
        installation: row.installation,
        reason: 'Roster import',
        visitId: null,
        recordedBy: actingPerson(trx),
        recordedAtMs: nowMs,
      })
    }
    const moved = await moveIn(trx, { row, unitId, present: present.filter((tenancy) => tenancy.unitId === unitId), nowMs })
    if (moved.isNew && moved.tenancyId) tenancies.push(moved.tenancyId)
    if (row.week && moved.tenancyId)
      await addPreference(trx, { tenancyId: moved.tenancyId, week: row.week, willing: [], setBy: actingPerson(trx), setAtMs: nowMs })
  }
  return { added, updated: rows.length - added, tenancies }
}

interface MoveIn {
  readonly row: RosterRow
  readonly unitId: UnitId
  /** Tenancies of the unit that are in force or to come. */
  readonly present: readonly Tenancy[]
  readonly nowMs: number
}

/** Another e-mail is another tenant: the last tenancy before ends on the day the new one begins. */
async function moveIn(
  trx: OrgTrx,
  { row, unitId, present, nowMs }: MoveIn,
): Promise<{ readonly tenancyId: TenancyId | null; readonly isNew: boolean }> {
  const { tenant } = row
  const last = [...present].sort((one, other) => one.fromDay.localeCompare(other.fromDay)).at(-1)
  if (!tenant) return { tenancyId: last?.id ?? null, isNew: false }
  const same = present.find((tenancy) => tenancy.email === tenant.email)
  if (same) return { tenancyId: same.id, isNew: false }
  if (last) {
    if (tenant.fromDay <= last.fromDay) {
      const message = `Line ${row.line}: the new tenancy must begin after ${last.fromDay}, when the last one begins. Nothing was changed.`
      throw invalid([{ field: 'from', message }])
    }
    await changeTenancyEnd(trx, last.id, tenant.fromDay)
  }
  const fields = { unitId, personId: null, name: tenant.name, email: tenant.email, fromDay: tenant.fromDay, toDay: null }
  return { tenancyId: await addTenancy(trx, fields, nowMs), isNew: true }
}
