/** What the clock page shows: the rounds of the next two changes with what is planned for them, and what a power cut does. */
import type { UnitId } from '#db/ids.ts'
import type { OrgDb } from '#db/org-db.ts'
import { listCurrentHardware } from '#db/queries/hardware.ts'
import { listMembers } from '#db/queries/organisation.ts'
import type { Property } from '#db/queries/property.ts'
import { listUnits } from '#db/queries/unit.ts'
import { listVisitsOfProperty, type Visit } from '#db/queries/visit.ts'
import { requireRole } from '#lib/auth/permission.ts'
import { afterOutage } from '#lib/core/controller/outage.ts'
import { MIN_PER_HOUR } from '#lib/core/units.ts'
import { electriciansOf } from '#lib/visit/electricians-of.server.ts'
import { causeOf, type RoundUnit, roundsOf } from './round.ts'
import { outageHSchema } from './schemas.ts'

/** Units with hardware on record, in the order of their codes; those without are counted. */
export async function roundUnits(
  db: OrgDb,
  property: Property,
): Promise<{ readonly units: readonly RoundUnit[]; readonly unknown: number }> {
  const hardware = await listCurrentHardware(db, property.id)
  const all = await listUnits(db, property.id)
  const units = all.flatMap(({ id, code }): RoundUnit[] => {
    const record = hardware.get(id)
    return record ? [{ unitId: id, code, controller: record.installation.controller, recordedAtMs: record.recordedAtMs }] : []
  })
  return { units, unknown: all.length - units.length }
}

/** Visits of a cause that stand or were made, by unit; a cancelled one does not count. */
export const visitsFor = (visits: readonly Visit[], cause: string): ReadonlyMap<UnitId, Visit> =>
  new Map(visits.filter((visit) => visit.state !== 'cancelled' && visit.proposal.cause === cause).map((visit) => [visit.unitId, visit]))

interface Asked {
  readonly property: Property
  readonly nowMs: number
  /** As typed into the address. */
  readonly outage: string | null
}

export async function loadClockRound(db: OrgDb, { property, nowMs, outage }: Asked) {
  requireRole(db, ['landlord'], 'plan a round')
  const { units, unknown } = await roundUnits(db, property)
  const visits = await listVisitsOfProperty(db, property.id)
  const names = new Map((await listMembers(db)).map((member) => [member.personId, member.name]))
  const outageH = outageHSchema.parse(outage ?? undefined)
  return {
    property,
    unknown,
    switches: units.filter(({ controller }) => controller.kind === 'time-switch').length,
    rounds: roundsOf(units, { zone: property.zone, nowMs }).map((round) => ({
      ...round,
      planned: visitsFor(visits, causeOf(round.change)),
    })),
    electricians: await electriciansOf(db, property.id),
    nameOf: (visit: Visit): string => names.get(visit.electricianId) ?? 'somebody who has left',
    outageH,
    afterOutage: units
      .filter(({ controller }) => controller.kind === 'time-switch' || controller.kind === 'supplier-contactor')
      .map((unit) => ({ unit, effect: afterOutage(unit.controller, outageH * MIN_PER_HOUR) }))
      .filter(({ effect }) => effect.status !== 'keeps'),
  }
}

export type ClockRoundPage = Awaited<ReturnType<typeof loadClockRound>>
