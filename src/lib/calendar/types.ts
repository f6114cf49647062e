/** The calendar's data: expected runs in instants, and each local day's peaks and load. Plain values for the browser. */
import type { MinuteInterval } from '#lib/core/time/types.ts'
import type { ClockChange } from '#lib/strip/clock.ts'
import type { LoadSlot } from '#lib/today/types.ts'

export interface CalendarRun {
  readonly id: string
  readonly code: string
  readonly floor: number | null
  readonly day: string
  readonly startsAtMs: number
  readonly endsAtMs: number
  /** `null` = may never end. */
  readonly longestEndsAtMs: number | null
  readonly windowStartsAtMs: number
  readonly windowEndsAtMs: number
  readonly readyByAtMs: number
  readonly powerW: number
  readonly short: boolean
  readonly onPeak: boolean
}
export interface CalendarDay {
  readonly day: string
  readonly startsAtMs: number
  readonly dayMin: number
  readonly clockChange: ClockChange | null
  readonly peaks: readonly MinuteInterval[]
  readonly slots: readonly LoadSlot[]
  readonly runs: number
  readonly short: number
}
export interface CalendarData {
  readonly zone: string
  readonly limitW: number
  readonly days: readonly CalendarDay[]
  readonly runs: readonly CalendarRun[]
  /** Whether anything is computed in the range. */
  readonly computed: boolean
}
