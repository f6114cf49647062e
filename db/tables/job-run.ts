/** `job_run`: a row per run of a job, with its counts or its error. */
import type { Insertable, Selectable, Updateable } from 'kysely'
import type { OrganisationId } from '../ids.ts'

export interface JobRunTable {
  id: string
  job: string
  scope: string
  period: string
  organisation_id: OrganisationId | null
  started_at_ms: number
  finished_at_ms: number | null
  counts: string | null
  error: string | null
}

export type JobRunRow = Selectable<JobRunTable>
export type NewJobRun = Insertable<JobRunTable>
export type JobRunPatch = Updateable<JobRunTable>
