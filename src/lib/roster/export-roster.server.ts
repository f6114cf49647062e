/** Writes the roster of a property in the columns that the import reads. */
import type { OrgDb } from '#db/org-db.ts'
import { listCurrentHardware } from '#db/queries/hardware.ts'
import { currentPreferences } from '#db/queries/preference.ts'
import type { Property } from '#db/queries/property.ts'
import { listTenanciesEver, tenanciesByUnit } from '#db/queries/tenancy.ts'
import { listUnits } from '#db/queries/unit.ts'
import { requireRole } from '#lib/auth/permission.ts'
import { civilOf } from '#lib/core/time/civil.ts'
import { tenancyFrom } from '#lib/tenancy/hand-over.ts'
import { type ColumnName, COLUMNS, csvLine } from './columns.ts'
import { hardwareCells } from './hardware-cells.ts'
import { formatShowers } from './programme-text.ts'

export async function exportRoster(db: OrgDb, property: Property, nowMs: number): Promise<string> {
  requireRole(db, ['landlord'], 'export the roster')
  const day = civilOf(nowMs, property.zone).day
  const hardware = await listCurrentHardware(db, property.id)
  const tenancies = tenanciesByUnit(await listTenanciesEver(db, property.id))
  const preferences = await currentPreferences(db, property.id)
  const lines = (await listUnits(db, property.id)).map((unit) => {
    const tenancy = tenancyFrom(tenancies.get(unit.id) ?? [], day)
    const week = tenancy && preferences.get(tenancy.id)?.week
    const installation = hardware.get(unit.id)?.installation
    const cells: Partial<Record<ColumnName, string>> = {
      unit: unit.code,
      floor: unit.floor === null ? '' : String(unit.floor),
      stack: unit.stack ?? '',
      ...(tenancy ? { tenant: tenancy.name, email: tenancy.email, from: tenancy.fromDay } : {}),
      ...(installation ? hardwareCells(installation) : {}),
      ...(week ? { showers: formatShowers(week.map((showers) => [...showers])) } : {}),
    }
    return csvLine(COLUMNS.map((column) => cells[column.name] ?? ''))
  })
  return csvLine(COLUMNS.map((column) => column.name)) + lines.join('')
}
