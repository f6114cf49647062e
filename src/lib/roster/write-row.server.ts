/** Writes what one roster row changes, within the import's transaction; what stays the same is not written again. */
import type { PropertyId, TenancyId, UnitId } from '#db/ids.ts'
import type { OrgTrx } from '#db/org-db.ts'
import { addHardwareRevision } from '#db/queries/hardware.ts'
import { addPreference } from '#db/queries/preference.ts'
import { addTenancy, changeTenancyEnd, changeTenancyName } from '#db/queries/tenancy.ts'
import { addUnit, changeUnitPlace } from '#db/queries/unit.ts'
import { actingPerson } from '#lib/auth/permission.ts'
import type { RosterRow } from './read-roster.ts'
import type { TenantChange } from './read-tenant.ts'

interface Write {
  readonly row: RosterRow
  readonly propertyId: PropertyId
  readonly nowMs: number
}

/** Answers the tenancy that the row has begun, if it has. */
export async function writeRow(trx: OrgTrx, { row, propertyId, nowMs }: Write): Promise<TenancyId | null> {
  const { code, floor, stack, installation, week, willing } = row
  const recordedBy = actingPerson(trx)
  const unitId = row.unitId ?? (await addUnit(trx, { propertyId, code, floor, stack }, nowMs))
  if (row.movesPlace) await changeUnitPlace(trx, unitId, { floor, stack })
  if (installation)
    await addHardwareRevision(trx, { unitId, installation, reason: 'Roster import', visitId: null, recordedBy, recordedAtMs: nowMs })
  const { tenancyId, begun } = await writeTenant(trx, { tenant: row.tenant, unitId, nowMs })
  if (week && tenancyId) await addPreference(trx, { tenancyId, week, willing, setBy: recordedBy, setAtMs: nowMs })
  return begun ? tenancyId : null
}

interface WriteTenant {
  readonly tenant: TenantChange
  readonly unitId: UnitId
  readonly nowMs: number
}

async function writeTenant(
  trx: OrgTrx,
  { tenant, unitId, nowMs }: WriteTenant,
): Promise<{ readonly tenancyId: TenancyId | null; readonly begun: boolean }> {
  switch (tenant.kind) {
    case 'nothing-said':
      return { tenancyId: tenant.living?.id ?? null, begun: false }
    case 'stays':
      if (tenant.newName) await changeTenancyName(trx, tenant.living.id, tenant.newName)
      return { tenancyId: tenant.living.id, begun: false }
    case 'moves-in': {
      const { name, email, fromDay, ends } = tenant
      if (ends) await changeTenancyEnd(trx, ends.id, fromDay)
      return { tenancyId: await addTenancy(trx, { unitId, personId: null, name, email, fromDay, toDay: null }, nowMs), begun: true }
    }
  }
}
