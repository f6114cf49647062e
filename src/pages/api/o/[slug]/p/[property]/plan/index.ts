/** `GET ?from=&to=`: the planning question for local days (half-open). `POST`: accepts starts; 409 with the differences where something changed meanwhile. */
import { refreshStale } from '#lib/evaluation/refresh-stale.server.ts'
import { apiRoute } from '#lib/http/api-route.ts'
import { acceptPlan } from '#lib/plan/accept-plan.server.ts'
import { draftPlan } from '#lib/plan/draft-plan.server.ts'
import { openProperty } from '#lib/property/open-property.server.ts'

export const GET = apiRoute(async ({ db, params, query, nowMs }) => {
  const { id: propertyId } = await openProperty(db, params.property)
  return draftPlan(db, { propertyId, input: Object.fromEntries(query), nowMs })
})

export const POST = apiRoute(async ({ db, params, nowMs, readJson }) => {
  const property = await openProperty(db, params.property)
  const accepted = await acceptPlan(db, { propertyId: property.id, input: await readJson(), nowMs })
  // Cards and tips follow the new starts at once.
  await refreshStale(db, { property, nowMs })
  return accepted
})
