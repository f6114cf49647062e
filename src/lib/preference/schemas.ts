/** A tenant's week of showers: what may be entered, its limits, its shape. Shared with the browser. */
import { z } from 'zod'

export const SHOWER_LIMITS = { count: 8, minutesEach: 45, perDay: 4 } as const
/** WaterSense shower head, 2.0 US gal/min at 80 psi (EPA WaterSense specification for showerheads). */
export const DEFAULT_FLOW_L_PER_MIN = 7.6
/** 105 °F, the fixture use temperature of NREL's OCHRE model; 40 to 41 °C is common practice. */
export const DEFAULT_USE_TEMPERATURE_C = 40.6
export const DEFAULT_GAP_MIN = 5

export const showerSchema = z.strictObject({
  /** Wall-clock minute of the local day at which the first shower starts. */
  readyByMinuteOfDay: z.number().int().min(0, 'Choose a time of day.').max(1_439, 'Choose a time of day.'),
  count: z
    .number()
    .int()
    .min(1, 'At least one shower.')
    .max(SHOWER_LIMITS.count, `At most ${SHOWER_LIMITS.count} showers one after another.`),
  minutesEach: z
    .number()
    .min(1, 'A shower takes at least a minute.')
    .max(SHOWER_LIMITS.minutesEach, `A shower takes at most ${SHOWER_LIMITS.minutesEach} minutes.`),
  gapMin: z.number().min(0).max(120, 'The pause between showers is at most two hours.'),
  flowLPerMin: z.number().min(2, 'The flow is at least 2 litres a minute.').max(25, 'The flow is at most 25 litres a minute.'),
  useTemperatureC: z.number().min(30, 'A shower is at least 30 °C.').max(48, 'A shower is at most 48 °C: hotter water scalds.'),
})
export type Shower = z.infer<typeof showerSchema>

const daySchema = z
  .array(showerSchema)
  .max(SHOWER_LIMITS.perDay, `At most ${SHOWER_LIMITS.perDay} times a day.`)
  .superRefine((showers, context) => {
    showers.forEach((shower, index) => {
      const before = showers[index - 1]
      if (!before || shower.readyByMinuteOfDay >= endMinuteOfDay(before)) return
      const message = 'Two times of one day overlap. Choose a later time, or make them one entry with more showers.'
      context.addIssue({ code: 'custom', path: [index, 'readyByMinuteOfDay'], message })
    })
  })

const endMinuteOfDay = ({ readyByMinuteOfDay, count, minutesEach, gapMin }: Shower): number =>
  readyByMinuteOfDay + count * minutesEach + (count - 1) * gapMin

/** Seven days, Monday first; each a list in order of time. */
export const weekSchema = z.array(daySchema).length(7)
export type Week = z.infer<typeof weekSchema>

/** Hours in which the tenant is willing to press a timer, wall-clock minutes, half-open; none = any hour. */
export const willingSchema = z
  .array(z.strictObject({ fromMinuteOfDay: z.number().int().min(0).max(1_439), toMinuteOfDay: z.number().int().min(1).max(1_440) }))
  .max(4)
export type Willing = z.infer<typeof willingSchema>

export const preferenceSchema = z.strictObject({ week: weekSchema, willing: willingSchema })
