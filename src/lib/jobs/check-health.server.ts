/** Whether the database answers, and when a job last ended. */
import { lastJobEnd } from '#db/queries/job.ts'
import { database } from '#lib/database.server.ts'
import { logUnknown } from '#lib/http/to-response.ts'

export type Health =
  { readonly status: 'ok'; readonly lastJobEndedAtMs: number | null } | { readonly status: 'failing'; readonly errorId: string }

export async function checkHealth(connection = database): Promise<Health> {
  try {
    return { status: 'ok', lastJobEndedAtMs: await lastJobEnd(connection()) }
  } catch (error) {
    return { status: 'failing', errorId: logUnknown(error) }
  }
}
