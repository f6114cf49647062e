/**
 * Tells each landlord once a day which flags of a property are open, when that has changed since they were last told. It is the
 * job's, or a landlord's.
 */
import { createHash } from 'node:crypto'
import { inTransaction, type OrgDb, type OrgTrx } from '#db/org-db.ts'
import type { PropertyId, UnitId } from '#db/ids.ts'
import { findOrganisationSlug } from '#db/queries/address.ts'
import { type Flag, listClosedFlags, listOpenFlags } from '#db/queries/flag.ts'
import { findLastCause } from '#db/queries/message.ts'
import { listMembers, type Member } from '#db/queries/organisation.ts'
import { findProperty, type Property } from '#db/queries/property.ts'
import { unsubscribedFrom } from '#db/queries/suppression.ts'
import { listUnits } from '#db/queries/unit.ts'
import { requireRole } from '#lib/auth/permission.ts'
import { dayBounds } from '#lib/core/time/civil.ts'
import { notFound } from '#lib/http/app-error.ts'
import { queueMessage } from '#lib/mail/queue-message.server.ts'
import { unsubscribeLink } from '#lib/mail/unsubscribe.server.ts'
import { flagSummaryLetter } from './flag-summary-letter.server.ts'

export interface FlagSummary {
  readonly propertyId: PropertyId
  /** The property's local day of which it speaks; one letter a landlord and day. */
  readonly day: string
  readonly nowMs: number
}
export interface FlagSummaryCounts {
  readonly open: number
  readonly queued: number
  /** Landlords who know all of it already. */
  readonly unchanged: number
}

const CLOSED_LIMIT = 200

export async function sendFlagSummary(db: OrgDb, { propertyId, day, nowMs }: FlagSummary): Promise<FlagSummaryCounts> {
  requireRole(db, ['landlord'], 'send the list of flags')
  return inTransaction(db, async (trx) => {
    const property = await findProperty(trx, propertyId)
    if (!property) throw notFound('property')
    const state = {
      property,
      slug: await findOrganisationSlug(trx, propertyId),
      codes: new Map<UnitId, string>((await listUnits(trx, propertyId)).map((unit) => [unit.id, unit.code])),
      open: await listOpenFlags(trx, { propertyId }),
      closed: await listClosedFlags(trx, { propertyId, limit: CLOSED_LIMIT }),
      day,
      nowMs,
    }
    const stopped = await unsubscribedFrom(trx, 'flag-summary')
    const counts = { open: state.open.length, queued: 0, unchanged: 0 }
    for (const member of await listMembers(trx)) {
      if (member.role !== 'landlord' || stopped.has(member.email)) continue
      if (await tell(trx, member, state)) counts.queued++
      else counts.unchanged++
    }
    return counts
  })
}

interface FlagState {
  readonly property: Property
  readonly slug: string | null
  readonly codes: ReadonlyMap<UnitId, string>
  readonly open: readonly Flag[]
  readonly closed: readonly Flag[]
  readonly day: string
  readonly nowMs: number
}

async function tell(trx: OrgTrx, landlord: Member, { open, closed, day, nowMs, ...place }: FlagState): Promise<boolean> {
  const { property } = place
  const prefix = `${property.id}:`
  const last = await findLastCause(trx, { toEmail: landlord.email, kind: 'flag-summary', prefix })
  const [lastDay, lastFlags] = last?.cause.slice(prefix.length).split(/[:|]/) ?? []
  const flags = fingerprint(open)
  if (lastDay === day || lastFlags === flags || (!last && open.length === 0)) return false
  const sinceMs = last?.queuedAtMs ?? null
  const unsubscribe = unsubscribeLink(trx.scope.organisationId, { personId: landlord.personId, letters: 'flag-summary' }, nowMs)
  const queued = await queueMessage(trx, {
    propertyId: property.id,
    unitId: null,
    personId: landlord.personId,
    toEmail: landlord.email,
    kind: 'flag-summary',
    cause: `${prefix}${day}:${flags}`,
    ...flagSummaryLetter({
      ...place,
      open,
      closedSince: sinceMs === null ? [] : closedAfter(closed, sinceMs),
      sinceMs,
      nowMs,
      unsubscribe,
    }),
    nowMs,
    // The next day's says more; one that could not leave by then does not count as told.
    expiresAtMs: dayBounds(day, property.zone).endsAtMs,
  })
  return queued === 'queued'
}

const closedAfter = (closed: readonly Flag[], sinceMs: number): readonly Flag[] =>
  closed.filter((flag) => flag.closed !== null && flag.closed.atMs > sinceMs)

/** Of which flags are open and how severe; figures that drift from night to night are no news. */
const fingerprint = (open: readonly Flag[]): string =>
  createHash('sha256')
    .update(
      open
        .map(({ id, severity }) => `${id} ${severity}`)
        .sort()
        .join('\n'),
    )
    .digest('base64url')
    .slice(0, 22)
