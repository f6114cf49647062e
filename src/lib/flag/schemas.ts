/** What may be said about a flag: dismissing it with a reason until a day, opening it again. Shared with the browser. */
import { z } from 'zod'
import { FLAG_KINDS } from '#db/enums.ts'

export const REASON_LENGTH = { min: 3, max: 500 } as const
/** A dismissal is an answer for a while, never for ever; a hazard's is short. */
export const DISMISSAL_DAYS = { usual: 366, dangerous: 30 } as const

export const daySchema = z.string().regex(/^\d{4}-(0[1-9]|1[0-2])-(0[1-9]|[12]\d|3[01])$/, 'Enter a date, year first: 2026-12-31.')

export const dismissSchema = z.object({
  flagId: z.string(),
  reason: z
    .string()
    .trim()
    .min(REASON_LENGTH.min, 'Say why in a few words: whoever reads the history will want to know.')
    .max(REASON_LENGTH.max, `The reason is at most ${REASON_LENGTH.max} characters.`),
  untilDay: daySchema,
})

export const reopenSchema = z.object({ flagId: z.string() })

export const flagKindSchema = z.enum(FLAG_KINDS)
