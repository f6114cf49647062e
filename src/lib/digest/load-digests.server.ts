/** Past digests: the landlord's of every property, an owner's of their own. */
import { parseDigestId } from '#db/ids.ts'
import type { OrgDb } from '#db/org-db.ts'
import { type Digest, findDigest, findLastEdition, listDigests } from '#db/queries/digest.ts'
import { listAccess } from '#db/queries/organisation.ts'
import { findProperty } from '#db/queries/property.ts'
import { actingPerson, hasRole, requireRole } from '#lib/auth/permission.ts'
import { notFound } from '#lib/http/app-error.ts'

async function mayRead(db: OrgDb): Promise<(digest: Digest) => boolean> {
  requireRole(db, ['landlord', 'owner'], 'read digests')
  if (hasRole(db, 'landlord')) return () => true
  const own = new Set(
    (await listAccess(db)).filter((one) => one.role === 'owner' && one.personId === actingPerson(db)).map((one) => one.propertyId),
  )
  return (digest) => own.has(digest.propertyId)
}

export async function loadDigests(db: OrgDb): Promise<readonly Digest[]> {
  const allowed = await mayRead(db)
  return (await listDigests(db)).filter(allowed)
}

export async function loadDigest(db: OrgDb, id: unknown) {
  const allowed = await mayRead(db)
  const digestId = parseDigestId(id)
  const digest = digestId && (await findDigest(db, digestId))
  const property = digest && (await findProperty(db, digest.propertyId))
  if (!digest || !property || !allowed(digest)) throw notFound('digest')
  const last = await findLastEdition(db, digest.propertyId, digest.month)
  return {
    digest,
    zone: property.zone,
    /** The edition that stands in its place, if there is one. */
    newer: last && last.edition > digest.edition ? { id: last.id, edition: last.edition } : null,
    mayCorrect: hasRole(db, 'landlord'),
  }
}
export type DigestPage = Awaited<ReturnType<typeof loadDigest>>
