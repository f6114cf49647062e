/** Hours and showers as people write them in a table: `05:00-06:30 daily; 17:00-18:00 Mon-Fri`, `06:45 2x8 Mon-Fri; 08:00 1x10 Sat-Sun`. */
import type { SwitchStep } from '#lib/core/controller/types.ts'
import type { Weekday } from '#lib/core/time/types.ts'
import { DEFAULT_FLOW_L_PER_MIN, DEFAULT_GAP_MIN, DEFAULT_USE_TEMPERATURE_C, type Shower, type Week } from '#lib/preference/week.ts'
import { MIN_PER_DAY } from '#lib/core/units.ts'

const DAYS = ['mon', 'tue', 'wed', 'thu', 'fri', 'sat', 'sun']
const CLOCK = String.raw`(\d{1,2})[:.](\d{2})`

export type Parsed<T> = { readonly ok: true; readonly value: T } | { readonly ok: false; readonly message: string }

const parts = (text: string): readonly string[] =>
  text
    .split(/[;|]/)
    .map((part) => part.trim())
    .filter((part) => part !== '')

const minute = (hour: string | undefined, min: string | undefined): number | null => {
  const value = Number(hour) * 60 + Number(min)
  return Number(hour) <= 24 && Number(min) < 60 && value <= MIN_PER_DAY ? value : null
}

/** `daily` (or nothing), `Mon`, `Mon-Fri`, `Sat,Sun`; `null` = not understood. */
export function weekdaysOf(text: string): readonly Weekday[] | null {
  const wanted = text.trim().toLowerCase()
  const all = DAYS.map((_, index) => index as Weekday)
  if (wanted === '' || wanted === 'daily') return all
  const found = new Set<Weekday>()
  for (const piece of wanted.split(',').map((one) => one.trim())) {
    const [first, last = first] = piece.split(/-|–/).map((name) => DAYS.indexOf(name.trim().slice(0, 3)))
    if (first === undefined || first < 0 || last === undefined || last < 0) return null
    for (let day = first; ; day = (day + 1) % 7) {
      found.add(day as Weekday)
      if (day === last) break
    }
  }
  return all.filter((day) => found.has(day))
}

/** Steps of a switch; an end before its start is the next morning's. */
export function parseProgramme(text: string): Parsed<readonly SwitchStep[]> {
  const steps: SwitchStep[] = []
  for (const part of parts(text)) {
    const match = new RegExp(`^${CLOCK}\\s*[-–]\\s*${CLOCK}\\s*(.*)$`).exec(part)
    const onMin = match && minute(match[1], match[2])
    const offMin = match && minute(match[3], match[4])
    const days = match && weekdaysOf(match[5] ?? '')
    if (onMin === null || offMin === null || !days)
      return { ok: false, message: `“${part}” is not understood. Write hours like 05:00-06:30 Mon-Fri; 17:00-18:00 daily.` }
    const end = offMin <= onMin ? offMin + MIN_PER_DAY : offMin
    if (days.length === 7) steps.push({ weekday: null, onMin, offMin: end })
    else steps.push(...days.map((weekday) => ({ weekday, onMin, offMin: end })))
  }
  return steps.length > 0 ? { ok: true, value: steps } : { ok: false, message: 'No hours are given. Write them like 05:00-06:30 daily.' }
}

/** Flow, temperature and pause are not in the text: the usual ones, or those of a shower the tenant has set. */
type Habits = Pick<Shower, 'gapMin' | 'flowLPerMin' | 'useTemperatureC'>
const USUAL_HABITS: Habits = { gapMin: DEFAULT_GAP_MIN, flowLPerMin: DEFAULT_FLOW_L_PER_MIN, useTemperatureC: DEFAULT_USE_TEMPERATURE_C }

/** A week of showers; nothing means no showers. */
export function parseShowers(text: string, { gapMin, flowLPerMin, useTemperatureC }: Habits = USUAL_HABITS): Parsed<Week> {
  const week: Shower[][] = DAYS.map(() => [])
  for (const part of parts(text)) {
    const match = new RegExp(`^${CLOCK}\\s+(\\d+)\\s*[x×]\\s*(\\d+(?:\\.\\d+)?)\\s*(.*)$`).exec(part)
    const readyBy = match && minute(match[1], match[2])
    const days = match && weekdaysOf(match[5] ?? '')
    if (readyBy === null || readyBy === MIN_PER_DAY || !days)
      return {
        ok: false,
        message: `“${part}” is not understood. Write showers like 06:45 2x8 Mon-Fri: the time, how many, minutes each, the days.`,
      }
    const shower: Shower = {
      readyByMinuteOfDay: readyBy,
      count: Number(match?.[3]),
      minutesEach: Number(match?.[4]),
      gapMin,
      flowLPerMin,
      useTemperatureC,
    }
    for (const day of days) week[day]?.push(shower)
  }
  return { ok: true, value: week.map((day) => [...day].sort((one, other) => one.readyByMinuteOfDay - other.readyByMinuteOfDay)) }
}

const clock = (min: number): string =>
  `${String(Math.floor((min % MIN_PER_DAY) / 60)).padStart(2, '0')}:${String(min % 60).padStart(2, '0')}`
const NAMES = ['Mon', 'Tue', 'Wed', 'Thu', 'Fri', 'Sat', 'Sun']

/** Equal things of several days are written once, with their days. */
const grouped = (entries: readonly (readonly [what: string, day: string])[]): string => {
  const days = new Map<string, string[]>()
  for (const [what, day] of entries) days.set(what, [...(days.get(what) ?? []), day])
  return [...days].map(([what, names]) => `${what} ${names.length === NAMES.length ? 'daily' : names.join(',')}`).join('; ')
}

export const formatProgramme = (steps: readonly SwitchStep[]): string =>
  grouped(
    steps.flatMap((step) => {
      const hours = `${clock(step.onMin)}-${clock(step.offMin)}`
      return step.weekday === null ? NAMES.map((name) => [hours, name] as const) : [[hours, NAMES[step.weekday] ?? ''] as const]
    }),
  )

/** The week back as text. */
export const formatShowers = (week: Week): string =>
  grouped(
    week.flatMap((showers, weekday) =>
      showers.map((shower) => [`${clock(shower.readyByMinuteOfDay)} ${shower.count}x${shower.minutesEach}`, NAMES[weekday] ?? ''] as const),
    ),
  )
