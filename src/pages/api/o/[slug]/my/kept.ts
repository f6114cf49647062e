/** Everything kept about the tenant who asks, as a file to take along. */
import { apiRoute } from '#lib/http/api-route.ts'
import { exportKept } from '#lib/kept/load-kept.server.ts'

export const GET = apiRoute(async ({ db, nowMs }) =>
  Response.json(await exportKept(db, nowMs), {
    headers: { 'content-disposition': 'attachment; filename="what-is-kept.json"', 'cache-control': 'no-store' },
  }),
)
