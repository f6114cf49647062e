/** The form that imports a rate record. */
import { defineAction } from 'astro:actions'
import { evaluateProperty } from '#lib/evaluation/evaluate-property.server.ts'
import { fileOrText } from '#lib/http/form.ts'
import { openedIn } from '#lib/http/opened.ts'
import { runForm } from '#lib/http/to-action-error.ts'
import { openProperty } from '#lib/property/open-property.server.ts'
import { importTariff } from '#lib/tariff/import-tariff.server.ts'

export const tariff = {
  import: defineAction({
    accept: 'form',
    handler: (form, { locals }) =>
      runForm(async () => {
        const { db, nowMs } = openedIn(locals)
        const { id } = await openProperty(db, String(form.get('property')))
        const input = { record: await fileOrText(form, 'record'), effectiveFrom: String(form.get('effectiveFrom') ?? '') }
        const imported = await importTariff(db, { propertyId: id, input, nowMs })
        await evaluateProperty(db, { propertyId: id, nowMs })
        return imported
      }),
  }),
}
