/** Forms about properties: create, change, evaluate now. */
import { defineAction } from 'astro:actions'
import { evaluateProperty } from '#lib/evaluation/evaluate-property.server.ts'
import { formFields } from '#lib/http/form.ts'
import { openedIn } from '#lib/http/opened.ts'
import { runForm } from '#lib/http/to-action-error.ts'
import { openProperty } from '#lib/property/open-property.server.ts'
import { saveProperty } from '#lib/property/save-property.server.ts'

export const property = {
  save: defineAction({
    accept: 'form',
    handler: (form, { locals }) =>
      runForm(async () => {
        const { db, nowMs } = openedIn(locals)
        const { current, ...input } = formFields(form)
        const before = current ? await openProperty(db, current) : null
        const saved = await saveProperty(db, { propertyId: before?.id ?? null, input, nowMs })
        // Voltage, climate and service change every unit's answer.
        if (before) await evaluateProperty(db, { propertyId: saved.id, nowMs })
        return { slug: saved.slug }
      }),
  }),
  evaluate: defineAction({
    accept: 'form',
    handler: (form, { locals }) =>
      runForm(async () => {
        const { db, nowMs } = openedIn(locals)
        const { id } = await openProperty(db, formFields(form).property)
        return evaluateProperty(db, { propertyId: id, nowMs })
      }),
  }),
}
