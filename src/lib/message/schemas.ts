/** What the Post page's address and forms may say. */
import { z } from 'zod'
import { MAIL_STATES, type MailState, MESSAGE_KINDS } from '#db/enums.ts'

/** Words for several states at once, beside each state alone. */
export const STATE_GROUPS = {
  waiting: ['queued', 'sending'],
  look: ['failed', 'bounced', 'ambiguous'],
  held: ['suppressed', 'expired'],
} as const satisfies Readonly<Record<string, readonly MailState[]>>
export type StateGroup = keyof typeof STATE_GROUPS
export type StateChoice = MailState | StateGroup

const isGroup = (choice: StateChoice): choice is StateGroup => choice in STATE_GROUPS
export const statesOf = (choice: StateChoice): readonly MailState[] => (isGroup(choice) ? STATE_GROUPS[choice] : [choice])

/** What cannot be read narrows nothing. */
export const postQuerySchema = z.object({
  state: z
    .enum([...MAIL_STATES, 'waiting', 'look', 'held'])
    .nullable()
    .catch(null),
  kind: z.enum(MESSAGE_KINDS).nullable().catch(null),
  property: z.string().max(80).nullable().catch(null),
  unit: z
    .string()
    .trim()
    .max(40)
    .transform((text) => (text === '' ? null : text))
    .nullable()
    .catch(null),
  page: z.coerce.number().int().min(1).max(100_000).catch(1),
})
export type PostQuery = z.infer<typeof postQuerySchema>

export const pauseSchema = z.object({
  property: z.string(),
  sending: z.enum(['pause', 'resume'], { error: 'Choose whether sending stops or goes on.' }),
})

export const releaseSchema = z.object({ email: z.string().min(3).max(254) })
