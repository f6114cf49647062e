/** What the hardware form starts with: the newest revision, or an ordinary tank on the property's supply to be corrected. */
import type { OrgDb } from '#db/org-db.ts'
import { currentHardware } from '#db/queries/hardware.ts'
import type { Property } from '#db/queries/property.ts'
import { findUnitByCode } from '#db/queries/unit.ts'
import type { Installation } from '#lib/core/hardware/types.ts'
import { SHARE_ABOVE_UPPER_FRACTION } from '#lib/core/tank/defaults.ts'
import { notFound } from '#lib/http/app-error.ts'
import { requireUnitAccess } from './record-hardware.server.ts'

export async function loadHardwareForm(db: OrgDb, { property, code }: { readonly property: Property; readonly code: string }) {
  const unit = await findUnitByCode(db, property.id, code)
  if (!unit) throw notFound('unit')
  await requireUnitAccess(db, unit.id)
  const current = await currentHardware(db, unit.id)
  return { unit, installation: current?.installation ?? blankInstallation(property.supplyVoltageV), revision: current?.revision ?? 0 }
}

/** Everything about the circuit is not known until somebody looks. */
export const blankInstallation = (supplyVoltageV: number): Installation => ({
  load: {
    kind: 'storage-heater',
    tank: {
      nominalVolumeL: 150,
      actualVolumeL: null,
      heightM: null,
      loss: { kind: 'class', label: 'C' },
      upperElement: null,
      lowerElement: { ratedPowerW: 3_000, ratedVoltageV: supplyVoltageV },
      shareAboveUpperFraction: SHARE_ABOVE_UPPER_FRACTION,
      setPointC: 60,
      deadBandK: 5.5,
      ambientC: 20,
      mixingValveC: null,
    },
  },
  controller: { kind: 'dial', settingMin: 60, scaleMaxMin: 120, toleranceFraction: 0.1 },
  circuit: {
    supplyVoltageV,
    breakerA: null,
    conductor: null,
    lengthM: null,
    ambientC: null,
    groupedConductors: null,
    contactRatingA: null,
    contactRatingClass: null,
    polesSwitched: null,
    isolatorInSight: null,
    reliefValve: null,
    expansionVessel: null,
    closedSystem: null,
    extraLowVoltageSeparated: null,
    control: null,
  },
})
