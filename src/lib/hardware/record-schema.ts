/** What recording a revision sends: the installation, why, and the stop-watch reading. Shared with the browser. */
import { z } from 'zod'
import type { Installation } from '#lib/core/hardware/types.ts'
import { installationSchema, RUN_MIN } from './schemas.ts'

export interface RecordHardwareInput {
  readonly installation: Installation
  readonly reason: string
  readonly measuredMin: number | null
  /** The revision the form was filled from; 0 where there was none. */
  readonly expectedRevision: number
}

export const recordHardwareSchema = z.strictObject({
  installation: installationSchema,
  reason: z.string().trim().min(3, 'Say in a few words what was done and why.').max(500),
  measuredMin: z.number().min(RUN_MIN.min, 'A run takes at least a minute.').max(RUN_MIN.max).nullable(),
  expectedRevision: z.number().int().min(0),
}) satisfies z.ZodType<RecordHardwareInput>
