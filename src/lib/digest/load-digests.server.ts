/** Past digests: the landlord's of every property, an owner's of their own. */
import { parseDigestId } from '#db/ids.ts'
import type { OrgDb } from '#db/org-db.ts'
import { type Digest, findDigest, listDigests } from '#db/queries/digest.ts'
import { listAccess } from '#db/queries/organisation.ts'
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

export async function loadDigest(db: OrgDb, id: unknown): Promise<Digest> {
  const allowed = await mayRead(db)
  const digestId = parseDigestId(id)
  const digest = digestId && (await findDigest(db, digestId))
  if (!digest || !allowed(digest)) throw notFound('digest')
  return digest
}
