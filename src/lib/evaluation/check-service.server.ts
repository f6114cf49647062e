/** Opens or closes the property's over-service flag from the runs that now stand. */
import type { OrgTrx } from '#db/org-db.ts'
import { listOpenFlags, listStandingDismissals } from '#db/queries/flag.ts'
import { listExpectedRuns } from '#db/queries/run.ts'
import { dayBounds } from '#lib/core/time/civil.ts'
import type { PropertyInputs } from './load-inputs.server.ts'
import { overServiceFinding } from './over-service.ts'
import { type FlagChanges, reconcileFlags } from './reconcile-flags.server.ts'

export async function checkService(trx: OrgTrx, inputs: Omit<PropertyInputs, 'units'>, nowMs: number): Promise<FlagChanges> {
  const { property, site, fromDay, toDay } = inputs
  const range = { startsAtMs: dayBounds(fromDay, site.zone).startsAtMs, endsAtMs: dayBounds(toDay, site.zone).startsAtMs }
  const runs = await listExpectedRuns(trx, property.id, range.startsAtMs, range.endsAtMs)
  const finding = overServiceFinding({ service: site, zone: site.zone, runs, range })
  const open = await listOpenFlags(trx, { propertyId: property.id })
  return reconcileFlags(trx, {
    propertyId: property.id,
    subjects: [{ unitId: null, findings: finding ? [finding] : [], keepOthers: false }],
    openFlags: open.filter((flag) => flag.unitId === null),
    dismissals: await listStandingDismissals(trx, property.id, fromDay),
    nowMs,
  })
}
