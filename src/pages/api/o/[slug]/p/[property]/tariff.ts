/** `GET`: a version of the tariff as an open rate record; `?from=` names its first day, without it the one in force. */
import { apiRoute } from '#lib/http/api-route.ts'
import { exportTariff } from '#lib/tariff/export-tariff.server.ts'
import { openProperty } from '#lib/property/open-property.server.ts'

export const GET = apiRoute(async ({ db, params, query, nowMs }) => {
  const property = await openProperty(db, params.property)
  const { effectiveFrom, record } = await exportTariff(db, { property, from: query.get('from'), nowMs })
  return new Response(JSON.stringify(record, null, 1), {
    headers: {
      'content-type': 'application/json',
      'content-disposition': `attachment; filename="${property.slug}-tariff-${effectiveFrom}.json"`,
    },
  })
})
