/** `feedback`: a tenant's word on a day: hot or cold. */
import type { Insertable, Selectable, Updateable } from 'kysely'
import type { OrganisationId, TenancyId } from '../ids.ts'

export interface FeedbackTable {
  organisation_id: OrganisationId
  id: string
  tenancy_id: TenancyId
  day: string
  verdict: 'hot' | 'cold'
  given_at_ms: number
}

export type FeedbackRow = Selectable<FeedbackTable>
export type NewFeedback = Insertable<FeedbackTable>
export type FeedbackPatch = Updateable<FeedbackTable>
