/** What parts advice is asked and what it answers: changes of a controller, each checked by the model, or the reason why there is none. */
import type { Weekday } from '../time/types.ts'
import type { Controller, DurationOutcome } from './types.ts'

/** What a run has to reach and may not pass. */
export interface RunNeed {
  /** The guaranteed minimum reaches this. */
  readonly minMin: number
  /** The guaranteed maximum stays within this. */
  readonly limitMin: number
  /** When a clock's run has to be over or go on into, wall-clock minutes of a local day; `null` = not known, and a pressed run does not ask. */
  readonly readyBy: { readonly weekday: Weekday; readonly minuteOfDay: number } | null
}

export interface Suggestion {
  /** The controller as it would be. */
  readonly controller: Controller
  /** What to do, in one line. */
  readonly what: string
  /** What the model makes of it. */
  readonly duration: DurationOutcome
  /** Why it does: figures and limits in plain sentences. */
  readonly reason: string
}

export type PartsAdvice =
  /** The best first. */
  { readonly status: 'found'; readonly suggestions: readonly Suggestion[] } | { readonly status: 'none'; readonly reason: string }

export const none = (reason: string): PartsAdvice => ({ status: 'none', reason })
/** More than this nobody reads in a cupboard. */
export const MOST_SUGGESTIONS = 5
/** Whole minutes to count on are rounded down, those at the longest up. */
export const spanWords = ({ guaranteed }: Pick<DurationOutcome, 'guaranteed'>): string =>
  `at least ${Math.floor(guaranteed.minMin)} min, at most ${guaranteed.maxMin === null ? 'no limit' : `${Math.ceil(guaranteed.maxMin)} min`}`
export const meets = (duration: DurationOutcome, { minMin, limitMin }: RunNeed): boolean =>
  duration.timesOut === 'always' &&
  duration.guaranteed.minMin >= minMin &&
  duration.guaranteed.maxMin !== null &&
  duration.guaranteed.maxMin <= limitMin
