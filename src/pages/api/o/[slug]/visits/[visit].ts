/** `POST`: signs a visit off with the hardware as left. */
import { apiRoute } from '#lib/http/api-route.ts'
import { signOffVisit } from '#lib/visit/sign-off-visit.server.ts'

export const POST = apiRoute(async ({ db, organisation, params, readJson, nowMs }) =>
  signOffVisit(db, { visitId: params.visit, input: await readJson(), organisationSlug: organisation.slug, nowMs }),
)
