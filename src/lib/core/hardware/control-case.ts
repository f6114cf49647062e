/** What the control side's checks share: the supply worked out once, and the answer where something is not on record. */
import { rectifiedPeakV, rippleV } from './control-supply.ts'
import type { Limit } from './profiles/profile.ts'
import type { Check, ControlSupply } from './types.ts'
import { check } from './verdict.ts'

/** The mains may be high by this: 230 V +10 %; ANSI range A is less (from memory). */
const HIGH_MAINS = 1.1
/** Small transformers rise by 20 to 30 % without load (from memory); the more is taken where nobody read it. */
const REGULATION_FRACTION = 0.3
/** NE555 at 15 V, no load, at the most (TI SLFS022). */
export const TIMER_SUPPLY_A = 0.015
export interface Supply {
  readonly control: ControlSupply
  readonly supplyVoltageV: number
  /** DC behind the reservoir: at no load with the mains high, and loaded at the bottom of the ripple; `null` = not known. */
  readonly highestV: number
  readonly loadedV: number | null
  readonly coilA: number | null
}

export function supplyOf(control: ControlSupply, supplyVoltageV: number): Supply {
  const peakV = rectifiedPeakV(control.transformerSecondaryV)
  const raise = (1 + (control.transformerRegulationFraction ?? REGULATION_FRACTION)) * HIGH_MAINS
  const coilA = control.coilOhm === null ? null : peakV / control.coilOhm
  // The mains' frequency is not on record; at 50 Hz the reservoir dips more than at 60, so that is taken.
  const dipV =
    coilA === null || control.reservoirF === null
      ? null
      : rippleV({ currentA: coilA + TIMER_SUPPLY_A, mainsHz: 50, reservoirF: control.reservoirF })
  return {
    control,
    supplyVoltageV,
    highestV: rectifiedPeakV(control.transformerSecondaryV, raise),
    loadedV: dipV === null ? null : peakV - dipV,
    coilA,
  }
}

export const known = (clause: string): Limit => ({ clause, confirm: false })

export const notKnown = (limit: Limit, base: Pick<Check, 'id' | 'title' | 'limit'>, reason: string): Check =>
  check(limit, { ...base, verdict: 'not-known', figure: 'not known', reason })
