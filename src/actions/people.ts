/** Forms of the People page. The organisation comes from the page's address. */
import { type ActionAPIContext, defineAction } from 'astro:actions'
import { formFields } from '#lib/http/form.ts'
import { openedIn } from '#lib/http/opened.ts'
import { runForm } from '#lib/http/to-action-error.ts'
import { invitePerson } from '#lib/invitation/invite-person.server.ts'
import { resendInvitation } from '#lib/invitation/resend-invitation.server.ts'
import { revokeInvitation } from '#lib/invitation/revoke-invitation.server.ts'
import { giveAccess } from '#lib/organisation/give-access.server.ts'
import { removeMember } from '#lib/organisation/remove-member.server.ts'
import { takeAccess } from '#lib/organisation/take-access.server.ts'

const nullable = (value: string | undefined): string | null => (value ? value : null)

export const people = {
  invite: defineAction({
    accept: 'form',
    handler: (form, context: ActionAPIContext) =>
      runForm(async () => {
        const { db, organisation, nowMs } = openedIn(context.locals)
        const { email, name, role, propertyId, tenancyId } = formFields(form)
        const input = { email, name, role, propertyId: nullable(propertyId), tenancyId: nullable(tenancyId) }
        await invitePerson(db, { input, organisationName: organisation.name, nowMs })
      }),
  }),
  resend: defineAction({
    accept: 'form',
    handler: (form, { locals }) =>
      runForm(() => {
        const { db, organisation, nowMs } = openedIn(locals)
        return resendInvitation(db, { invitationId: formFields(form).invitationId, organisationName: organisation.name, nowMs })
      }),
  }),
  revoke: defineAction({
    accept: 'form',
    handler: (form, { locals }) =>
      runForm(() => {
        const { db, nowMs } = openedIn(locals)
        return revokeInvitation(db, { invitationId: formFields(form).invitationId, nowMs })
      }),
  }),
  remove: defineAction({
    accept: 'form',
    handler: (form, { locals }) =>
      runForm(() => {
        const { db, nowMs } = openedIn(locals)
        const { personId, role } = formFields(form)
        return removeMember(db, { personId, role, nowMs })
      }),
  }),
  giveAccess: defineAction({
    accept: 'form',
    handler: (form, { locals }) =>
      runForm(() => {
        const { db, nowMs } = openedIn(locals)
        const { personId, propertyId, role } = formFields(form)
        return giveAccess(db, { personId, propertyId, role, nowMs })
      }),
  }),
  takeAccess: defineAction({
    accept: 'form',
    handler: (form, { locals }) =>
      runForm(() => {
        const { db, nowMs } = openedIn(locals)
        const { personId, propertyId, role } = formFields(form)
        return takeAccess(db, { personId, propertyId, role, nowMs })
      }),
  }),
}
