/** Forms of accounts: sign up, in and out, reset, found an organisation, accept an invitation. They work without client script. */
import { defineAction, type ActionAPIContext } from 'astro:actions'
import { createOrganisation } from '#lib/organisation/create-organisation.server.ts'
import { AppError } from '#lib/http/app-error.ts'
import { acceptInvitation } from '#lib/invitation/accept-invitation.server.ts'
import { startSession } from '#lib/auth/start-session.server.ts'
import { cookieRules, lucia } from '#lib/auth/lucia.server.ts'
import { database } from '#lib/database.server.ts'
import { formFields } from '#lib/http/form.ts'
import { runForm } from '#lib/http/to-action-error.ts'
import { requestReset, resetPassword } from '#lib/account/reset-password.server.ts'
import { type AccountRequest, signIn } from '#lib/account/sign-in.server.ts'
import { signOutEverywhere } from '#lib/account/sign-out-everywhere.server.ts'
import { signUp } from '#lib/account/sign-up.server.ts'
import { SIGN_UP_COOKIE, SIGN_UP_COOKIE_LIFE } from '#lib/account/sign-up-proof.server.ts'

const signedIn = ({ locals }: ActionAPIContext) => {
  if (!locals.user) throw new AppError('not-signed-in', 'Your session has ended. Sign in again.')
  return locals.user
}

/** What a form of somebody who is not signed in yet carries; the address is the socket's. */
const asked = (form: FormData, { clientAddress, locals }: ActionAPIContext): AccountRequest => ({
  input: formFields(form),
  address: clientAddress,
  nowMs: locals.nowMs,
})

export const account = {
  signUp: defineAction({
    accept: 'form',
    handler: (form, context) =>
      runForm(async () => {
        const { proof } = await signUp(database(), asked(form, context))
        context.cookies.set(SIGN_UP_COOKIE, proof, { ...cookieRules(), ...SIGN_UP_COOKIE_LIFE })
      }),
  }),
  signIn: defineAction({
    accept: 'form',
    handler: (form, context) =>
      runForm(async () => {
        const personId = await signIn(database(), asked(form, context))
        await startSession(context.cookies, personId)
      }),
  }),
  requestReset: defineAction({
    accept: 'form',
    handler: (form, context) => runForm(() => requestReset(database(), asked(form, context))),
  }),
  resetPassword: defineAction({
    accept: 'form',
    handler: (form, { locals }) => runForm(() => resetPassword(database(), { input: formFields(form), nowMs: locals.nowMs })),
  }),
  signOutEverywhere: defineAction({
    accept: 'form',
    handler: (_form, context) =>
      runForm(async () => {
        await signOutEverywhere(database(), { personId: signedIn(context).id, nowMs: context.locals.nowMs })
        const blank = lucia().createBlankSessionCookie()
        context.cookies.set(blank.name, blank.value, blank.attributes)
      }),
  }),
  createOrganisation: defineAction({
    accept: 'form',
    handler: (form, context) =>
      runForm(async () =>
        createOrganisation(database(), { personId: signedIn(context).id, input: formFields(form), nowMs: context.locals.nowMs }),
      ),
  }),
  acceptInvitation: defineAction({
    accept: 'form',
    handler: (form, { locals, cookies }) =>
      runForm(async () => {
        const input = formFields(form)
        const accepted = await acceptInvitation(database(), { token: input.token ?? '', signedIn: locals.user, input, nowMs: locals.nowMs })
        // Whoever else was signed in here is signed out: the next page belongs to the one who accepted.
        if (locals.user?.id !== accepted.personId) await startSession(cookies, accepted.personId)
        return { next: accepted.opensShowers ? `/o/${accepted.slug}/my/showers` : `/o/${accepted.slug}/` }
      }),
  }),
}
