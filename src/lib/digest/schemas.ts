/** What a correction of a digest sends. */
import { z } from 'zod'

export const correctionSchema = z.object({
  reason: z.string({ error: 'Say why.' }).trim().min(3, 'Say in a few words what was wrong.').max(300, 'At most 300 characters.'),
})
