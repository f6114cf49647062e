/** What is asked of the planner and what is accepted, with its limits. Shared with the browser. */
import { z } from 'zod'

/** Today and the seven days after it are computed; today's starts are mostly past. */
export const PLAN_DAYS = 7
/** A thousand units with three needs a day, for a week. */
const MOST_STARTS = 21_000

const day = z
  .string('Give a day, year first: 2026-12-31.')
  .regex(/^\d{4}-(0[1-9]|1[0-2])-(0[1-9]|[12]\d|3[01])$/, 'Give a day, year first: 2026-12-31.')
const instantMs = z.number().int()

export const planDaysSchema = z
  .object({ from: day, to: day })
  .refine(({ from, to }) => to > from, { error: 'The days end after they begin.', path: ['to'] })

export const acceptPlanSchema = z
  .object({
    from: day,
    to: day,
    /** How often plans had been accepted or undone when the draft was made. */
    revision: z.number().int().min(0),
    /** Every run of the draft: when it started as things stood, and when it is to start. */
    starts: z.array(z.object({ id: z.string().max(120), seenMs: instantMs, startsAtMs: instantMs })).max(MOST_STARTS),
  })
  .refine(({ from, to }) => to > from, { error: 'The days end after they begin.', path: ['to'] })
export type AcceptPlanInput = z.infer<typeof acceptPlanSchema>

export const undoPlanSchema = z.object({ number: z.coerce.number().int().min(1) })
