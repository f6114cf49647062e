/** `GET`: the units of a property with tomorrow's answer. */
import { apiRoute } from '#lib/http/api-route.ts'
import { openProperty } from '#lib/property/open-property.server.ts'
import { loadUnits } from '#lib/unit/load-units.server.ts'

export const GET = apiRoute(async ({ db, organisation, params, nowMs }) => {
  const property = await openProperty(db, params.property)
  return loadUnits(db, { property, organisationSlug: organisation.slug, nowMs })
})
