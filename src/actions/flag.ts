/** Forms of the Flags page. The organisation comes from the page's address. */
import { defineAction } from 'astro:actions'
import { dismissFlag } from '#lib/flag/dismiss-flag.server.ts'
import { reopenFlag } from '#lib/flag/reopen-flag.server.ts'
import { formFields } from '#lib/http/form.ts'
import { openedIn } from '#lib/http/opened.ts'
import { runForm } from '#lib/http/to-action-error.ts'
import { assignVisit } from '#lib/visit/assign-visit.server.ts'

export const flag = {
  dismiss: defineAction({
    accept: 'form',
    handler: (form, { locals }) =>
      runForm(() => {
        const { db, nowMs } = openedIn(locals)
        return dismissFlag(db, { input: formFields(form), nowMs })
      }),
  }),
  reopen: defineAction({
    accept: 'form',
    handler: (form, { locals }) =>
      runForm(() => {
        const { db, nowMs } = openedIn(locals)
        return reopenFlag(db, { input: formFields(form), nowMs })
      }),
  }),
  assign: defineAction({
    accept: 'form',
    handler: (form, { locals }) =>
      runForm(async () => {
        const { db, organisation, nowMs } = openedIn(locals)
        const { flagId = '', ...fields } = formFields(form)
        await assignVisit(db, { input: { ...fields, flagIds: [flagId] }, organisationSlug: organisation.slug, nowMs })
      }),
  }),
}
