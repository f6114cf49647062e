/** The grid's data for the day columns, which the library makes itself. */
import { createContext } from 'react'
import type { CalendarData } from '#lib/calendar/types.ts'

export const CalendarDataContext = createContext<CalendarData | null>(null)
