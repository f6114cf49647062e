/** Tells the landlords of a property, once a change, which time switches run off after the next clock change and whom to ask. It is the job's, or a landlord's. */
import type { PropertyId } from '#db/ids.ts'
import { inTransaction, type OrgDb } from '#db/org-db.ts'
import { findOrganisationSlug } from '#db/queries/address.ts'
import { listMembers } from '#db/queries/organisation.ts'
import { findProperty } from '#db/queries/property.ts'
import { unsubscribedFrom } from '#db/queries/suppression.ts'
import { listVisitsOfProperty } from '#db/queries/visit.ts'
import { requireRole } from '#lib/auth/permission.ts'
import { notFound } from '#lib/http/app-error.ts'
import { queueMessage } from '#lib/mail/queue-message.server.ts'
import { unsubscribeLink } from '#lib/mail/unsubscribe.server.ts'
import { roundUnits, visitsFor } from './load-round.server.ts'
import { noticeLetter } from './notice-letter.server.ts'
import { causeOf, roundsOf } from './round.ts'

export interface ClockNoticeCounts {
  /** Switches that run off after the change. */
  readonly off: number
  readonly queued: number
}

export async function sendClockNotice(
  db: OrgDb,
  { propertyId, nowMs }: { readonly propertyId: PropertyId; readonly nowMs: number },
): Promise<ClockNoticeCounts> {
  requireRole(db, ['landlord'], 'plan a round')
  return inTransaction(db, async (trx) => {
    const property = await findProperty(trx, propertyId)
    if (!property) throw notFound('property')
    const [round] = roundsOf((await roundUnits(trx, property)).units, { zone: property.zone, nowMs })
    // Nobody is told that there is nothing to do.
    if (!round || round.visits.length + round.askSupplier.length === 0) return { off: 0, queued: 0 }
    const planned = visitsFor(await listVisitsOfProperty(trx, propertyId), causeOf(round.change))
    const slug = await findOrganisationSlug(trx, propertyId)
    const stopped = await unsubscribedFrom(trx, 'clock-change')
    let queued = 0
    for (const landlord of await listMembers(trx)) {
      if (landlord.role !== 'landlord' || stopped.has(landlord.email)) continue
      const unsubscribe = unsubscribeLink(trx.scope.organisationId, { personId: landlord.personId, letters: 'clock-change' }, nowMs)
      const outcome = await queueMessage(trx, {
        propertyId,
        unitId: null,
        personId: landlord.personId,
        toEmail: landlord.email,
        kind: 'clock-change',
        cause: `${propertyId}:${new Date(round.change.atMs).toISOString()}`,
        ...noticeLetter({ property, slug, round, isPlanned: (unitId) => planned.has(unitId), unsubscribe }),
        nowMs,
        expiresAtMs: round.change.atMs,
      })
      if (outcome === 'queued') queued++
    }
    return { off: round.visits.length, queued }
  })
}
