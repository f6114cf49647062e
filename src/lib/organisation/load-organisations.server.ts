/** The organisations a person belongs to. */
import type { PersonId } from '#db/ids.ts'
import { listOrganisationsOf } from '#db/queries/organisation.ts'
import { database } from '#lib/database.server.ts'

export const loadOrganisations = (personId: PersonId) => listOrganisationsOf(database(), personId)
