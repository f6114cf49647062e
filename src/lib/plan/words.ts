/** Starts and their changes in words with local times; what refuses a start, and why a run stays. Shared with the browser. */
import { civilOf } from '#lib/core/time/civil.ts'
import type { ServingChange, UnservedReason } from '#lib/core/plan/types.ts'
import { formatMinuteOfDay } from '#lib/figures.ts'
import type { Moved } from './compare.ts'
import type { FixedReason, Grid, MovableRun } from './types.ts'

const WEEKDAYS = ['Monday', 'Tuesday', 'Wednesday', 'Thursday', 'Friday', 'Saturday', 'Sunday'] as const
const MONTHS = [
  'January',
  'February',
  'March',
  'April',
  'May',
  'June',
  'July',
  'August',
  'September',
  'October',
  'November',
  'December',
] as const

/** "Wednesday 2 December", without the library of dates: the worker's page has no room for it. */
export function dayWords(day: string): string {
  const { weekday } = civilOf(Date.parse(`${day}T12:00:00Z`), 'UTC')
  return `${WEEKDAYS[weekday]} ${Number(day.slice(8, 10))} ${MONTHS[Number(day.slice(5, 7)) - 1] ?? ''}`
}

export const clockAt = (instantMs: number, zone: string): string => formatMinuteOfDay(Math.floor(civilOf(instantMs, zone).minuteOfDay))

/** "05:10 on Wednesday 2 December". */
export const instantWords = (instantMs: number, zone: string): string =>
  `${clockAt(instantMs, zone)} on ${dayWords(civilOf(instantMs, zone).day)}`

/** A start as it is said beside its day: the evening before is named. */
export const startWords = (startsAtMs: number, day: string, zone: string): string =>
  `${clockAt(startsAtMs, zone)}${civilOf(startsAtMs, zone).day < day ? ' the evening before' : ''}`

/** "32 min earlier". */
export function byHowMuch(fromMs: number, toMs: number): string {
  const minutes = Math.round(Math.abs(toMs - fromMs) / 60_000)
  const said =
    minutes < 60 ? `${minutes} min` : minutes % 60 === 0 ? `${minutes / 60} h` : `${Math.floor(minutes / 60)} h ${minutes % 60} min`
  return minutes === 0 ? 'the same' : `${said} ${toMs < fromMs ? 'earlier' : 'later'}`
}

/** Why each of these starts cannot be. */
export const refusals = (moved: readonly Moved[], zone: string): readonly string[] =>
  moved.map(({ run, startsAtMs }) => `${run.code}, ${instantWords(startsAtMs, zone)}: ${refusal(run, startsAtMs, zone)}`)

export function refusal(run: MovableRun, startsAtMs: number, zone: string): string {
  if (startsAtMs > run.latestMs) return `too late to be warm by ${clockAt(run.readyByAtMs, zone)}; start by ${clockAt(run.latestMs, zone)}.`
  if (startsAtMs < run.earliestMs)
    return `too early: the water cools again, or nobody could be told in time; not before ${clockAt(run.earliestMs, zone)}.`
  return 'outside the hours in which the tenant will press, or into another run of the same unit.'
}

export const FIXED_WORDS: Readonly<Record<FixedReason, string>> = {
  switch: 'runs by a time switch that somebody would have to set',
  supplier: 'switched by the supplier',
  'never-stops': 'its timer may never stop: call an electrician first',
  cold: 'is not warm on time whatever the start: see its flag',
  'no-letters': 'its tenant gets no letters, so nobody could tell them',
  'too-soon': 'starts too soon for anybody to be told',
}

export const UNSERVED_WORDS: Readonly<Record<UnservedReason, string>> = {
  'no-allowed-start': 'the hours in which the tenant will press hold no start that makes it warm in time',
  'pin-not-allowed': 'it is pinned where it may not start',
  'pin-over-limit': 'where it is pinned it passes the limit beside the other pinned runs',
  'too-large-alone': 'it passes the limit even if nobody else runs',
  'service-full': 'every start that would do is taken: the service is full',
}

/** The smallest change of one kind that would give a need its place. */
export function changeWords(
  change: ServingChange,
  { grid, run, zone }: { readonly grid: Grid; readonly run: MovableRun; readonly zone: string },
): string {
  switch (change.kind) {
    case 'later-ready-by': {
      const laterMs = change.laterSlots * grid.slotMin * 60_000
      return `ready ${byHowMuch(0, laterMs)}, by ${clockAt(run.readyByAtMs + laterMs, zone)}`
    }
    case 'more-service':
      return `${change.limits.map(({ moreKw }) => `${(Math.ceil(moreKw * 10) / 10).toFixed(1)} kW`).join(' and ')} more under the limit`
    case 'shorter-run':
      return `a run ${change.shorterSlots * grid.slotMin} min shorter, which still serves it`
  }
}

/** What has just been done, from the address that the page was sent to; empty when nothing was. */
export function doneWords(query: URLSearchParams): string {
  const count = (name: string) => Number.parseInt(query.get(name) ?? '', 10)
  const [accepted, undone, told] = [count('accepted'), count('undone'), count('told')]
  const tenants = told === 1 ? 'One tenant is' : `${told} tenants are`
  if (accepted > 0 && told >= 0) return `Plan ${accepted} is accepted. ${tenants} told by letter when to press.`
  if (undone > 0 && told >= 0) return `Plan ${undone} is undone: the starts before it stand again. ${tenants} told so by letter.`
  return ''
}
