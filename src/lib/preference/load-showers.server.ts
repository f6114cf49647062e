/** The form of a week, and what the browser needs to answer while the tenant chooses: their own heater's figures and nothing else. */
import type { OrgDb } from '#db/org-db.ts'
import { currentHardware } from '#db/queries/hardware.ts'
import { findProperty } from '#db/queries/property.ts'
import { findUnit } from '#db/queries/unit.ts'
import { runDuration } from '#lib/core/controller/run-duration.ts'
import { runSource } from '#lib/core/controller/run-source.ts'
import type { UnitDay } from '#lib/core/tank/types.ts'
import { inletC } from '#lib/core/tank/inlet.ts'
import { addDays, elapsedOf } from '#lib/core/time/civil.ts'
import { loadCard } from '#lib/tip/load-card.server.ts'
import { formOf } from './form-fields.ts'

export async function loadShowers(db: OrgDb, nowMs: number) {
  const card = await loadCard(db, nowMs)
  const form = formOf(card.preference?.week.map((showers) => [...showers]) ?? null)
  const unit = await findUnit(db, card.tenancy.unitId)
  const property = unit && (await findProperty(db, unit.propertyId))
  const record = unit && (await currentHardware(db, unit.id))
  if (!property || !record) return { form, heater: null }
  const { installation, measured } = record
  const day = addDays(card.today, 1)
  const duration = runDuration(installation.controller, measured)
  const toElapsedMin = (minute: number) => elapsedOf(day, minute, property.zone)
  const heater: Omit<UnitDay, 'needs'> = {
    tank: installation.load.tank,
    supplyVoltageV: installation.circuit.supplyVoltageV,
    inletC: inletC(property.climate, day),
    runs: runSource(installation.controller, { day, duration, toElapsedMin, clockOffsetMin: 0 }),
    willing: [],
    start: { kind: 'periodic' },
  }
  return { form, heater }
}
