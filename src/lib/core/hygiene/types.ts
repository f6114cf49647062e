/** Growth range, pasteurisation and scald, as findings with their published source. Nothing here certifies. */

export type HygienePolicyId = 'store-60-daily-hour' | 'store-60' | 'scald-49'

export interface HygieneFinding {
  /** Hours since the coldest node was last at the policy's temperature for its hold; `null` = not within the simulated week. */
  readonly sincePasteurisedH: number | null
  /** Share of the week the coldest node spent in the growth range. */
  readonly growthRangeFraction: number
  readonly growthRangeHours: number
  readonly reason: string
  readonly sources: readonly string[]
}
export interface ScaldFinding {
  readonly setPointC: number
  /** Shortest published time to serious burn; `null` below the table. */
  readonly secondsToBurn: number | null
  readonly source: string
  readonly atRisk: boolean
}
