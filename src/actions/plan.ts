/** The form that undoes a plan. */
import { defineAction } from 'astro:actions'
import { refreshStale } from '#lib/evaluation/refresh-stale.server.ts'
import { formFields } from '#lib/http/form.ts'
import { openedIn } from '#lib/http/opened.ts'
import { runForm } from '#lib/http/to-action-error.ts'
import { undoPlan } from '#lib/plan/undo-plan.server.ts'
import { openProperty } from '#lib/property/open-property.server.ts'

export const plan = {
  undo: defineAction({
    accept: 'form',
    handler: (form, { locals }) =>
      runForm(async () => {
        const { db, nowMs } = openedIn(locals)
        const property = await openProperty(db, String(form.get('property')))
        const undone = await undoPlan(db, { propertyId: property.id, input: formFields(form), nowMs })
        await refreshStale(db, { property, nowMs })
        return undone
      }),
  }),
}
