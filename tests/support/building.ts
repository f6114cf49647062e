/** An invented building in a database, unit by unit as its description says; what tests of the evaluation begin with. */
import type { PropertyId, TenancyId, UnitId } from '#db/ids.ts'
import { inTransaction, type OrgDb } from '#db/org-db.ts'
import { addHardwareRevision } from '#db/queries/hardware.ts'
import { addPreference } from '#db/queries/preference.ts'
import { addProperty, changePropertyTariff } from '#db/queries/property.ts'
import { addTariff, addTariffVersion } from '#db/queries/tariff.ts'
import { addTenancy } from '#db/queries/tenancy.ts'
import { addUnit } from '#db/queries/unit.ts'
import { readUrdb } from '#lib/core/tariff/urdb-import.ts'
import type { DemoBuilding, DemoUnit } from '#lib/demo/buildings.ts'
import { NOW_MS } from './factories.ts'

export interface MadeUnit {
  readonly unitId: UnitId
  readonly tenancyId: TenancyId | null
}
export interface MadeBuilding {
  readonly propertyId: PropertyId
  readonly units: ReadonlyMap<string, MadeUnit>
}

/** Recorded in winter, on the day before the tests' day, so that no clock has changed since. */
const RECORDED_AT_MS = NOW_MS - 86_400_000

export const makeBuilding = (db: OrgDb, building: DemoBuilding): Promise<MadeBuilding> =>
  inTransaction(db, async (trx) => {
    const propertyId = await addProperty(
      trx,
      {
        slug: building.slug,
        name: building.name,
        address: building.address,
        zone: building.zone,
        country: building.country,
        currency: building.currency,
        ruleProfile: building.ruleProfile,
        hygienePolicy: 'store-60',
        supplyVoltageV: building.supplyVoltageV,
        phases: building.phases,
        serviceRatingA: building.serviceRatingA,
        baseLoadW: building.baseLoadW,
        climate: building.climate,
      },
      NOW_MS,
    )
    const read = readUrdb(building.rate.record, { currency: building.currency, minorPerMajor: 100, effectiveFrom: '2025-01-01' })
    if (read.status === 'read') {
      const tariffId = await addTariff(trx, { name: building.rate.name, zone: building.zone, createdAtMs: NOW_MS })
      const { effectiveFrom } = read.version
      await addTariffVersion(trx, {
        tariffId,
        effectiveFrom,
        version: read.version,
        record: building.rate.record,
        source: 'invented',
        createdAtMs: NOW_MS,
      })
      await changePropertyTariff(trx, propertyId, tariffId)
    }
    const units = new Map<string, MadeUnit>()
    for (const unit of building.units) {
      const unitId = await addUnit(trx, { propertyId, code: unit.code, floor: unit.floor, stack: unit.stack }, NOW_MS)
      await addHardwareRevision(trx, {
        unitId,
        installation: unit.installation,
        reason: 'as found',
        visitId: null,
        recordedBy: null,
        recordedAtMs: RECORDED_AT_MS,
      })
      units.set(unit.code, { unitId, tenancyId: await moveIn(unit, unitId) })
    }
    return { propertyId, units }

    async function moveIn({ week, code }: DemoUnit, unitId: UnitId): Promise<TenancyId | null> {
      if (!week) return null
      const email = `${code.toLowerCase().replaceAll(' ', '-')}@tenants.example`
      const tenancyId = await addTenancy(
        trx,
        { unitId, personId: null, name: `Tenant of ${code}`, email, fromDay: '2026-01-01', toDay: null },
        NOW_MS,
      )
      await addPreference(trx, { tenancyId, week, willing: [], setBy: null, setAtMs: NOW_MS })
      return tenancyId
    }
  })
