/** What electricity costs and when: versions, seasons by month, day types, periods, tiers, demand. Money in minor units. */
import type { Day, MsInterval } from '../time/types.ts'

export interface EnergyTier {
  /** Cumulative upper bound in the tier's unit; `null` = open. */
  readonly max: number | null
  readonly unit: 'kWh' | 'kWh daily' | 'kWh/kW' | 'kWh/kW daily'
  /** rate + adjustment, not yet rounded. */
  readonly priceMinorPerKwh: number
}
export interface DemandTier {
  readonly maxKw: number | null
  readonly priceMinorPerKw: number
}
/**
 * Rows of equal slots of the local day; a value is a period's index. A row for each month (January first) or, where the version
 * names seasons, for each of those.
 */
export type ScheduleGrid = readonly (readonly number[])[]

/** A stretch of every year, until the next one begins; the last runs over the new year into the first. */
export interface Season {
  readonly name: string
  /** `MM-DD`. 29 February is 1 March in years without one. */
  readonly startsOn: string
}
/** A day type beside weekday and weekend, such as a public holiday or a critical-peak day, with grids of its own. */
export interface ExtraDayType {
  readonly name: string
  readonly energyGrid: ScheduleGrid
  /** `null`: demand is billed as on a weekend. */
  readonly demandGrid: ScheduleGrid | null
}
/** Billed flat demand is at least this fraction of the highest peak of earlier months. */
export interface Lookback {
  readonly fraction: number
  /** The months before, in number; or which calendar months (January first) of the eleven before count. */
  readonly months: { readonly kind: 'range'; readonly count: number } | { readonly kind: 'months'; readonly counts: readonly boolean[] }
}
/** Demand at hours that the supplier names afterwards, those of the system's peak; billed with the month of the last of them. */
export interface CoincidentDemand {
  readonly priceMinorPerKw: number
  readonly hours: readonly MsInterval[]
}

export interface TariffVersion {
  readonly name: string
  readonly utility: string
  /** Local date from which it applies, until the next version's. */
  readonly effectiveFrom: Day
  readonly currency: string
  /** Minor units per major unit, 100 for most. */
  readonly minorPerMajor: number
  readonly energyPeriods: readonly (readonly EnergyTier[])[]
  /** What the energy periods are called, in their order; a bill without names numbers them. */
  readonly periodNames?: readonly string[]
  /** In the order of the year. Without them the grids' rows are months. */
  readonly seasons?: readonly Season[]
  readonly weekdayGrid: ScheduleGrid
  readonly weekendGrid: ScheduleGrid
  /** Dates billed by another day type: `weekday`, `weekend` or the name of one of `extraDayTypes`. */
  readonly specialDays: readonly { readonly day: Day; readonly dayType: string }[]
  readonly extraDayTypes?: readonly ExtraDayType[]
  readonly flatDemand: {
    readonly tiersByStructure: readonly (readonly DemandTier[])[]
    readonly structureByMonth: readonly number[]
  } | null
  readonly periodDemand: {
    readonly tiersByPeriod: readonly (readonly DemandTier[])[]
    readonly periodNames?: readonly string[]
    readonly weekdayGrid: ScheduleGrid
    readonly weekendGrid: ScheduleGrid
  } | null
  readonly demandWindowMin: 15 | 30 | 60
  readonly lookback?: Lookback
  readonly coincidentDemand?: readonly CoincidentDemand[]
  readonly fixed: { readonly amountMinor: number; readonly per: 'month' | 'day' | 'year' } | null
  readonly minimum: { readonly amountMinor: number; readonly per: 'month' | 'day' | 'year' } | null
  /** Adder by month. */
  readonly fuelAdjustmentMinorPerKwh: readonly number[] | null
}

/** Versions in order of `effectiveFrom`, in one zone. */
export interface Tariff {
  readonly zone: string
  readonly versions: readonly TariffVersion[]
}

/** Interval energy, never negative: slot i covers `[startsAtMs + i·slotMin, …)`. */
export interface LoadSeries {
  readonly startsAtMs: number
  readonly slotMin: number
  readonly energyKwh: readonly number[]
}
/** A stretch of constant power. */
export interface LoadPiece extends MsInterval {
  readonly powerW: number
}

export interface BillLine {
  readonly kind: 'energy' | 'flat-demand' | 'period-demand' | 'coincident-demand' | 'fixed' | 'minimum' | 'fuel'
  readonly label: string
  readonly quantity: number
  readonly unit: string
  /** What one unit costs here, not rounded. */
  readonly priceMinorPerUnit: number
  /** quantity × price, not rounded: for sums that must not gather roundings. */
  readonly exactMinor: number
  /** Rounded once, here. */
  readonly amountMinor: number
  readonly periodIndex: number | null
}
export interface Bill {
  readonly interval: MsInterval
  readonly lines: readonly BillLine[]
  readonly totalMinor: number
  /** Days on which no version is in force: they are not in the lines. */
  readonly unbilled: readonly { readonly interval: MsInterval; readonly reason: string }[]
  /** Share of the interval for which the load has a reading. */
  readonly coveredFraction: number
  /** What a reader has to know before trusting the total. */
  readonly notes: readonly string[]
}
export type PriceOutcome =
  | { readonly status: 'priced'; readonly priceMinorPerKwh: number; readonly periodIndex: number }
  | { readonly status: 'no-version'; readonly reason: string }
/** `on-peak` = the dearest price of its month or season, when that has more than one; or dearer, on a special day. */
export interface PeakInterval extends MsInterval {
  readonly periodIndex: number
  readonly priceMinorPerKwh: number
}
