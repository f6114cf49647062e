/** A unit's line in the table and the words of its state. Plain values: islands import it. */
import type { EvaluationStatus } from '#db/queries/evaluation.ts'
import type { StripDay } from '#lib/strip/types.ts'

export interface UnitLine {
  readonly code: string
  readonly href: string
  readonly floor: number | null
  readonly tenant: string
  readonly controller: string
  /** Elapsed minutes of tomorrow, for sorting; the words are what is shown. */
  readonly startByMin: number | null
  readonly readyBy: string
  readonly startBy: string
  readonly state: string
  /** 0 dangerous … 4 nothing to do, for sorting. */
  readonly urgency: number
  readonly strip: StripDay | null
}
export interface UnitsPage {
  readonly day: string
  readonly units: readonly UnitLine[]
}

export interface State {
  readonly status: EvaluationStatus
  readonly shortfallMin: number
}

/** A day's answer in a few words, the same in the table and on the unit's page. */
export function stateWords({ status, shortfallMin }: State): string {
  switch (status) {
    case 'ready':
      return 'warm on time'
    case 'short':
      return `${Math.ceil(shortfallMin)} min short`
    case 'impossible':
      return 'cannot make it'
    case 'no-need':
      return 'no need'
    case 'unknown':
      return 'not known'
  }
}

export const isCold = ({ status }: State): boolean => status === 'short' || status === 'impossible'
