/** `audit_entry`: every change a person makes. */
import type { Insertable, Selectable, Updateable } from 'kysely'
import type { OrganisationId, PersonId } from '../ids.ts'

export interface AuditEntryTable {
  organisation_id: OrganisationId
  id: string
  at_ms: number
  person_id: PersonId | null
  action: string
  subject_kind: string
  subject_id: string
  before: string | null
  after: string | null
}

export type AuditEntryRow = Selectable<AuditEntryTable>
export type NewAuditEntry = Insertable<AuditEntryTable>
export type AuditEntryPatch = Updateable<AuditEntryTable>
