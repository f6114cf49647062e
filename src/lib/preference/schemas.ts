/** A week of showers as it is sent: its shape by Zod, its limits as `week.ts` states them. */
import { z } from 'zod'
import { type Week, weekProblems } from './week.ts'

const showerSchema = z.strictObject({
  readyByMinuteOfDay: z.number(),
  count: z.number(),
  minutesEach: z.number(),
  gapMin: z.number(),
  flowLPerMin: z.number(),
  useTemperatureC: z.number(),
})

export const weekSchema = z
  .array(z.array(showerSchema))
  .length(7)
  .superRefine((week, context) => {
    for (const { path, message } of weekProblems(week)) context.addIssue({ code: 'custom', path: [...path], message })
  }) satisfies z.ZodType<Week>

/** Hours in which the tenant is willing to press a timer, wall-clock minutes, half-open; none = any hour. */
const willingSchema = z
  .array(z.strictObject({ fromMinuteOfDay: z.number().int().min(0).max(1_439), toMinuteOfDay: z.number().int().min(1).max(1_440) }))
  .max(4)

export const preferenceSchema = z.strictObject({ week: weekSchema, willing: willingSchema })
