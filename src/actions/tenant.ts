/** A tenant's forms: the week of showers, hot or cold, how often tips come. They work without client script. */
import { defineAction } from 'astro:actions'
import { giveFeedback } from '#lib/feedback/give-feedback.server.ts'
import { formFields } from '#lib/http/form.ts'
import { openedIn } from '#lib/http/opened.ts'
import { runForm } from '#lib/http/to-action-error.ts'
import { saveShowers } from '#lib/preference/save-showers.server.ts'
import { openTenancy } from '#lib/tip/own-tenancy.server.ts'
import { setTips } from '#lib/tip/set-tips.server.ts'

/** Each answers the query of the card to go back to: empty for whoever has one tenancy. */
export const tenant = {
  showers: defineAction({
    accept: 'form',
    handler: (form, { locals }) =>
      runForm(async () => {
        const { db, nowMs } = openedIn(locals)
        const fields = formFields(form)
        const { cardQuery, tenancy } = await openTenancy(db, { tenancyId: fields.tenancy, nowMs })
        await saveShowers(db, { tenancyId: tenancy.id, fields, nowMs })
        return cardQuery
      }),
  }),
  feedback: defineAction({
    accept: 'form',
    handler: (form, { locals }) =>
      runForm(async () => {
        const { db, nowMs } = openedIn(locals)
        const fields = formFields(form)
        const { cardQuery, tenancy, today } = await openTenancy(db, { tenancyId: fields.tenancy, nowMs })
        await giveFeedback(db, { tenancyId: tenancy.id, input: { day: today, verdict: fields.verdict }, nowMs })
        return cardQuery
      }),
  }),
  tips: defineAction({
    accept: 'form',
    handler: (form, { locals }) =>
      runForm(async () => {
        const { db, nowMs } = openedIn(locals)
        const fields = formFields(form)
        const { cardQuery, tenancy } = await openTenancy(db, { tenancyId: fields.tenancy, nowMs })
        await setTips(db, { tenancyId: tenancy.id, input: fields, nowMs })
        return `${cardQuery}${cardQuery ? '&' : '?'}mails`
      }),
  }),
}
