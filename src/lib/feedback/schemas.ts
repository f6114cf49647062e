/** What a tenant says about a day. */
import { z } from 'zod'

export const feedbackSchema = z.object({
  day: z.string().regex(/^\d{4}-\d{2}-\d{2}$/),
  verdict: z.enum(['hot', 'cold'], { error: 'Say hot or cold.' }),
})
