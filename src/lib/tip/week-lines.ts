/** The days of a weekly letter after its first, in a line for days that ask for the same. */
import type { Evaluation } from '#db/queries/evaluation.ts'
import { weekdayOf } from '#lib/core/time/civil.ts'
import { daysLabel } from '#lib/preference/form-fields.ts'
import { clockWords } from '#lib/strip/clock.ts'
import { CHANGE_MIN } from './tip.ts'

interface Line {
  readonly days: number[]
  /** When to press, or from when it is hot. */
  timesMin: readonly number[]
  readonly short: boolean
}

export function weekLines(later: readonly Evaluation[], pressed: boolean): readonly string[] {
  const lines: Line[] = []
  for (const { day, outcome } of later) {
    if (outcome.needs.length === 0) continue
    const times = outcome.needs.map((need) => (pressed ? need.startByMin : need.readyAtMin))
    const timesMin = times.filter((minute) => minute !== null)
    const short = outcome.needs.some((need) => need.status !== 'ready')
    const same = lines.find((line) => line.short === short && isNear(line.timesMin, timesMin))
    if (!same) {
      lines.push({ days: [weekdayOf(day)], timesMin, short })
      continue
    }
    same.days.push(weekdayOf(day))
    // Of times that are one to whoever presses, the one that is safe on each day: the first press, the last that is hot.
    same.timesMin = same.timesMin.map((minute, index) => (pressed ? Math.min : Math.max)(minute, timesMin[index] ?? minute))
  }
  return lines.map((line) => `${daysLabel(line.days)}: ${askWords(line, pressed)}.`)
}

const isNear = (one: readonly number[], other: readonly number[]): boolean =>
  one.length === other.length && one.every((minute, index) => Math.abs(minute - (other[index] ?? minute)) < CHANGE_MIN)

function askWords({ timesMin, short }: Line, pressed: boolean): string {
  const times = timesMin.map((minute) => `${clockWords(minute, null)}${minute < 0 ? ' the evening before' : ''}`)
  if (times.length === 0) return 'no hot water to count on'
  return `${pressed ? 'press by' : 'hot from'} ${times.join(' and ')}${short ? '; the water will be short' : ''}`
}
