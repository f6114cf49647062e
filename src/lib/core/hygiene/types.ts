/** Growth range, pasteurisation and scald, as findings with their published source. Nothing here certifies. */

export type HygienePolicyId = 'store-60-daily-hour' | 'store-60' | 'scald-49'

/** Regular samples of the coldest and the hottest node of a local day, in step. */
export interface HygieneDay {
  readonly coldestC: readonly number[]
  readonly hottestC: readonly number[]
}
/** Days one after another, taken as a cycle that repeats, the last sample as now. */
export interface HygieneSamples {
  readonly days: readonly HygieneDay[]
  readonly sampleMin: number
  readonly setPointC: number
  readonly policy: HygienePolicyId
}

export type HygieneFinding =
  | { readonly status: 'not-known'; readonly reason: string; readonly sources: readonly string[] }
  | {
      readonly status: 'assessed'
      /** Hours since the coldest node had been at 60 °C for an hour, whatever guidance is followed; `null` = not within the samples. */
      readonly sincePasteurisedH: number | null
      /** Share of the time the coldest node spent from 20 to 45 °C. */
      readonly growthRangeFraction: number
      readonly growthRangeHours: number
      /** Hours in which some of the tank's water was in it: between a cold bottom and a hot top some always is. */
      readonly someWaterHours: number
      /** Days on which the coldest node was at the temperature of the guidance followed for its hold. */
      readonly daysHeld: number
      readonly dayCount: number
      /** Every day does what the guidance followed says. No statement that the water is safe. */
      readonly keepsGuidance: boolean
      readonly reason: string
      readonly sources: readonly string[]
    }

export interface ScaldFinding {
  readonly setPointC: number
  /** What reaches the tap: the mixing valve's temperature where there is one. */
  readonly atTapC: number
  /** Shortest published time to a burn; `null` below the table. */
  readonly secondsToBurn: number | null
  readonly source: string
  readonly atRisk: boolean
}
