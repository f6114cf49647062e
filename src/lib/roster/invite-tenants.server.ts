/** Invites the tenants that an import has just added, each with a link of their own. */
import type { TenancyId } from '#db/ids.ts'
import type { OrgDb } from '#db/org-db.ts'
import { findTenancy } from '#db/queries/tenancy.ts'
import { invitePerson } from '#lib/invitation/invite-person.server.ts'

export interface InviteTenants {
  readonly tenancies: readonly TenancyId[]
  readonly organisationName: string
  readonly nowMs: number
}

export async function inviteTenants(db: OrgDb, { tenancies, organisationName, nowMs }: InviteTenants): Promise<number> {
  let invited = 0
  for (const tenancyId of tenancies) {
    const tenancy = await findTenancy(db, tenancyId)
    if (!tenancy) continue
    const input = { email: tenancy.email, name: tenancy.name, role: 'tenant', propertyId: null, tenancyId }
    await invitePerson(db, { input, organisationName, nowMs })
    invited++
  }
  return invited
}
