/** `calendar_feed`: the secret calendar address of a tenancy, one at a time. */
import type { Selectable } from 'kysely'
import type { FeedId, OrganisationId, TenancyId } from '../ids.ts'

export interface CalendarFeedTable {
  organisation_id: OrganisationId
  tenancy_id: TenancyId
  /** The half of the address that is looked up; the other half is computed from it and the signing key. */
  id: FeedId
  created_at_ms: number
}

export type CalendarFeedRow = Selectable<CalendarFeedTable>
