/** What importing a rate record sends. */
import { z } from 'zod'

export const RATE_RECORD_BYTES = 500 * 1024

export const tariffImportSchema = z.object({
  record: z.string().min(2, 'Choose a file or paste the record.'),
  /** Empty: the record's own start date. */
  effectiveFrom: z.string().regex(/^(\d{4}-\d{2}-\d{2})?$/, 'Write the day as year-month-day.'),
})
