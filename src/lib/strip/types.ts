/** What a day strip is told about a unit's day, and the geometry it answers. All minutes are elapsed from the local midnight. */
import type { MinuteInterval } from '#lib/core/time/types.ts'
import type { ClockChange } from './clock.ts'

export interface StripRun extends MinuteInterval {
  /** End of the run at its longest; `null` = it may never end. Equal to `endMin` when there is no doubt. */
  readonly longestEndMin: number | null
  readonly short: boolean
}

export interface StripNeed {
  readonly readyByMin: number
  /** End of the last shower. */
  readonly endMin: number
  readonly count: number
  readonly minutesEach: number
  /** When the water is ready; `null` = never. */
  readonly readyAtMin: number | null
  /** 0 when it is ready in time. */
  readonly shortfallMin: number
}

export interface StripDay {
  readonly runs: readonly StripRun[]
  readonly needs: readonly StripNeed[]
  readonly peaks: readonly MinuteInterval[]
  /** Length of the local day: 1,440 but on clock-change days. */
  readonly dayMin: number
  readonly clockChange: ClockChange | null
}

interface Span {
  readonly xPx: number
  readonly widthPx: number
}
export interface StripGeometry {
  readonly widthPx: number
  readonly heightPx: number
  /** The track: where runs, peaks and showers stand. */
  readonly trackTopPx: number
  readonly trackHeightPx: number
  readonly fromMin: number
  readonly toMin: number
  readonly peaks: readonly (Span & { readonly hatch: string })[]
  readonly runs: readonly (Span & { readonly tail: Span | null; readonly short: boolean })[]
  readonly showers: readonly Span[]
  readonly notches: readonly { readonly xPx: number; readonly path: string; readonly short: boolean }[]
  readonly labels: readonly { readonly xPx: number; readonly anchor: 'start' | 'middle' | 'end'; readonly text: string }[]
  /** The same in one sentence. */
  readonly sentence: string
}
