/** Open flags of a property with the numbers behind them, the worst first; `?kind=` narrows. */
import { apiRoute } from '#lib/http/api-route.ts'
import { loadFlags } from '#lib/flag/load-flags.server.ts'

export const GET = apiRoute(async ({ db, params, query, nowMs }) => {
  const { open } = await loadFlags(db, { propertySlug: params.property ?? '', kind: query.get('kind'), nowMs })
  return { flags: open.map(({ flag, unitCode, visit }) => ({ ...flag, unitCode, visit })) }
})
