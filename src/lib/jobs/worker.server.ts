/** The worker: runs the jobs one after the other at start, to make up what was missed, then each at its own times; never two rounds of one job at once. */
import { schedule } from 'node-cron'
import type { JobCounts } from '#db/queries/job.ts'
import { log, loggedError } from '#lib/log.server.ts'
import type { Job, Worker } from './job.ts'

export interface RunningWorker {
  /** Starts nothing new and waits for what runs, at most `patienceMs`. */
  stop(patienceMs: number): Promise<void>
}

export function startWorker(jobs: readonly Job[], worker: Worker): RunningWorker {
  const running = new Map<string, Promise<void>>()
  let stopping = false
  const round = (job: Job): Promise<void> => {
    const current = running.get(job.name)
    if (stopping || current) return current ?? Promise.resolve()
    const done = guarded(job, worker).finally(() => running.delete(job.name))
    running.set(job.name, done)
    return done
  }
  // In their order: a tip is read from the evaluation before it.
  const makeUp = async () => {
    for (const job of jobs) await round(job)
  }
  const tasks = jobs.map((job) => schedule(job.cron, () => round(job), { timezone: 'UTC', suppressMissedWarning: true }))
  void makeUp()
  return {
    async stop(patienceMs) {
      stopping = true
      for (const task of tasks) await task.destroy()
      const patience = new Promise<void>((resolve) => setTimeout(resolve, patienceMs).unref())
      await Promise.race([Promise.all(running.values()), patience])
    },
  }
}

/** A round's failure is logged; the next one comes at the job's next time. */
async function guarded(job: Job, worker: Worker): Promise<void> {
  try {
    await job.run(worker)
  } catch (error) {
    log.error({ job: job.name, err: loggedError(error) }, 'job round failed')
  }
}

/** Rounds until one has nothing left to do; the sum of what they did. */
export async function drain(job: Job, worker: Worker): Promise<JobCounts> {
  const total: Record<string, number> = {}
  for (let rounds = 0; rounds < MOST_ROUNDS; rounds++) {
    const counts = await job.run(worker)
    for (const [name, count] of Object.entries(counts)) total[name] = (total[name] ?? 0) + count
    // Only the post comes in rounds; a job of periods has gone through all of them in one.
    if (job.name !== 'mail' || Object.values(counts).every((count) => count === 0)) break
  }
  return total
}

const MOST_ROUNDS = 1_000
