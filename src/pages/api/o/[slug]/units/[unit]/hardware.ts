/** `POST`: records what is installed in a unit as its next revision. */
import { parseUnitId } from '#db/ids.ts'
import { recordHardware } from '#lib/hardware/record-hardware.server.ts'
import { apiRoute } from '#lib/http/api-route.ts'
import { notFound } from '#lib/http/app-error.ts'

export const POST = apiRoute(async ({ db, params, readJson, nowMs }) => {
  const unitId = parseUnitId(params.unit)
  if (!unitId) throw notFound('unit')
  return recordHardware(db, { unitId, input: await readJson(), visitId: null, nowMs })
})
