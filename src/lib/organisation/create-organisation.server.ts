/** Founds an organisation; whoever founds it is its landlord. */
import type { PersonId } from '#db/ids.ts'
import { orgTrx } from '#db/org-db.ts'
import type { Connection } from '#db/queries/account.ts'
import { addAudit } from '#db/queries/audit.ts'
import { addMembership, addOrganisation } from '#db/queries/organisation.ts'
import { scopeForNewMember } from '#lib/auth/scope.server.ts'
import { invalid } from '#lib/http/app-error.ts'
import { parseInput } from '#lib/http/parse.ts'
import { organisationSchema } from './schemas.ts'

export interface CreateOrganisation {
  readonly personId: PersonId
  readonly input: unknown
  readonly nowMs: number
}

export async function createOrganisation(
  db: Connection,
  { personId, input, nowMs }: CreateOrganisation,
): Promise<{ readonly slug: string }> {
  const fields = parseInput(organisationSchema, input)
  return db.transaction().execute(async (trx) => {
    const id = await addOrganisation(trx, { ...fields, createdAtMs: nowMs })
    if (!id) throw invalid([{ field: 'slug', message: `The address “${fields.slug}” is taken. Choose another.` }])
    const scoped = orgTrx(trx, scopeForNewMember(id, personId, ['landlord']))
    await addMembership(scoped, { personId, role: 'landlord', createdAtMs: nowMs })
    await addAudit(scoped, { atMs: nowMs, action: 'create', subjectKind: 'organisation', subjectId: id, after: fields })
    return { slug: fields.slug }
  })
}
