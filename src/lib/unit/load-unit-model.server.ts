/** A unit's coming week for the model: its newest record, its tenants' showers, the site's mains and prices. */
import type { OrgDb } from '#db/org-db.ts'
import type { Property } from '#db/queries/property.ts'
import type { Unit } from '#db/queries/unit.ts'
import { requireRole } from '#lib/auth/permission.ts'
import { unitInputs } from '#lib/evaluation/load-inputs.server.ts'
import type { PriceTable } from '#lib/evaluation/types.ts'
import { requireUnitAccess } from '#lib/hardware/record-hardware.server.ts'
import { durationOf, unitDayOf, wantedOf } from '#lib/evaluation/unit-day.ts'
import type { UnitModel } from './model.ts'
import { otherClockOf } from './other-clock.ts'

const DAYS = 7

/** `null` while nothing is recorded about the heater. */
export async function loadUnitModel(
  db: OrgDb,
  { property, unit, nowMs }: { readonly property: Property; readonly unit: Unit; readonly nowMs: number },
): Promise<UnitModel | null> {
  requireRole(db, ['landlord', 'electrician'], 'see a unit’s model')
  await requireUnitAccess(db, unit.id)
  const inputs = await unitInputs(db, { property, nowMs, days: DAYS }, unit)
  const { site, contexts, units } = inputs
  const [own] = units
  if (!own?.hardware) return null
  const { hardware, wants } = own
  const duration = durationOf(hardware)
  const tables: PriceTable[] = []
  const known = new Map<string, number>()
  const indexOf = (table: PriceTable | null): number | null => {
    if (!table) return null
    const key = JSON.stringify(table)
    const index = known.get(key) ?? tables.push(table) - 1
    known.set(key, index)
    return index
  }
  return {
    days: contexts.map((context, index) => ({
      day: context.day,
      dayMin: context.dayMin,
      clockChange: context.clockChange,
      peaks: context.peaks,
      table: indexOf(context.prices),
      unit: unitDayOf({ site, context, hardware, duration, ...wantedOf(wants[index]) }),
    })),
    otherClock: otherClockOf(inputs),
    tables,
    currency: property.currency,
    climate: site.climate,
    policy: site.hygienePolicy,
  }
}
