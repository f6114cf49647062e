/**
 * Writes a month's digest of a property and mails it to its owners, in one transaction. A second call for the same month writes
 * nothing unless a reason for a new edition is given: past editions never change. Needs no role: the job's, or a landlord's correction.
 */
import { type DigestId, newId, type PropertyId } from '#db/ids.ts'
import { inTransaction, type OrgDb, type OrgTrx } from '#db/org-db.ts'
import { findOrganisationSlug } from '#db/queries/address.ts'
import { addAudit } from '#db/queries/audit.ts'
import { addDigest, type Digest, type DigestFigures, findLastEdition } from '#db/queries/digest.ts'
import { listEvaluations } from '#db/queries/evaluation.ts'
import { countFeedback } from '#db/queries/feedback.ts'
import { listFlagsTouched } from '#db/queries/flag.ts'
import { listAccess, listMembers } from '#db/queries/organisation.ts'
import { findProperty, type Property } from '#db/queries/property.ts'
import { unsubscribedFrom } from '#db/queries/suppression.ts'
import { listUnits } from '#db/queries/unit.ts'
import { listVisitsOfProperty } from '#db/queries/visit.ts'
import { requireRole } from '#lib/auth/permission.ts'
import { addMonths, monthBounds } from '#lib/core/time/civil.ts'
import { notFound } from '#lib/http/app-error.ts'
import { queueMessage } from '#lib/mail/queue-message.server.ts'
import { unsubscribeLink } from '#lib/mail/unsubscribe.server.ts'
import { digestChart, digestLetter, type DigestLetterCase } from './digest-letter.server.ts'
import { monthFigures } from './figures.ts'

export interface WriteDigest {
  readonly propertyId: PropertyId
  readonly month: string
  readonly nowMs: number
  /** Why a new edition; without it a month that has one is left alone. */
  readonly reason?: string
}
export interface DigestCounts {
  readonly written: number
  readonly mailed: number
}

export async function writeDigest(db: OrgDb, { propertyId, month, nowMs, reason }: WriteDigest): Promise<DigestCounts> {
  requireRole(db, ['landlord'], 'write a digest')
  const property = await findProperty(db, propertyId)
  if (!property) throw notFound('property')
  const figures = await figuresOf(db, property, month)
  // A month before anything was evaluated has nothing to account for.
  if (figures.daysCovered === 0) return { written: 0, mailed: 0 }
  const id = newId<DigestId>()
  const slug = await findOrganisationSlug(db, propertyId)
  const chartBase64 = await digestChart(figures)
  const page = { figures, month, zone: property.zone, reason: reason ?? null, path: `/o/${slug}/digests/${id}`, chartBase64 }
  return inTransaction(db, async (trx) => {
    const last = await findLastEdition(trx, propertyId, month)
    if (last && !reason) return { written: 0, mailed: 0 }
    const digest: Digest = {
      id,
      propertyId,
      month,
      edition: (last?.edition ?? 0) + 1,
      figures,
      reason: reason ?? null,
      createdAtMs: nowMs,
    }
    await addDigest(trx, digest)
    await addAudit(trx, {
      atMs: nowMs,
      action: 'write',
      subjectKind: 'digest',
      subjectId: id,
      after: { month, edition: digest.edition, reason: reason ?? null },
    })
    return { written: 1, mailed: await mailOwners(trx, { digest, page, nowMs }) }
  })
}

async function figuresOf(db: OrgDb, property: Property, month: string): Promise<DigestFigures> {
  const interval = monthBounds(month, property.zone)
  const days = { fromDay: `${month}-01`, toDay: `${addMonths(month, 1)}-01` }
  return monthFigures({
    month,
    interval,
    zone: property.zone,
    propertyName: property.name,
    currency: property.currency,
    codes: new Map((await listUnits(db, property.id)).map((unit) => [unit.id, unit.code])),
    evaluations: await listEvaluations(db, property.id, days.fromDay, days.toDay),
    flags: await listFlagsTouched(db, property.id, interval.startsAtMs, interval.endsAtMs),
    visits: await listVisitsOfProperty(db, property.id),
    feedback: await countFeedback(db, property.id, days),
  })
}

interface MailOwners {
  readonly digest: Digest
  readonly page: Omit<DigestLetterCase, 'unsubscribe'>
  readonly nowMs: number
}

async function mailOwners(trx: OrgTrx, { digest, page, nowMs }: MailOwners): Promise<number> {
  const access = (await listAccess(trx)).filter((one) => one.role === 'owner' && one.propertyId === digest.propertyId)
  const stopped = await unsubscribedFrom(trx, 'digest')
  const owners = (await listMembers(trx)).filter(
    (member) => member.role === 'owner' && !stopped.has(member.email) && access.some((one) => one.personId === member.personId),
  )
  let mailed = 0
  for (const owner of owners) {
    const unsubscribe = unsubscribeLink(trx.scope.organisationId, { personId: owner.personId, letters: 'digest' }, nowMs)
    const queued = await queueMessage(trx, {
      propertyId: digest.propertyId,
      unitId: null,
      personId: owner.personId,
      toEmail: owner.email,
      kind: 'digest',
      cause: `${digest.propertyId}:${digest.month}:${digest.edition}`,
      ...digestLetter({ ...page, unsubscribe }),
      nowMs,
    })
    if (queued === 'queued') mailed++
  }
  return mailed
}
