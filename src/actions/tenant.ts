/** A tenant's forms: the week of showers, hot or cold, how often tips come. They work without client script. */
import { defineAction } from 'astro:actions'
import { giveFeedback } from '#lib/feedback/give-feedback.server.ts'
import { formFields } from '#lib/http/form.ts'
import { openedIn } from '#lib/http/opened.ts'
import { runForm } from '#lib/http/to-action-error.ts'
import { readWeekForm, weekOf } from '#lib/preference/form-fields.ts'
import { setPreference } from '#lib/preference/set-preference.server.ts'
import { loadCard } from '#lib/tip/load-card.server.ts'
import { setTips } from '#lib/tip/set-tips.server.ts'

export const tenant = {
  showers: defineAction({
    accept: 'form',
    handler: (form, { locals }) =>
      runForm(async () => {
        const { db, nowMs } = openedIn(locals)
        const { tenancy } = await loadCard(db, nowMs)
        await setPreference(db, { tenancyId: tenancy.id, input: { week: weekOf(readWeekForm(formFields(form))), willing: [] }, nowMs })
      }),
  }),
  feedback: defineAction({
    accept: 'form',
    handler: (form, { locals }) =>
      runForm(async () => {
        const { db, nowMs } = openedIn(locals)
        const { tenancy, today } = await loadCard(db, nowMs)
        await giveFeedback(db, { tenancyId: tenancy.id, input: { day: today, verdict: formFields(form).verdict }, nowMs })
      }),
  }),
  tips: defineAction({
    accept: 'form',
    handler: (form, { locals }) =>
      runForm(async () => {
        const { db, nowMs } = openedIn(locals)
        const { tenancy } = await loadCard(db, nowMs)
        await setTips(db, { tenancyId: tenancy.id, input: formFields(form), nowMs })
      }),
  }),
}
