/** What a job is to the worker: a name, the moments at which it looks for something to do, and one call. */
import type { Kysely } from 'kysely'
import type { JobCounts } from '#db/queries/job.ts'
import type { Database } from '#db/schema.ts'
import type { Config } from '#lib/config.server.ts'
import type { Transport } from '#lib/mail/transport.server.ts'

/** `due`: what the clock says is due. `now`: the current period, whatever the hour. `again`: the same, even when it is done. */
export type Mode = 'due' | 'now' | 'again'

export interface Worker {
  readonly db: Kysely<Database>
  readonly config: Config
  readonly transport: Transport
  readonly holder: string
  readonly mode: Mode
  readonly now: () => number
}

export interface Job {
  readonly name: string
  /** Five or six fields (with seconds), read in UTC. */
  readonly cron: string
  run(worker: Worker): Promise<JobCounts>
}

/** Offsets of today's zones are multiples of a quarter of an hour, so a local wall-clock time always falls on one. */
export const EVERY_QUARTER_HOUR = '*/15 * * * *'
