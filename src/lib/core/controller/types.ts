/** What times a load, and the one question every kind answers: when is it on, and how sure is that. */
import type { MinuteInterval, Weekday } from '../time/types.ts'
import type { IcFamily } from './ic-families.ts'

/** How the timing capacitor leaks: a resistance across it, a current through it, a maker's limit, or not known. */
export type CapacitorLeakage =
  | { readonly kind: 'resistance'; readonly leakageOhm: number }
  | { readonly kind: 'current'; readonly leakageA: number }
  | {
      readonly kind: 'series'
      readonly series: 'electrolytic' | 'low-leakage' | 'film-polypropylene' | 'film-polyester'
      readonly ratedV: number
    }
  | { readonly kind: 'unknown' }

/** 555-type monostable and relay, started by a press. */
export interface OneShotRcController {
  readonly kind: 'one-shot-rc'
  readonly resistanceOhm: number
  readonly resistanceToleranceFraction: number
  readonly capacitanceF: number
  readonly capacitanceToleranceFraction: number
  readonly supplyV: number
  readonly icFamily: IcFamily
  readonly leakage: CapacitorLeakage
}
/** A one-shot of fixed length, started by a press. */
export interface OneShotFixedController {
  readonly kind: 'one-shot-fixed'
  readonly settingMin: number
  readonly toleranceFraction: number
}
/** A dial turned by hand to a number of minutes; it runs down and stops. */
export interface DialController {
  readonly kind: 'dial'
  readonly settingMin: number
  readonly scaleMaxMin: number
  readonly toleranceFraction: number
}
/** One on-period of a switch's programme by its own clock, half-open minutes of its day; may pass midnight (`offMin` up to 2,880). */
export interface SwitchStep {
  /** `null` = every day. */
  readonly weekday: Weekday | null
  readonly onMin: number
  readonly offMin: number
}
/** A 24-hour or 7-day switch that keeps its own clock. */
export interface TimeSwitchController {
  readonly kind: 'time-switch'
  readonly stepMin: number
  readonly programme: readonly SwitchStep[]
  readonly followsClockChange: boolean
  /** Minutes by which its clock is fast (positive) or slow (negative). */
  readonly driftMin: number
  /** `null` = none or not known. */
  readonly powerReserveH: number | null
}
/** A contactor that the electricity supplier switches in known windows. */
export interface SupplierContactorController {
  readonly kind: 'supplier-contactor'
  readonly windows: readonly SwitchStep[]
}
export type Controller = OneShotRcController | OneShotFixedController | DialController | TimeSwitchController | SupplierContactorController

/** A stop-watch reading of a real run. */
export interface MeasuredDuration {
  readonly durationMin: number
  readonly measuredAtMs: number
}

export interface DurationRange {
  readonly minMin: number
  /** `null` = it may never end. */
  readonly maxMin: number | null
}

/** How long one run lasts. `timesOut` other than `always` is a hazard, not a long run. */
export interface DurationOutcome {
  readonly source: 'measured' | 'computed' | 'setting'
  readonly nominalMin: number | null
  readonly typical: DurationRange
  readonly guaranteed: DurationRange
  readonly timesOut: 'always' | 'typically' | 'never'
  /** Plain sentences: what was assumed and from where. */
  readonly reasons: readonly string[]
}

/** What the tank model is given: runs that a person starts, or runs that a clock starts. */
export type RunSource =
  | {
      readonly kind: 'pressed'
      /** The run to count on. */
      readonly guaranteedMin: number
      /** The run to expect; costs are counted with it. */
      readonly expectedMin: number
      /** The run at its longest; load is counted with it. `null` = may never end. */
      readonly longestMin: number | null
    }
  | {
      readonly kind: 'clocked'
      /** On-intervals of one local day by true time. */
      readonly onIntervals: readonly MinuteInterval[]
      /** Minutes by which each edge may be early or late. */
      readonly uncertaintyMin: number
    }
