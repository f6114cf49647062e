/** What the Jobs page shows: for each property and job the last run, and the newest runs of all. */
import type { OrgDb } from '#db/org-db.ts'
import { type JobRun, listJobRuns } from '#db/queries/job.ts'
import { listProperties } from '#db/queries/property.ts'
import { requireRole } from '#lib/auth/permission.ts'
import { database } from '#lib/database.server.ts'
import { JOB_NAMES } from './view.ts'

const MOST_RUNS = 400

export interface PropertyRun extends JobRun {
  readonly property: { readonly name: string; readonly zone: string }
}
export interface JobsPage {
  readonly last: readonly {
    readonly job: string
    readonly property: { readonly name: string; readonly zone: string }
    readonly run: JobRun | null
  }[]
  readonly runs: readonly PropertyRun[]
}

export async function loadJobs(db: OrgDb, connection = database()): Promise<JobsPage> {
  requireRole(db, ['landlord'], 'see the jobs')
  const properties = await listProperties(db)
  const runs = await listJobRuns(connection, db.scope.organisationId, MOST_RUNS)
  return {
    last: properties.flatMap((property) =>
      JOB_NAMES.map((job) => ({ job, property, run: runs.find((run) => run.job === job && run.scope === property.id) ?? null })),
    ),
    runs: runs.flatMap((run) => {
      const property = properties.find(({ id }) => id === run.scope)
      return property ? [{ ...run, property }] : []
    }),
  }
}
