/** What a tenant is told about a day, in words: one sentence to act on, what they get, and what is behind it. The card and the mail say the same. */
import type { Evaluation } from '#db/queries/evaluation.ts'
import { needEndMin } from '#lib/core/tank/cycle.ts'
import type { NeedOutcome } from '#lib/core/tank/types.ts'
import { clockWords } from '#lib/strip/clock.ts'
import { MIN_PER_DAY } from '#lib/core/units.ts'
import { behindOf } from './behind.ts'

export interface TipCase {
  readonly evaluation: Pick<Evaluation, 'status' | 'outcome'>
  /** Whether somebody presses, or a clock switches. */
  readonly pressed: boolean
  /** "tomorrow, Thursday", "today". */
  readonly when: string
  /** Elapsed minutes of that day that have passed: showers that are over are left out. */
  readonly passedMin?: number
}
export interface Tip {
  readonly subject: string
  /** The time to act on, "06:05"; `null` when there is nothing to do. */
  readonly figure: string | null
  /** What the figure asks for. */
  readonly action: string
  readonly lines: readonly string[]
  /** Why it is so, in one line; empty when there is nothing to say. */
  readonly behind: string
  readonly short: boolean
  /** The figure is a start agreed on, not the latest one. */
  readonly agreed?: true
}

/** Minute of day -> "06:05", with "the evening before" where it is so. */
export type At = (minute: number) => string

export const needsAhead = ({ outcome }: Pick<Evaluation, 'outcome'>, passedMin: number): readonly NeedOutcome[] =>
  outcome.needs.filter(({ need }) => needEndMin(need) > passedMin)

export function tipOf({ evaluation, pressed, when, passedMin = Number.NEGATIVE_INFINITY }: TipCase): Tip {
  const { outcome } = evaluation
  const at: At = (minute) =>
    minute < 0 ? `${clockWords(minute + MIN_PER_DAY, null)} the evening before` : clockWords(minute, outcome.clockChange)
  const needs = needsAhead(evaluation, passedMin)
  if (needs.length === 0) return nothingToStart(outcome.reason, when)
  const told = {
    lines: needs.flatMap((need) => needLines(need, { at, pressed, several: needs.length > 1 })),
    behind: behindOf(needs, { at, pressed }),
    short: needs.some((need) => need.status !== 'ready'),
  }
  return pressed ? pressedTip({ needs, at, when, passedMin, told }) : clockedTip({ needs, at, when, passedMin, told })
}

const nothingToStart = (reason: string, when: string): Tip => ({
  subject: `Nothing to start ${when}`,
  figure: null,
  action: 'Nothing to start.',
  lines: reason ? [reason] : [],
  behind: '',
  short: false,
})

interface Told {
  readonly needs: readonly NeedOutcome[]
  readonly at: At
  readonly when: string
  readonly passedMin: number
  readonly told: Pick<Tip, 'lines' | 'behind' | 'short'>
}

function clockedTip({ needs, at, when, told }: Told): Tip {
  const first = needs[0]
  const readyAtMin = first?.readyAtMin ?? null
  const start = first?.run ? ` at ${at(first.run.startMin)}` : ''
  return {
    ...told,
    subject: told.short
      ? `The water will be short ${when}`
      : `Hot water from ${at(readyAtMin ?? first?.need.readyByMin ?? 0)} ${when}: nothing to press`,
    figure: readyAtMin === null ? null : at(readyAtMin),
    action: `Nothing to press: the switch starts by itself${start}.`,
  }
}

function pressedTip({ needs, at, when, passedMin, told }: Told): Tip {
  const first = needs.find((need) => need.startByMin !== null)
  const startByMin = first?.startByMin ?? null
  if (!first || startByMin === null)
    return { ...told, subject: `No hot water for a shower ${when}`, figure: null, action: 'The heater cannot make it.' }
  const late = startByMin < passedMin
  return {
    ...told,
    subject: `Press the timer ${byOrAt(first)} ${at(startByMin)} ${when}${told.short ? ': the water will be short' : ''}`,
    figure: at(startByMin),
    ...(first.agreed ? { agreed: true as const } : {}),
    action: late ? 'That has passed: press now if it is not running; the end may turn cool.' : `Press the timer ${byOrAt(first)} then.`,
  }
}

/** Where heaters take turns, earlier is as wrong as later. */
export const byOrAt = ({ agreed }: Pick<NeedOutcome, 'agreed'>): 'by' | 'at' => (agreed ? 'at' : 'by')

interface Words {
  readonly at: At
  readonly pressed: boolean
  readonly several: boolean
}

const showers = (count: number, minutes: number): string =>
  `${count === 1 ? 'a shower' : `${count === 2 ? 'two' : count} showers`} of ${minutes} minutes`

function needLines(outcome: NeedOutcome, { at, pressed, several }: Words): readonly string[] {
  const { need } = outcome
  const press = pressed && several && outcome.startByMin !== null ? `Press ${byOrAt(outcome)} ${at(outcome.startByMin)}. ` : ''
  if (outcome.status === 'ready') {
    return [
      `${press}Hot from ${at(outcome.readyAtMin ?? need.readyByMin)} for ${showers(need.count, need.minutesEach)}, until ${at(needEndMin(need))}.`,
    ]
  }
  const served = Math.floor(outcome.minutesServed)
  const better =
    outcome.nextBestReadyByMin.length > 0
      ? ` Times that work: ${outcome.nextBestReadyByMin.map(at).join(', ')}.`
      : ' No time near it works for as much.'
  const gets = served > 0 ? `warm for ${served} of ${outcome.minutesWanted} minutes` : 'not warm'
  return [`${press}At ${at(need.readyByMin)} the water is ${gets}.${better} Your landlord sees this too.`]
}

/** Start-bys that differ by less are one and the same to whoever presses. */
export const CHANGE_MIN = 5
const CLOCK = /\b(\d\d):(\d\d)\b/g
const minutesIn = (subject: string): readonly number[] =>
  [...subject.matchAll(CLOCK)].map(([, hour, minute]) => Number(hour) * 60 + Number(minute))

/** Whether two subjects ask for the same, within a few minutes; what "only when something changes" is judged by. */
export function saysTheSame(before: string, now: string): boolean {
  if (before.replace(CLOCK, '') !== now.replace(CLOCK, '')) return false
  const told = minutesIn(before)
  return minutesIn(now).every((minute, index) => Math.abs(minute - (told[index] ?? minute)) < CHANGE_MIN)
}
