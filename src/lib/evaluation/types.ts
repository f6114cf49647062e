/** What an evaluation is given about a property, a unit and a local day, and what it answers for one unit and day. */
import type { Assumption, ExpectedRun, EvaluationStatus } from '#db/queries/evaluation.ts'
import type { HardwareRecordId } from '#db/ids.ts'
import type { MeasuredDuration } from '#lib/core/controller/types.ts'
import type { Installation, ProfileId } from '#lib/core/hardware/types.ts'
import type { HygienePolicyId } from '#lib/core/hygiene/types.ts'
import type { InletClimate, Readiness } from '#lib/core/tank/types.ts'
import type { PriceBand } from '#lib/core/tariff/price.ts'
import type { Tariff } from '#lib/core/tariff/types.ts'
import type { Day, MinuteInterval, Weekday, Zone } from '#lib/core/time/types.ts'
import type { Preference } from '#db/queries/preference.ts'
import type { ClockChange } from '#lib/strip/clock.ts'

/** A property as the computation needs it. */
export interface Site {
  readonly zone: Zone
  readonly supplyVoltageV: number
  readonly phases: 1 | 3
  readonly serviceRatingA: number
  readonly baseLoadW: number
  readonly climate: InletClimate
  readonly ruleProfile: ProfileId
  readonly hygienePolicy: HygienePolicyId
  readonly tariff: Tariff | null
}

/** A local day at a site: worked out once, used by every unit. */
export interface DayContext {
  readonly day: Day
  readonly weekday: Weekday
  readonly startsAtMs: number
  readonly dayMin: number
  readonly clockChange: ClockChange | null
  readonly inletC: number
  /** On-peak of the day, elapsed minutes. */
  readonly peaks: readonly MinuteInterval[]
  readonly prices: PriceTable | null
}

/** Price bands from the day before to the morning after; their instants are milliseconds from the day's first. Plain data for the browser. */
export type PriceTable = readonly PriceBand[]

export interface UnitHardware {
  readonly recordId: HardwareRecordId
  readonly installation: Installation
  readonly measured: readonly MeasuredDuration[]
  readonly recordedAtMs: number
}

/** Elapsed minutes of the day. */
export interface AgreedStart {
  readonly readyByMin: number
  readonly startMin: number
}

/** What a tenancy wants, or why nothing is known or wanted. */
export type Wants =
  | {
      readonly kind: 'week'
      readonly week: Preference['week']
      readonly willing: Preference['willing']
      /** Starts that an accepted plan agreed with them for this day; left out where there is none. */
      readonly agreed?: readonly AgreedStart[]
    }
  | { readonly kind: 'nobody' }
  | { readonly kind: 'not-said' }

export interface DayRun extends ExpectedRun {
  readonly windowStartMin: number
  readonly windowEndMin: number
  readonly readyByMin: number
}

export interface DayResult {
  readonly context: DayContext
  readonly status: EvaluationStatus
  readonly reason: string
  readonly readiness: Readiness | null
  readonly runs: readonly DayRun[]
  readonly powerW: number
  readonly peakKwh: number
  readonly costMinor: number | null
  readonly baselineEnergyKwh: number
  readonly baselineCostMinor: number | null
  readonly assumptions: readonly Assumption[]
}
