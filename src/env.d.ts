/// <reference types="astro/client" />

declare namespace App {
  /** What the middleware puts beside a request. */
  interface Locals {
    /** The signed-in person, or `null`. */
    user: { readonly id: import('#db/ids.ts').PersonId; readonly email: string; readonly name: string } | null
    /** Under `/o/<slug>/` and `/api/o/<slug>/` only: the organisation as this person may see it. */
    organisation: import('#lib/auth/scope.server.ts').OrganisationForPerson | null
    /** Its scoped database. */
    db: import('#db/org-db.ts').OrgDb | null
    /** The instant at which the request came in. */
    nowMs: number
    /** Set when an unexpected error is shown: its id in the log. */
    errorId?: string
    /** Set when a request is refused: why, in words for whoever sent it. */
    refusal?: string
  }
}
