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
/** 12 rows (January first) of equal slots of the local day; a value is a period's index. */
export type ScheduleGrid = readonly (readonly number[])[]

export interface TariffVersion {
  readonly name: string
  readonly utility: string
  /** Local date from which it applies, until the next version's. */
  readonly effectiveFrom: Day
  readonly currency: string
  /** Minor units per major unit, 100 for most. */
  readonly minorPerMajor: number
  readonly energyPeriods: readonly (readonly EnergyTier[])[]
  readonly weekdayGrid: ScheduleGrid
  readonly weekendGrid: ScheduleGrid
  /** Dates billed by another day type. */
  readonly specialDays: readonly { readonly day: Day; readonly dayType: 'weekday' | 'weekend' }[]
  readonly flatDemand: {
    readonly tiersByStructure: readonly (readonly DemandTier[])[]
    readonly structureByMonth: readonly number[]
  } | null
  readonly periodDemand: {
    readonly tiersByPeriod: readonly (readonly DemandTier[])[]
    readonly weekdayGrid: ScheduleGrid
    readonly weekendGrid: ScheduleGrid
  } | null
  readonly demandWindowMin: 15 | 30 | 60
  readonly fixed: { readonly amountMinor: number; readonly per: 'month' | 'day' | 'year' } | null
  readonly minimum: { readonly amountMinor: number; readonly per: 'month' | 'year' } | null
  /** Adder by month. */
  readonly fuelAdjustmentMinorPerKwh: readonly number[] | null
}

/** Versions in order of `effectiveFrom`, in one zone. */
export interface Tariff {
  readonly zone: string
  readonly versions: readonly TariffVersion[]
}

/** Interval energy: slot i covers `[startsAtMs + i·slotMin, …)`. */
export interface LoadSeries {
  readonly startsAtMs: number
  readonly slotMin: number
  readonly energyKwh: readonly number[]
}

export interface BillLine {
  readonly kind: 'energy' | 'flat-demand' | 'period-demand' | 'fixed' | 'minimum' | 'fuel'
  readonly label: string
  readonly quantity: number
  readonly unit: string
  /** Rounded once, here. */
  readonly amountMinor: number
  readonly periodIndex: number | null
}
export interface Bill {
  readonly interval: MsInterval
  readonly lines: readonly BillLine[]
  readonly totalMinor: number
}
export type PriceOutcome =
  | { readonly status: 'priced'; readonly priceMinorPerKwh: number; readonly periodIndex: number }
  | { readonly status: 'no-version'; readonly reason: string }
/** `on-peak` = the dearest price of its month, when that month has more than one. */
export interface PeakInterval extends MsInterval {
  readonly periodIndex: number
  readonly priceMinorPerKwh: number
}
