/** How often tips come: the choices, in words. Shared with the forms. */
import { z } from 'zod'

export const TIPS_WORDS = {
  daily: 'every day',
  weekly: 'once a week',
  'on-change': 'only when something changes',
  never: 'never',
} as const
export type TipsChoice = keyof typeof TIPS_WORDS

export const tipsSchema = z.object({
  tips: z.enum(['daily', 'weekly', 'on-change', 'never'], { error: 'Choose how often.' }),
}) satisfies z.ZodType<{
  tips: TipsChoice
}>
