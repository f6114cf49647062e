/** What a tenant is told about a day, in words: one sentence to act on, then what they get. The card and the mail say the same. */
import type { Evaluation } from '#db/queries/evaluation.ts'
import { needEndMin } from '#lib/core/tank/cycle.ts'
import type { NeedOutcome } from '#lib/core/tank/types.ts'
import { clockWords } from '#lib/strip/clock.ts'
import { MIN_PER_DAY } from '#lib/core/units.ts'

export interface TipCase {
  readonly evaluation: Pick<Evaluation, 'status' | 'outcome'>
  /** Whether somebody presses, or a clock switches. */
  readonly pressed: boolean
  /** "tomorrow, Thursday", "today". */
  readonly when: string
}
export interface Tip {
  readonly subject: string
  /** The time to act on, "06:05"; `null` when there is nothing to do. */
  readonly figure: string | null
  /** What the figure asks for. */
  readonly action: string
  readonly lines: readonly string[]
  readonly short: boolean
}

export function tipOf({ evaluation, pressed, when }: TipCase): Tip {
  const { outcome, status } = evaluation
  const at = (minute: number): string =>
    minute < 0 ? `${clockWords(minute + MIN_PER_DAY, null)} the evening before` : clockWords(minute, outcome.clockChange)
  if (status === 'no-need' || status === 'unknown' || outcome.needs.length === 0) {
    return {
      subject: `Nothing to start ${when}`,
      figure: null,
      action: 'Nothing to start.',
      lines: outcome.reason ? [outcome.reason] : [],
      short: false,
    }
  }
  const lines = outcome.needs.flatMap((need) => needLines(need, { at, pressed, several: outcome.needs.length > 1 }))
  const short = outcome.needs.some((need) => need.status !== 'ready')
  const first = outcome.needs.find((need) => need.startByMin !== null)
  if (!pressed) {
    const ready = outcome.needs[0]?.readyAtMin
    const subject = short
      ? `The water will be short ${when}`
      : `Hot water from ${at(ready ?? outcome.needs[0]?.need.readyByMin ?? 0)} ${when}: nothing to press`
    return {
      subject,
      figure: ready === null || ready === undefined ? null : at(ready),
      action: 'Hot from then. The switch starts by itself.',
      lines,
      short,
    }
  }
  const startBy = first?.startByMin ?? null
  if (startBy === null)
    return { subject: `No hot water for a shower ${when}`, figure: null, action: 'The heater cannot make it.', lines, short: true }
  return {
    subject: `Press the timer by ${at(startBy)} ${when}${short ? ': the water will be short' : ''}`,
    figure: at(startBy),
    action: 'Press the timer by then.',
    lines,
    short,
  }
}

interface Words {
  readonly at: (minute: number) => string
  readonly pressed: boolean
  readonly several: boolean
}

const showers = (count: number, minutes: number): string =>
  `${count === 1 ? 'a shower' : `${count === 2 ? 'two' : count} showers`} of ${minutes} minutes`

function needLines(outcome: NeedOutcome, { at, pressed, several }: Words): readonly string[] {
  const { need } = outcome
  const press = pressed && several && outcome.startByMin !== null ? `Press by ${at(outcome.startByMin)}. ` : ''
  if (outcome.status === 'ready') {
    return [
      `${press}Hot from ${at(outcome.readyAtMin ?? need.readyByMin)} for ${showers(need.count, need.minutesEach)}, until ${at(needEndMin(need))}.`,
    ]
  }
  const served = Math.floor(outcome.minutesServed)
  const better = outcome.nextBestReadyByMin.length > 0 ? ` Times that work: ${outcome.nextBestReadyByMin.map(at).join(', ')}.` : ''
  const gets = served > 0 ? `warm for ${served} of ${outcome.minutesWanted} minutes` : 'not warm'
  return [`${press}At ${at(need.readyByMin)} the water is ${gets}.${better} Your landlord sees this too.`]
}
