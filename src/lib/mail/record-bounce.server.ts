/** Records a bounce that came back as mail: the letter is `bounced`, and an address that is dead gets no more. Read twice, recorded once. */
import type { Kysely } from 'kysely'
import { type Bounced, recordBounce } from '#db/queries/outbox.ts'
import type { Database } from '#db/schema.ts'
import { isDeadAddress } from './bounce.ts'
import { readDeliveryReport } from './delivery-report.ts'

export type BounceOutcome = Bounced | 'not-a-failure' | 'no-report'

/** Larger than any report that returns a letter of ours with its picture. */
export const LARGEST_REPORT_BYTES = 2_000_000

export async function recordDeliveryReport(
  db: Kysely<Database>,
  { source, nowMs }: { readonly source: Uint8Array; readonly nowMs: number },
): Promise<BounceOutcome> {
  if (source.byteLength > LARGEST_REPORT_BYTES) return 'no-report'
  const report = await readDeliveryReport(source)
  if (report.kind === 'no-report') return 'no-report'
  // RFC 3464 2.3.3: `delayed`, `relayed`, `delivered` and `expanded` are no failure; a failed 4.x.x was given up for now.
  const failed = report.recipients.find(({ action }) => action === 'failed')
  if (!failed) return 'not-a-failure'
  const error = `It came back from the recipient’s mail system (${failed.status}).`
  return recordBounce(db, {
    messageId: report.messageId,
    error,
    suppress: isDeadAddress(failed.status) ? { detail: error, atMs: nowMs } : null,
  })
}
