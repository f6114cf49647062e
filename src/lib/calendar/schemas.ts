/** Which days of the calendar are asked for, and the state of its page in the address. Shared with the browser. */
import { z } from 'zod'

/** Six weeks: a month view and its edges. */
export const CALENDAR_DAYS = 42

const day = z
  .string('Give a day, year first: 2026-12-31.')
  .regex(/^\d{4}-(0[1-9]|1[0-2])-(0[1-9]|[12]\d|3[01])$/, 'Give a day, year first: 2026-12-31.')
const MS_PER_DAY = 86_400_000

export const calendarRangeSchema = z
  .object({ from: day, to: day, floor: z.coerce.number().int().optional() })
  .refine(({ from, to }) => to > from, { error: 'The range ends after it begins.', path: ['to'] })
  .refine(({ from, to }) => Date.parse(to) - Date.parse(from) <= CALENDAR_DAYS * MS_PER_DAY, {
    error: `Ask for at most ${CALENDAR_DAYS} days at a time.`,
    path: ['to'],
  })

export const VIEWS = ['day', 'week', 'month'] as const
export type CalendarView = (typeof VIEWS)[number]
export const STATES = ['all', 'short', 'on-peak'] as const
export type CalendarState = (typeof STATES)[number]

/** What the address says; anything that cannot be is left out. */
export interface CalendarPlace {
  readonly view: CalendarView
  readonly day: string
  readonly floor: number | null
  readonly state: CalendarState
}

export function readPlace(query: URLSearchParams, initial: CalendarPlace): CalendarPlace {
  const floor = query.get('floor')
  return {
    view: z.enum(VIEWS).safeParse(query.get('view')).data ?? initial.view,
    day: day.safeParse(query.get('day')).data ?? initial.day,
    floor:
      floor === 'all'
        ? null
        : (z.coerce
            .number()
            .int()
            .safeParse(floor ?? 'none').data ?? initial.floor),
    state: z.enum(STATES).safeParse(query.get('state')).data ?? initial.state,
  }
}

export const writePlace = ({ view, day: shown, floor, state }: CalendarPlace): string =>
  `?${new URLSearchParams({ view, day: shown, floor: floor === null ? 'all' : String(floor), state }).toString()}`
