/** Forms that start and end tenancies. */
import { defineAction } from 'astro:actions'
import { parseTenancyId, parseUnitId } from '#db/ids.ts'
import { notFound } from '#lib/http/app-error.ts'
import { formFields } from '#lib/http/form.ts'
import { openedIn } from '#lib/http/opened.ts'
import { runForm } from '#lib/http/to-action-error.ts'
import { endTenancy } from '#lib/tenancy/end-tenancy.server.ts'
import { startTenancy } from '#lib/tenancy/start-tenancy.server.ts'

export const tenancy = {
  start: defineAction({
    accept: 'form',
    handler: (form, { locals }) =>
      runForm(async () => {
        const { db, nowMs } = openedIn(locals)
        const { unitId: raw, ...input } = formFields(form)
        const unitId = parseUnitId(raw)
        if (!unitId) throw notFound('unit')
        await startTenancy(db, { unitId, input, nowMs })
      }),
  }),
  end: defineAction({
    accept: 'form',
    handler: (form, { locals }) =>
      runForm(async () => {
        const { db, nowMs } = openedIn(locals)
        const { tenancyId: raw, ...input } = formFields(form)
        const tenancyId = parseTenancyId(raw)
        if (!tenancyId) throw notFound('tenancy')
        await endTenancy(db, { tenancyId, input, nowMs })
      }),
  }),
}
