/** Forms of the Post page: send a letter again, pause a property, let letters go to an address again. */
import { defineAction } from 'astro:actions'
import { formFields } from '#lib/http/form.ts'
import { openedIn } from '#lib/http/opened.ts'
import { runForm } from '#lib/http/to-action-error.ts'
import { pauseSending } from '#lib/message/pause-sending.server.ts'
import { releaseAddress } from '#lib/message/release-address.server.ts'
import { resendMessage } from '#lib/message/resend-message.server.ts'

export const post = {
  resend: defineAction({
    accept: 'form',
    handler: (form, { locals }) =>
      runForm(() => {
        const { db, organisation, nowMs } = openedIn(locals)
        return resendMessage(db, { messageId: formFields(form).messageId, organisationName: organisation.name, nowMs })
      }),
  }),
  pause: defineAction({
    accept: 'form',
    handler: (form, { locals }) =>
      runForm(() => {
        const { db, nowMs } = openedIn(locals)
        return pauseSending(db, { input: formFields(form), nowMs })
      }),
  }),
  release: defineAction({
    accept: 'form',
    handler: (form, { locals }) =>
      runForm(() => {
        const { db, nowMs } = openedIn(locals)
        return releaseAddress(db, { input: formFields(form), nowMs })
      }),
  }),
}
