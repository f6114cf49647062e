/** Calendar data as what the calendar draws: events on the browser's dates, words in the property's time. */
import { civilOf } from '#lib/core/time/civil.ts'
import { counted, formatMinuteOfDay } from '#lib/format.ts'
import type { CalendarPlace } from './schemas.ts'
import type { CalendarData, CalendarDay, CalendarRun } from './types.ts'
import { dateOfDay, wallDate } from './wall.ts'

export interface CalendarEvent {
  readonly id: string
  readonly kind: 'run' | 'peak' | 'day'
  readonly title: string
  readonly start: Date
  readonly end: Date
  readonly run: CalendarRun | null
  readonly short: boolean
}

const MS_PER_MIN = 60_000
/** A shorter bar could not hold a name; the library ends a day's last bar at midnight. */
const LAST_MINUTE = 1_439

export const timeWords = (instantMs: number, zone: string): string => formatMinuteOfDay(Math.floor(civilOf(instantMs, zone).minuteOfDay))

export const runWords = (run: CalendarRun, zone: string): string =>
  `${run.code}, ${timeWords(run.startsAtMs, zone)} to ${timeWords(run.endsAtMs, zone)}${run.short ? ', too short' : ''}`

export const isShown = (run: CalendarRun, { floor, state }: Pick<CalendarPlace, 'floor' | 'state'>): boolean =>
  (floor === null || run.floor === floor) && (state === 'all' || (state === 'short' ? run.short : run.onPeak))

export function runEvents(data: CalendarData, place: CalendarPlace): CalendarEvent[] {
  return data.runs
    .filter((run) => isShown(run, place))
    .map((run) => ({
      id: run.id,
      kind: 'run',
      title: runWords(run, data.zone),
      start: wallDate(run.startsAtMs, data.zone),
      // A repeated hour could put the wall-clock end before the start.
      end: new Date(Math.max(wallDate(run.endsAtMs, data.zone).getTime(), wallDate(run.startsAtMs, data.zone).getTime() + 15 * MS_PER_MIN)),
      run,
      short: run.short,
    }))
}

export const peakEvents = (data: CalendarData): CalendarEvent[] =>
  data.days.flatMap((day) =>
    day.peaks.map((peak) => {
      const [from, to] = [wallMinute(day, peak.startMin), Math.min(wallMinute(day, peak.endMin), LAST_MINUTE)]
      return {
        id: `peak ${day.day} ${peak.startMin}`,
        kind: 'peak' as const,
        title: `On-peak ${formatMinuteOfDay(from)} to ${formatMinuteOfDay(wallMinute(day, peak.endMin))}`,
        start: dateOfDay(day.day, from),
        end: dateOfDay(day.day, to),
        run: null,
        short: false,
      }
    }),
  )

/** A month shows a day as one line: how many runs, how many too short, how near the limit. */
export const dayEvents = (data: CalendarData, place: CalendarPlace): CalendarEvent[] =>
  data.days.flatMap((day) => {
    const runs = data.runs.filter((run) => run.startsAtMs >= day.startsAtMs && run.startsAtMs < day.startsAtMs + day.dayMin * MS_PER_MIN)
    const shown = runs.filter((run) => isShown(run, place))
    const short = shown.filter((run) => run.short).length
    if (shown.length === 0) return []
    return [
      {
        id: `day ${day.day}`,
        kind: 'day' as const,
        title: `${counted(shown.length, 'run')}${short > 0 ? `, ${short} short` : ''}`,
        start: dateOfDay(day.day),
        end: dateOfDay(day.day, LAST_MINUTE),
        run: null,
        short: short > 0,
      },
    ]
  })

/** Wall-clock minute of an elapsed minute of the day. */
export const wallMinute = ({ clockChange }: Pick<CalendarDay, 'clockChange'>, elapsedMin: number): number =>
  elapsedMin + (clockChange && elapsedMin >= clockChange.atMin ? clockChange.shiftMin : 0)
