/** Opens a property by the slug in the address: for the landlord any, for an electrician or owner those they have access to. */
import type { Role } from '#db/enums.ts'
import type { OrgDb } from '#db/org-db.ts'
import { hasAccess } from '#db/queries/organisation.ts'
import { findPropertyBySlug, type Property } from '#db/queries/property.ts'
import { hasRole } from '#lib/auth/permission.ts'
import { forbidden, notFound } from '#lib/http/app-error.ts'

export async function openProperty(db: OrgDb, slug: string | undefined, roles: readonly Role[] = ['landlord']): Promise<Property> {
  if (!roles.some((role) => hasRole(db, role))) throw forbidden('see this')
  const property = await findPropertyBySlug(db, slug ?? '')
  if (!property) throw notFound('property')
  if (hasRole(db, 'landlord') && roles.includes('landlord')) return property
  const { actor } = db.scope
  for (const role of ['electrician', 'owner'] as const) {
    if (
      actor.kind === 'person' &&
      roles.includes(role) &&
      hasRole(db, role) &&
      (await hasAccess(db, { personId: actor.personId, propertyId: property.id, role }))
    )
      return property
  }
  throw notFound('property')
}
