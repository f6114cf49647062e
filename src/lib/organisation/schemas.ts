/** What may be entered about an organisation. Shared with forms. */
import { z } from 'zod'

/** Words that would read as a page of the product. */
const RESERVED = new Set(['new', 'api', 'admin', 'dwellhour'])

export const slugField = z
  .string()
  .trim()
  .toLowerCase()
  .regex(/^[a-z0-9](?:[a-z0-9-]{1,38}[a-z0-9])$/, 'Use 3 to 40 small letters, digits and hyphens, e.g. north-street.')
  .refine((slug) => !RESERVED.has(slug), 'This word is taken by the product. Choose another.')

export const organisationSchema = z.object({
  name: z.string().trim().min(2, 'Enter the name of your business.').max(100),
  slug: slugField,
  measure: z.enum(['metric', 'us']),
})
