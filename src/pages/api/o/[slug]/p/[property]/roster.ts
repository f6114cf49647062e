/** `GET`: the roster of a property as the CSV that the import reads. */
import { apiRoute } from '#lib/http/api-route.ts'
import { openProperty } from '#lib/property/open-property.server.ts'
import { exportRoster } from '#lib/roster/export-roster.server.ts'

export const GET = apiRoute(async ({ db, params, nowMs }) => {
  const property = await openProperty(db, params.property)
  const headers = {
    'content-type': 'text/csv; charset=utf-8',
    'content-disposition': `attachment; filename="${property.slug}-roster.csv"`,
    'cache-control': 'no-store',
  }
  return new Response(await exportRoster(db, property, nowMs), { headers })
})
