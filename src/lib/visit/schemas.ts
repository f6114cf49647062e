/** What planning a visit sends. */
import { z } from 'zod'

export const assignSchema = z.object({
  unitId: z.string(),
  flagIds: z.array(z.string()).min(1, 'Choose at least one flag.').max(20),
  electricianId: z.string({ error: 'Choose an electrician.' }),
  dueDay: z.string().regex(/^(\d{4}-\d{2}-\d{2})?$/, 'Write the day as year-month-day.'),
  note: z.string().trim().max(500, 'A note has at most 500 characters.'),
})
