/** The house of a property on a local day `?day=`: its cells, load and peaks, as the first page shows them. */
import { apiRoute } from '#lib/http/api-route.ts'
import { loadToday } from '#lib/today/load-today.server.ts'

export const GET = apiRoute(async ({ db, organisation, params, query, nowMs }) => {
  const { house, answer, today } = await loadToday(db, {
    propertySlug: params.property ?? '',
    organisationSlug: organisation.slug,
    day: query.get('day'),
    nowMs,
  })
  return { today, answer, house }
})
