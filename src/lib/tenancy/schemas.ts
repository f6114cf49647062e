/** What may be entered about a tenancy. */
import { z } from 'zod'
import { emailField, nameField } from '#lib/account/schemas.ts'

export const dayField = z
  .string()
  .regex(/^\d{4}-\d{2}-\d{2}$/, 'Write the day as year-month-day, e.g. 2026-12-01.')
  .refine((day) => new Date(`${day}T00:00:00Z`).toISOString().startsWith(day), 'There is no such day.')
export const tenancySchema = z.object({ name: nameField, email: emailField, fromDay: dayField })
export const endSchema = z.object({ toDay: dayField })
