/** The house as the first page shows it: plain values, the same on the server and in the browser. Minutes are elapsed from midnight. */
import type { MinuteInterval } from '#lib/core/time/types.ts'
import type { ClockChange } from '#lib/strip/clock.ts'
import type { StripNeed, StripRun } from '#lib/strip/types.ts'

export interface HouseCell {
  readonly code: string
  readonly href: string
  readonly floor: number | null
  readonly stack: string | null
  readonly runs: readonly StripRun[]
  readonly needs: readonly StripNeed[]
  /** Why there is nothing to show; empty when there is. */
  readonly nothing: string
  /** A dangerous finding in two or three words; empty without one. */
  readonly hazard: string
  /** Whole percent of the tank's usable heat every `CHARGE_EVERY_MIN`; empty in large houses. */
  readonly charge: readonly number[]
}

export interface LoadSlot {
  /** With every run at its expected end. */
  readonly expectedW: number
  /** With every run at its longest. */
  readonly longestW: number
}

export interface House {
  readonly day: string
  readonly dayMin: number
  readonly clockChange: ClockChange | null
  readonly peaks: readonly MinuteInterval[]
  readonly cells: readonly HouseCell[]
  readonly slots: readonly LoadSlot[]
  readonly limitW: number
  /** Where the pointer stands first. */
  readonly atMin: number
}

export const CHARGE_EVERY_MIN = 15
export const SLOT_MIN = 15
