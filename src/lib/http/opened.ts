/** The organisation that the middleware opened for this page, or the one answer for "not there" and "not yours". */
import type { OrgDb } from '#db/org-db.ts'
import type { OrganisationForPerson } from '#lib/auth/scope.server.ts'
import { AppError, notFound } from './app-error.ts'

export interface Opened {
  readonly db: OrgDb
  readonly organisation: OrganisationForPerson
  readonly user: NonNullable<App.Locals['user']>
  readonly nowMs: number
}

export function openedIn(locals: App.Locals): Opened {
  const { db, organisation, user, nowMs } = locals
  if (!user) throw new AppError('not-signed-in', 'You are not signed in, or your session has ended. Sign in and try again.')
  if (!db || !organisation) throw notFound('page')
  return { db, organisation, user, nowMs }
}
