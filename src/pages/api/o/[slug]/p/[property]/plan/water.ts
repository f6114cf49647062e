/** `GET ?unit=&from=&to=`: a unit's days for the tank model, so that the browser can say what a start outside its window does. */
import { apiRoute } from '#lib/http/api-route.ts'
import { loadWater } from '#lib/plan/load-water.server.ts'
import { openProperty } from '#lib/property/open-property.server.ts'

export const GET = apiRoute(async ({ db, params, query, nowMs }) =>
  loadWater(db, { property: await openProperty(db, params.property), code: query.get('unit') ?? '', nowMs }),
)
