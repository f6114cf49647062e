/** A tenant's forms: showers, hot or cold, how often tips come, the calendar address, what is kept. They work without client script. */
import { defineAction } from 'astro:actions'
import { parseTenancyId } from '#db/ids.ts'
import { renewFeed } from '#lib/feed/renew-feed.server.ts'
import { stopFeed } from '#lib/feed/stop-feed.server.ts'
import { giveFeedback } from '#lib/feedback/give-feedback.server.ts'
import { notFound } from '#lib/http/app-error.ts'
import { formFields } from '#lib/http/form.ts'
import { openedIn } from '#lib/http/opened.ts'
import { runForm } from '#lib/http/to-action-error.ts'
import { eraseEntries } from '#lib/kept/erase-entries.server.ts'
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
        return withNote(cardQuery, 'mails')
      }),
  }),
  renewCalendar: defineAction({
    accept: 'form',
    handler: (form, { locals }) =>
      runForm(async () => {
        const { db, nowMs } = openedIn(locals)
        const choice = { tenancyId: formFields(form).tenancy, nowMs }
        await renewFeed(db, choice)
        return withNote((await openTenancy(db, choice)).cardQuery, 'renewed')
      }),
  }),
  stopCalendar: defineAction({
    accept: 'form',
    handler: (form, { locals }) =>
      runForm(async () => {
        const { db, nowMs } = openedIn(locals)
        const choice = { tenancyId: formFields(form).tenancy, nowMs }
        await stopFeed(db, choice)
        return withNote((await openTenancy(db, choice)).cardQuery, 'stopped')
      }),
  }),
  erase: defineAction({
    accept: 'form',
    handler: (form, { locals }) =>
      runForm(async () => {
        const { db, nowMs } = openedIn(locals)
        const tenancyId = parseTenancyId(formFields(form).tenancy)
        if (!tenancyId) throw notFound('tenancy')
        await eraseEntries(db, { tenancyId, nowMs })
      }),
  }),
}

/** A card's query with a word more for the page that is shown next. */
const withNote = (query: string, note: string): string => `${query}${query ? '&' : '?'}${note}`
