/** A week as the plain form sends it: one time a day for workdays and one for the weekend, each with how many and how long. */
import { DEFAULT_FLOW_L_PER_MIN, DEFAULT_GAP_MIN, DEFAULT_USE_TEMPERATURE_C, type Shower, type Week } from './schemas.ts'

export interface DayGroup {
  /** "06:45"; empty = no shower. */
  readonly time: string
  readonly count: number
  readonly minutesEach: number
}
export interface WeekForm {
  readonly weekdays: DayGroup
  readonly evening: DayGroup
  readonly weekend: DayGroup
}

const WORKDAYS = 5
const EVENING_FROM_MIN = 15 * 60

export function weekOf({ weekdays, evening, weekend }: WeekForm): Week {
  const workday = [...showersOf(weekdays), ...showersOf(evening)].sort((one, other) => one.readyByMinuteOfDay - other.readyByMinuteOfDay)
  return Array.from({ length: 7 }, (_, day) => (day < WORKDAYS ? workday : showersOf(weekend)))
}

function showersOf({ time, count, minutesEach }: DayGroup): Shower[] {
  const [, hour, minute] = /^(\d{2}):(\d{2})$/.exec(time) ?? []
  if (hour === undefined || minute === undefined) return []
  return [
    {
      readyByMinuteOfDay: Number(hour) * 60 + Number(minute),
      count,
      minutesEach,
      gapMin: DEFAULT_GAP_MIN,
      flowLPerMin: DEFAULT_FLOW_L_PER_MIN,
      useTemperatureC: DEFAULT_USE_TEMPERATURE_C,
    },
  ]
}

const NONE: DayGroup = { time: '', count: 1, minutesEach: 8 }

/** The week as the form shows it: Monday's first and evening shower, Saturday's first. */
export function formOf(week: readonly (readonly Shower[])[] | null): WeekForm {
  const [monday = [], saturday = []] = [week?.[0], week?.[WORKDAYS]]
  const group = (shower: Shower | undefined): DayGroup =>
    shower ? { time: clock(shower.readyByMinuteOfDay), count: shower.count, minutesEach: shower.minutesEach } : NONE
  const morning = monday.find((shower) => shower.readyByMinuteOfDay < EVENING_FROM_MIN)
  return { weekdays: group(morning), evening: group(monday.find((shower) => shower !== morning)), weekend: group(saturday[0]) }
}

const clock = (minute: number): string => `${String(Math.floor(minute / 60)).padStart(2, '0')}:${String(minute % 60).padStart(2, '0')}`

/** From form fields named `weekdays-time`, `weekdays-count`, … */
export function readWeekForm(fields: Readonly<Record<string, string>>): WeekForm {
  const group = (name: string): DayGroup => ({
    time: fields[`${name}-time`] ?? '',
    count: Number(fields[`${name}-count`] ?? 1),
    minutesEach: Number(fields[`${name}-minutes`] ?? 8),
  })
  return { weekdays: group('weekdays'), evening: group('evening'), weekend: group('weekend') }
}
