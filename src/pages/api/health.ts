/** For whoever watches the service: 200 while the database answers, 503 otherwise. Needs no sign-in and tells nothing about anybody. */
import type { APIRoute } from 'astro'
import { checkHealth } from '#lib/jobs/check-health.server.ts'

export const GET: APIRoute = async () => {
  const health = await checkHealth()
  return Response.json(health, { status: health.status === 'ok' ? 200 : 503, headers: { 'cache-control': 'no-store' } })
}
