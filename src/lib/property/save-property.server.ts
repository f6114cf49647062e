/** Creates a property, or changes one: where it is, what feeds it, which rules it follows. */
import type { PropertyId } from '#db/ids.ts'
import { inTransaction, type OrgDb } from '#db/org-db.ts'
import { addAudit } from '#db/queries/audit.ts'
import { addProperty, changeProperty, findProperty, findPropertyBySlug, type PropertyFields } from '#db/queries/property.ts'
import { requireRole } from '#lib/auth/permission.ts'
import { invalid, notFound } from '#lib/http/app-error.ts'
import { parseInput } from '#lib/http/parse.ts'
import { USUAL_IN_COUNTRY, usualPolicy } from './hygiene-choice.ts'
import { COUNTRIES, propertySchema } from './schemas.ts'

export interface SaveProperty {
  /** `null` creates one. */
  readonly propertyId: PropertyId | null
  readonly input: unknown
  readonly nowMs: number
}

export async function saveProperty(
  db: OrgDb,
  { propertyId, input, nowMs }: SaveProperty,
): Promise<{ readonly id: PropertyId; readonly slug: string }> {
  requireRole(db, ['landlord'], 'change properties')
  const { meanAirC, swingAirK, hemisphere, ...entered } = parseInput(propertySchema, input)
  const currency = COUNTRIES.find((country) => country.code === entered.country)?.currency ?? 'USD'
  const hygienePolicy = entered.hygienePolicy === USUAL_IN_COUNTRY ? usualPolicy(entered.country) : entered.hygienePolicy
  const fields: PropertyFields = { ...entered, hygienePolicy, currency, climate: { kind: 'climate', meanAirC, swingAirK, hemisphere } }
  return inTransaction(db, async (trx) => {
    const before = propertyId ? await findProperty(trx, propertyId) : null
    if (propertyId && !before) throw notFound('property')
    const taken = await findPropertyBySlug(trx, fields.slug)
    if (taken && taken.id !== propertyId)
      throw invalid([{ field: 'slug', message: `You have a property at “${fields.slug}” already. Choose another address.` }])
    if (propertyId) await changeProperty(trx, propertyId, fields)
    const id = propertyId ?? (await addProperty(trx, fields, nowMs))
    await addAudit(trx, {
      atMs: nowMs,
      action: before ? 'change' : 'create',
      subjectKind: 'property',
      subjectId: id,
      before: before ?? undefined,
      after: fields,
    })
    return { id, slug: fields.slug }
  })
}
