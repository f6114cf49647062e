/** An evaluation knows what it was computed from; a failed job's words no longer quote its records. */
import { type Kysely, sql } from 'kysely'

const STATEMENTS = [
  `alter table evaluation add column inputs_hash text`,
  `update job_run set error = 'It failed for a reason that nobody expected.'
    where error is not null and error <> 'The worker ended before the job did; it was run again.'`,
]

export async function up(db: Kysely<unknown>): Promise<void> {
  for (const statement of STATEMENTS) await sql.raw(statement).execute(db)
}
