/** `GET`: the versions of a property's tariff and their revision. `POST`: saves one more; 409 with the difference where somebody was first. */
import { evaluateProperty } from '#lib/evaluation/evaluate-property.server.ts'
import { apiRoute } from '#lib/http/api-route.ts'
import { openProperty } from '#lib/property/open-property.server.ts'
import { loadVersions } from '#lib/tariff/load-editor.server.ts'
import { saveVersion } from '#lib/tariff/save-version.server.ts'

export const GET = apiRoute(async ({ db, params }) => loadVersions(db, await openProperty(db, params.property)))

export const POST = apiRoute(async ({ db, params, nowMs, readJson }) => {
  const { id: propertyId } = await openProperty(db, params.property)
  const saved = await saveVersion(db, { propertyId, input: await readJson(), nowMs })
  await evaluateProperty(db, { propertyId, nowMs })
  return saved
})
