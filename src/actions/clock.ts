/** The form of the clock page. The organisation comes from the page's address. */
import { defineAction } from 'astro:actions'
import { planRound } from '#lib/clock-round/plan-round.server.ts'
import { formFields } from '#lib/http/form.ts'
import { openedIn } from '#lib/http/opened.ts'
import { runForm } from '#lib/http/to-action-error.ts'

export const clock = {
  plan: defineAction({
    accept: 'form',
    handler: (form, { locals }) =>
      runForm(() => {
        const { db, organisation, nowMs } = openedIn(locals)
        return planRound(db, { input: formFields(form), organisationSlug: organisation.slug, nowMs })
      }),
  }),
}
