/** Every ten seconds: letters that are due leave the outbox. */
import type { Job } from '#lib/jobs/job.ts'
import { deliverMail } from '#lib/mail/deliver.server.ts'

/** A round of this many letters keeps the worker free for the next job. */
const LETTERS_A_ROUND = 200

export const mail: Job = {
  name: 'mail',
  cron: '*/10 * * * * *',
  run: async ({ db, transport, holder, now }) => ({ ...(await deliverMail({ db, transport, holder, now, limit: LETTERS_A_ROUND })) }),
}
