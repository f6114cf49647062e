/** `job_lease`: one period of one job in one scope: whoever holds the lease runs it; done once. */
import type { Insertable, Selectable, Updateable } from 'kysely'
import type { OrganisationId } from '../ids.ts'

export interface JobLeaseTable {
  job: string
  scope: string
  period: string
  organisation_id: OrganisationId | null
  holder: string
  lease_until_ms: number
  attempts: number
  done_at_ms: number | null
}

export type JobLeaseRow = Selectable<JobLeaseTable>
export type NewJobLease = Insertable<JobLeaseTable>
export type JobLeasePatch = Updateable<JobLeaseTable>
