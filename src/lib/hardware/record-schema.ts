/** What recording a revision sends: the installation, why, and the stop-watch reading. Shared with the browser. */
import { z } from 'zod'
import { installationSchema, RUN_MIN } from './schemas.ts'

export const recordHardwareSchema = z.strictObject({
  installation: installationSchema,
  reason: z.string().trim().min(3, 'Say in a few words what was done and why.').max(500),
  measuredMin: z.number().min(RUN_MIN.min, 'A run takes at least a minute.').max(RUN_MIN.max).nullable(),
  /** The revision the form was filled from; 0 where there was none. */
  expectedRevision: z.number().int().min(0),
})
export type RecordHardwareInput = z.infer<typeof recordHardwareSchema>
