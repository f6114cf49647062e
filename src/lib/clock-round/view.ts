/** A clock change and what it does to a switch, in words with local times. */
import { describeController } from '#lib/core/controller/describe.ts'
import { civilOf } from '#lib/core/time/civil.ts'
import { formatDay, formatDuration, formatInstant, formatMinuteOfDay } from '#lib/format.ts'
import { MS_PER_MIN } from '#lib/core/units.ts'
import type { Round, RoundVisit } from './round.ts'

interface Change {
  readonly atMs: number
  readonly shiftMin: number
}

/** The local day on whose night the clocks change: the one the wall shows just before. */
export const changeDay = ({ atMs }: Change, zone: string): string => civilOf(atMs - MS_PER_MIN, zone).day

/** "Sunday 29 March 2026: 01:00 becomes 02:00". */
export function changeWords({ atMs, shiftMin }: Change, zone: string): string {
  const { minuteOfDay } = civilOf(atMs - MS_PER_MIN, zone)
  const after = formatInstant(atMs, zone, 'HH:mm')
  return `${formatDay(changeDay({ atMs, shiftMin }, zone), 'EEEE d MMMM yyyy')}: ${formatMinuteOfDay(minuteOfDay + 1)} becomes ${after}`
}

export const directionWords = ({ shiftMin }: Change): string => (shiftMin > 0 ? 'forward' : 'back')

export const offWords = (aheadMin: number): string => `${formatDuration(Math.abs(aheadMin))} ${aheadMin > 0 ? 'early' : 'late'}`

/** What it means for who lives there. */
export const meansWords = (aheadMin: number): string =>
  aheadMin > 0 ? 'warm too soon; may reach into dearer hours' : 'may not be ready in time on the first morning'

export const untilWords = ({ change }: Round, zone: string): string =>
  change.untilMs === null ? 'until it is set' : `until it is set, or ${formatInstant(change.untilMs, zone, 'd MMMM yyyy')}`

/** What the electrician is told to do; a switch set before the change is on record as fast until then. */
export function taskWords({ side, aheadMin, unit }: RoundVisit, change: Change, zone: string): string {
  const switched = describeController(unit.controller)
  if (side === 'after') return `Set its clock to the local time (${zone}); the programme stays: ${switched}.`
  const minutes = Math.abs(Math.round(change.shiftMin))
  const fast = aheadMin + change.shiftMin === 0 ? '' : ' Correct what it has drifted first.'
  return `Set its clock to the time that holds after the change, ${minutes} min ${change.shiftMin > 0 ? 'ahead of' : 'behind'} the local time of that day (${zone}), and record “Its clock is fast by ${change.shiftMin > 0 ? '' : '-'}${minutes} minutes”.${fast} The programme stays: ${switched}.`
}
