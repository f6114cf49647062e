/** A tariff of two prices, and ways to change one thing about it. */
import { instantOf } from '#lib/core/time/civil.ts'
import type { Tariff, TariffVersion } from '#lib/core/tariff/types.ts'

export const zone = 'America/Chicago'
const every = (row: readonly number[]) => Array.from({ length: 12 }, () => row)
export const hours = (periodOf: (hour: number) => number) => every(Array.from({ length: 24 }, (_, hour) => periodOf(hour)))
export const price = (priceMinorPerKwh: number) => [{ max: null, unit: 'kWh' as const, priceMinorPerKwh }]
export const demand = (priceMinorPerKw: number) => [{ maxKw: null, priceMinorPerKw }]

/** 10 by night and on weekends, 30 from 16:00 to 20:00 on weekdays. */
export const PLAIN: TariffVersion = {
  name: 'plain',
  utility: 'Tidewater Light',
  effectiveFrom: '2026-01-01',
  currency: 'USD',
  minorPerMajor: 100,
  energyPeriods: [price(10), price(30), price(5), price(200)],
  weekdayGrid: hours((hour) => (hour >= 16 && hour < 20 ? 1 : 0)),
  weekendGrid: hours(() => 0),
  specialDays: [],
  flatDemand: null,
  periodDemand: null,
  demandWindowMin: 15,
  fixed: null,
  minimum: null,
  fuelAdjustmentMinorPerKwh: null,
}
export const tariffWith = (fields: Partial<TariffVersion>): Tariff => ({ zone, versions: [{ ...PLAIN, ...fields }] })
export const at = (day: string, hour: number) => instantOf(day, hour * 60, zone)
