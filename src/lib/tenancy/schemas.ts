/** What may be entered about a tenancy. */
import { z } from 'zod'
import { emailField, nameField } from '#lib/account/schemas.ts'

/** 30 February reads as 2 March, 2026-13-01 as no date at all: neither is a day. */
const isDay = (day: string): boolean => {
  const date = new Date(`${day}T00:00:00Z`)
  return !Number.isNaN(date.getTime()) && date.toISOString().startsWith(day)
}
export const dayField = z
  .string()
  .regex(/^\d{4}-\d{2}-\d{2}$/, 'Write the day as year-month-day, e.g. 2026-12-01.')
  .refine(isDay, 'There is no such day in the calendar.')
export const tenancySchema = z.object({ name: nameField, email: emailField, fromDay: dayField })
export const endSchema = z.object({ toDay: dayField })
