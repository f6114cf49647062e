/** What planning a round sends. */
import { z } from 'zod'

export const planRoundSchema = z.object({
  property: z.string(),
  changeAtMs: z.coerce.number({ error: 'Choose a clock change.' }).int(),
  electricianId: z.string({ error: 'Choose an electrician.' }),
})

/** Hours without power that the page is asked about. */
export const OUTAGE_H = { min: 1, max: 720, usual: 24 } as const
export const outageHSchema = z.coerce.number().min(OUTAGE_H.min).max(OUTAGE_H.max).catch(OUTAGE_H.usual)
