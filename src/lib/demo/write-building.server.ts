/** Writes one invented building: property, tariff, units, hardware, tenants and their showers. */
import type { PersonId, PropertyId, TenancyId, UnitId } from '#db/ids.ts'
import type { OrgTrx } from '#db/org-db.ts'
import { addHardwareRevision } from '#db/queries/hardware.ts'
import { addPreference } from '#db/queries/preference.ts'
import { addProperty, changePropertyTariff } from '#db/queries/property.ts'
import { addTariff, addTariffVersion } from '#db/queries/tariff.ts'
import { addTenancy } from '#db/queries/tenancy.ts'
import { addUnit } from '#db/queries/unit.ts'
import { readUrdb } from '#lib/core/tariff/urdb-import.ts'
import { usualPolicy } from '#lib/property/hygiene-choice.ts'
import type { DemoBuilding, DemoUnit } from './buildings.ts'

export interface DemoTenant {
  readonly name: string
  readonly email: string
  readonly personId: PersonId | null
}
export interface BuildingWrite {
  readonly building: DemoBuilding
  readonly tenantOf: (unit: DemoUnit, index: number) => DemoTenant
  readonly recordedAtMs: number
  readonly livingSince: string
}
export interface MadeUnit {
  readonly unitId: UnitId
  readonly tenancyId: TenancyId | null
}
export interface MadeBuilding {
  readonly propertyId: PropertyId
  readonly units: ReadonlyMap<string, MadeUnit>
}

export async function writeBuilding(trx: OrgTrx, { building, tenantOf, recordedAtMs, livingSince }: BuildingWrite): Promise<MadeBuilding> {
  const propertyId = await addProperty(trx, { ...building, hygienePolicy: usualPolicy(building.country) }, recordedAtMs)
  await changePropertyTariff(trx, propertyId, await writeTariff(trx, building, recordedAtMs))
  const units = new Map<string, MadeUnit>()
  for (const [index, unit] of building.units.entries()) {
    const unitId = await addUnit(trx, { propertyId, code: unit.code, floor: unit.floor, stack: unit.stack }, recordedAtMs)
    await addHardwareRevision(trx, {
      unitId,
      installation: unit.installation,
      reason: 'First record',
      visitId: null,
      recordedBy: null,
      recordedAtMs,
    })
    if (!unit.week) {
      units.set(unit.code, { unitId, tenancyId: null })
      continue
    }
    const tenancyId = await addTenancy(trx, { unitId, ...tenantOf(unit, index), fromDay: livingSince, toDay: null }, recordedAtMs)
    await addPreference(trx, { tenancyId, week: unit.week, willing: [], setBy: null, setAtMs: recordedAtMs })
    units.set(unit.code, { unitId, tenancyId })
  }
  return { propertyId, units }
}

async function writeTariff(trx: OrgTrx, { rate, currency, zone }: DemoBuilding, createdAtMs: number) {
  const read = readUrdb(rate.record, { currency, minorPerMajor: 100, effectiveFrom: '2025-01-01' })
  if (read.status === 'refused') throw new Error(`The demo's own rate is refused: ${read.problems[0]?.message ?? ''}`)
  const tariffId = await addTariff(trx, { name: rate.name, zone, createdAtMs })
  const { version } = read
  await addTariffVersion(trx, {
    tariffId,
    effectiveFrom: version.effectiveFrom,
    version,
    record: rate.record,
    source: `${version.utility}: ${version.name}`,
    createdAtMs,
  })
  return tariffId
}
