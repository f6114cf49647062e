/** A week as the plain form sends it: workdays and weekend together, or each day by itself; each with a few times, how many and how long. */
import type { Weekday } from '#lib/core/time/types.ts'
import { clockWords } from '#lib/strip/clock.ts'
import { DEFAULT_FLOW_L_PER_MIN, DEFAULT_GAP_MIN, DEFAULT_USE_TEMPERATURE_C, SHOWER_LIMITS, type Shower, type Week } from './week.ts'

export type FormMode = 'groups' | 'days'
export interface Slot {
  /** "06:45"; empty = no shower. */
  readonly time: string
  readonly count: number
  readonly minutesEach: number
}
interface Group {
  readonly name: string
  readonly label: string
  readonly days: readonly Weekday[]
}
export interface FormGroup extends Group {
  readonly slots: readonly Slot[]
}
export interface WeekForm {
  readonly mode: FormMode
  readonly groups: readonly FormGroup[]
}

const WEEK: readonly Weekday[] = [0, 1, 2, 3, 4, 5, 6]
export const DAY_NAMES = ['Monday', 'Tuesday', 'Wednesday', 'Thursday', 'Friday', 'Saturday', 'Sunday'] as const
const GROUPS: Readonly<Record<FormMode, readonly Group[]>> = {
  groups: [
    { name: 'weekdays', label: 'Monday to Friday', days: [0, 1, 2, 3, 4] },
    { name: 'weekend', label: 'Saturday and Sunday', days: [5, 6] },
  ],
  days: WEEK.map((day) => ({ name: DAY_NAMES[day].toLowerCase(), label: DAY_NAMES[day], days: [day] })),
}
/** A morning and an evening; more only where more is on record. */
const SLOTS = 2
const EMPTY: Slot = { time: '', count: 1, minutesEach: 8 }

/** Name of a field's first part: `weekdays`, then `weekdays-2`. */
export const slotName = (group: string, index: number): string => (index === 0 ? group : `${group}-${index + 1}`)

/** The week as the form shows it; days that differ within a group are shown one by one unless asked otherwise. */
export function formOf(week: Week | null, asked: FormMode | null = null): WeekForm {
  const mode = asked ?? (week && !isGrouped(week) ? 'days' : 'groups')
  const groups = GROUPS[mode].map((group) => {
    const slots = (week?.[group.days[0] ?? 0] ?? []).map(slotOf)
    return { ...group, slots: [...slots, ...Array.from({ length: Math.max(0, SLOTS - slots.length) }, () => EMPTY)] }
  })
  return { mode, groups }
}

const isGrouped = (week: Week): boolean =>
  GROUPS.groups.every(({ days }) => days.every((day) => JSON.stringify(week[day]) === JSON.stringify(week[days[0] ?? 0])))

const slotOf = ({ readyByMinuteOfDay, count, minutesEach }: Shower): Slot => ({
  time: clockWords(readyByMinuteOfDay, null),
  count,
  minutesEach,
})

/** From form fields named `weekdays-time`, `weekdays-2-count`, …; figures that are none become 0, which the schema refuses in words. */
export function readWeekForm(fields: Readonly<Record<string, string>>): WeekForm {
  const mode: FormMode = fields.mode === 'days' ? 'days' : 'groups'
  const slot = (name: string): Slot => ({
    time: fields[`${name}-time`] ?? '',
    count: Number(fields[`${name}-count`] ?? EMPTY.count) || 0,
    minutesEach: Number(fields[`${name}-minutes`] ?? EMPTY.minutesEach) || 0,
  })
  const groups = GROUPS[mode].map((group) => {
    const names = Array.from({ length: SHOWER_LIMITS.perDay }, (_, index) => slotName(group.name, index))
    return { ...group, slots: names.filter((name, index) => index < SLOTS || `${name}-time` in fields).map(slot) }
  })
  return { mode, groups }
}

/** The week the form stands for. What the form does not ask (flow, temperature, pause) stays as it was before. */
export function weekOf({ groups }: WeekForm, before: Week | null): Week {
  return WEEK.map((day) => {
    const group = groups.find(({ days }) => days.includes(day))
    return (group?.slots ?? [])
      .filter(({ time }) => time.trim() !== '')
      .map((slot, index) => ({ ...habitsOf(before?.[day]?.[index] ?? before?.[day]?.[0]), ...showerOf(slot) }))
      .sort((one, other) => one.readyByMinuteOfDay - other.readyByMinuteOfDay)
  })
}

const habitsOf = (shower: Shower | undefined) => ({
  gapMin: shower?.gapMin ?? DEFAULT_GAP_MIN,
  flowLPerMin: shower?.flowLPerMin ?? DEFAULT_FLOW_L_PER_MIN,
  useTemperatureC: shower?.useTemperatureC ?? DEFAULT_USE_TEMPERATURE_C,
})

/** No time of day: the schema says what to do about it. */
const NOT_A_TIME = -1

function showerOf({ time, count, minutesEach }: Slot): Pick<Shower, 'readyByMinuteOfDay' | 'count' | 'minutesEach'> {
  const [, hour, minute] = /^\s*(\d{1,2}):(\d{2})(?::\d{2})?\s*$/.exec(time) ?? []
  const read = hour !== undefined && minute !== undefined && Number(minute) < 60
  return { readyByMinuteOfDay: read ? Number(hour) * 60 + Number(minute) : NOT_A_TIME, count, minutesEach }
}

/** "Monday to Friday", "Saturday and Sunday", "every day"; days in order. */
export function daysLabel(days: readonly number[]): string {
  if (days.length === WEEK.length) return 'Every day'
  const names = days.map((day) => DAY_NAMES[day] ?? '')
  const [first, last] = [names[0] ?? '', names.at(-1) ?? '']
  const together = days.every((day, index) => index === 0 || day === (days[index - 1] ?? 0) + 1)
  if (together && days.length > 2) return `${first} to ${last}`
  return days.length < 2 ? first : `${names.slice(0, -1).join(', ')} and ${last}`
}
