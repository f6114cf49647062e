/** The roster's two-step form: look, then write. The table travels with the second step, so nothing is kept in between. */
import { defineAction } from 'astro:actions'
import { evaluateProperty } from '#lib/evaluation/evaluate-property.server.ts'
import { fileOrText } from '#lib/http/form.ts'
import { openedIn } from '#lib/http/opened.ts'
import { runForm } from '#lib/http/to-action-error.ts'
import { openProperty } from '#lib/property/open-property.server.ts'
import { importRoster, previewRoster } from '#lib/roster/import-roster.server.ts'
import { inviteTenants } from '#lib/roster/invite-tenants.server.ts'

export const roster = {
  preview: defineAction({
    accept: 'form',
    handler: (form, { locals }) =>
      runForm(async () => {
        const { db, nowMs } = openedIn(locals)
        const { id } = await openProperty(db, String(form.get('property')))
        const text = await fileOrText(form, 'roster')
        return { ...(await previewRoster(db, { propertyId: id, text, nowMs })), text }
      }),
  }),
  write: defineAction({
    accept: 'form',
    handler: (form, { locals }) =>
      runForm(async () => {
        const { db, organisation, nowMs } = openedIn(locals)
        const { id } = await openProperty(db, String(form.get('property')))
        const change = await importRoster(db, { propertyId: id, text: await fileOrText(form, 'roster'), nowMs })
        const invited =
          form.get('invite') === 'yes'
            ? await inviteTenants(db, { tenancies: change.tenancies, organisationName: organisation.name, nowMs })
            : 0
        await evaluateProperty(db, { propertyId: id, nowMs })
        const { added, updated, unchanged } = change
        return { added, updated, unchanged, invited }
      }),
  }),
}
