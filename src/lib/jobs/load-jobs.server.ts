/** What the Jobs page shows: for each property and job the last run, how mail and the server's own jobs stand, and the newest runs of all. */
import type { OrgDb } from '#db/org-db.ts'
import { type JobRun, listJobRuns, listLastRuns } from '#db/queries/job.ts'
import { summariseDelivery } from '#db/queries/post.ts'
import { listProperties } from '#db/queries/property.ts'
import { requireRole } from '#lib/auth/permission.ts'
import { database } from '#lib/database.server.ts'
import { PROPERTY_JOBS, SERVER_JOBS } from './view.ts'

const MOST_RUNS = 400
const DAY_MS = 86_400_000

interface RunPlace {
  readonly name: string
  readonly zone: string
}
export interface PlacedRun extends JobRun {
  readonly place: RunPlace
}
export interface JobsPage {
  readonly last: readonly { readonly job: string; readonly property: RunPlace; readonly run: JobRun | null }[]
  /** Runs that failed for the organisation as a whole and have not gone through since. */
  readonly wholeFailures: readonly JobRun[]
  readonly delivery: Awaited<ReturnType<typeof summariseDelivery>>
  /** Of the whole server: when and whether it went well; what it counted is about everybody's rows and is not shown. */
  readonly server: readonly { readonly job: string; readonly run: JobRun | null }[]
  readonly runs: readonly PlacedRun[]
}

export async function loadJobs(db: OrgDb, nowMs: number, connection = database()): Promise<JobsPage> {
  requireRole(db, ['landlord'], 'see the jobs')
  const { organisationId } = db.scope
  const properties = await listProperties(db)
  const lastRuns = await listLastRuns(connection, organisationId)
  const ofServer = await listLastRuns(connection, null)
  const placeOf = (run: JobRun): RunPlace | undefined =>
    run.scope === organisationId ? { name: 'the whole organisation', zone: 'UTC' } : properties.find(({ id }) => id === run.scope)
  const newestOf = (job: string) =>
    Math.max(0, ...lastRuns.filter((run) => run.job === job && run.error === null).map((run) => run.startedAtMs))
  return {
    last: properties.flatMap((property) =>
      PROPERTY_JOBS.map((job) => ({
        job,
        property,
        run: lastRuns.find((run) => run.job === job && run.scope === property.id) ?? null,
      })),
    ),
    wholeFailures: lastRuns.filter((run) => run.scope === organisationId && run.startedAtMs > newestOf(run.job)),
    delivery: await summariseDelivery(db, nowMs - DAY_MS),
    server: SERVER_JOBS.map((job) => {
      const run = ofServer.find((one) => one.job === job)
      return { job, run: run ? { ...run, counts: null } : null }
    }),
    runs: (await listJobRuns(connection, organisationId, MOST_RUNS)).flatMap((run) => {
      const place = placeOf(run)
      return place ? [{ ...run, place }] : []
    }),
  }
}
