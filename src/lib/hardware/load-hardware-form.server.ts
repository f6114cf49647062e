/** What the hardware form starts with: the newest revision with its readings, or an ordinary tank on the property's supply to be corrected. */
import type { OrgDb } from '#db/org-db.ts'
import { currentHardware } from '#db/queries/hardware.ts'
import type { Property } from '#db/queries/property.ts'
import { findUnitByCode } from '#db/queries/unit.ts'
import { requireRole } from '#lib/auth/permission.ts'
import { notFound } from '#lib/http/app-error.ts'
import { blankInstallation } from './defaults.ts'
import { requireUnitAccess } from './record-hardware.server.ts'

export async function loadHardwareForm(db: OrgDb, { property, code }: { readonly property: Property; readonly code: string }) {
  requireRole(db, ['landlord', 'electrician'], 'record hardware')
  const unit = await findUnitByCode(db, property.id, code)
  if (!unit) throw notFound('unit')
  await requireUnitAccess(db, unit.id)
  const current = await currentHardware(db, unit.id)
  return {
    unit,
    installation: current?.installation ?? blankInstallation(property.supplyVoltageV),
    measured: current?.measured ?? [],
    revision: current?.revision ?? 0,
  }
}

export { blankInstallation } from './defaults.ts'
