/** `GET`: the rate record in force, as it was imported. */
import { apiRoute } from '#lib/http/api-route.ts'
import { notFound } from '#lib/http/app-error.ts'
import { openProperty } from '#lib/property/open-property.server.ts'
import { loadTariff } from '#lib/tariff/load-tariff.server.ts'

export const GET = apiRoute(async ({ db, params, nowMs }) => {
  const property = await openProperty(db, params.property)
  const tariff = await loadTariff(db, property, nowMs)
  if (!tariff?.record) throw notFound('rate record')
  return new Response(JSON.stringify(tariff.record, null, 1), {
    headers: { 'content-type': 'application/json', 'content-disposition': `attachment; filename="${property.slug}-tariff.json"` },
  })
})
