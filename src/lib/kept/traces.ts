/** Where the traces of a tenancy's showers are: its unit, its address, its local days. Pure. */
import type { Traces } from '#db/queries/kept.ts'
import type { Property } from '#db/queries/property.ts'
import type { Tenancy } from '#db/queries/tenancy.ts'
import { addDays, civilOf, dayBounds } from '#lib/core/time/civil.ts'
import { HORIZON_DAYS } from '#lib/evaluation/load-inputs.server.ts'

interface TracesCase {
  readonly tenancy: Tenancy
  readonly property: Pick<Property, 'id' | 'zone'>
  readonly nowMs: number
}

export function tracesOf({ tenancy, property, nowMs }: TracesCase): Traces {
  const { id: tenancyId, unitId, email, fromDay } = tenancy
  const beyond = addDays(civilOf(nowMs, property.zone).day, HORIZON_DAYS)
  const toDay = tenancy.toDay ?? (beyond > fromDay ? beyond : addDays(fromDay, 1))
  const fromMs = dayBounds(fromDay, property.zone).startsAtMs
  return { tenancyId, unitId, propertyId: property.id, email, fromDay, toDay, fromMs, toMs: dayBounds(toDay, property.zone).startsAtMs }
}
