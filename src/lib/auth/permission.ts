/** Role checks of the verbs: the first line of each. */
import type { Role } from '#db/enums.ts'
import type { PersonId } from '#db/ids.ts'
import type { OrgDb } from '#db/org-db.ts'
import { forbidden } from '#lib/http/app-error.ts'

export const hasRole = (db: OrgDb, role: Role): boolean => db.scope.actor.kind === 'person' && db.scope.actor.roles.includes(role)

/** Throws `forbidden` unless the actor holds one of the roles; jobs pass, since they act for the organisation itself. */
export function requireRole(db: OrgDb, roles: readonly Role[], what: string): void {
  const { actor } = db.scope
  if (actor.kind === 'job') return
  if (!actor.roles.some((role) => roles.includes(role))) throw forbidden(what)
}

/** The person who acts, or `null` for a job; goes into audit entries. */
export const actingPerson = (db: OrgDb): PersonId | null => (db.scope.actor.kind === 'person' ? db.scope.actor.personId : null)
