/** Expected runs, peaks and load of a property for local days `?from=&to=` (half-open, at most six weeks); `?floor=` narrows the runs. */
import { loadCalendar } from '#lib/calendar/load-calendar.server.ts'
import { apiRoute } from '#lib/http/api-route.ts'

export const GET = apiRoute(({ db, params, query }) =>
  loadCalendar(db, { propertySlug: params.property ?? '', input: Object.fromEntries(query) }),
)
