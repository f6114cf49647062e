/** The landlord's correction of a digest. It works without client script. */
import { defineAction } from 'astro:actions'
import { correctDigest } from '#lib/digest/correct-digest.server.ts'
import { formFields } from '#lib/http/form.ts'
import { openedIn } from '#lib/http/opened.ts'
import { runForm } from '#lib/http/to-action-error.ts'

export const digest = {
  correct: defineAction({
    accept: 'form',
    handler: (form, { locals }) =>
      runForm(() => {
        const { db, nowMs } = openedIn(locals)
        const fields = formFields(form)
        return correctDigest(db, { digestId: fields.digest, input: fields, nowMs })
      }),
  }),
}
