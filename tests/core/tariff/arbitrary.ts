/** Any tariff, month and load, for laws that hold for all of them. */
import fc from 'fast-check'
import { monthBounds } from '#lib/core/time/civil.ts'
import type { LoadSeries, Tariff, TariffVersion } from '#lib/core/tariff/types.ts'

const zone = fc.constantFrom('Europe/London', 'America/New_York', 'Australia/Lord_Howe', 'Asia/Kathmandu', 'America/Havana', 'UTC')
/** Months with clock changes north and south, a leap day, and one without either. */
const month = fc.constantFrom('2026-03', '2026-04', '2026-10', '2026-11', '2028-02', '2026-07')
const price = fc.integer({ min: 0, max: 60_000 }).map((thousandths) => thousandths / 1_000)
const row = (columns: number) => fc.array(fc.integer({ min: 0, max: 2 }), { minLength: columns, maxLength: columns })
const grid = fc.constantFrom(24, 48, 96).chain((columns) => fc.array(row(columns), { minLength: 12, maxLength: 12 }))
const unit = fc.constantFrom('kWh', 'kWh daily', 'kWh/kW', 'kWh/kW daily')
/** Tiers never get cheaper, so that more energy is never a smaller bill. */
const tiers = fc.tuple(price, price, fc.integer({ min: 1, max: 400 }), unit).map(([one, other, max, of]) => [
  { max, unit: of, priceMinorPerKwh: Math.min(one, other) },
  { max: null, unit: of, priceMinorPerKwh: Math.max(one, other) },
])
const demandTiers = fc.tuple(price, price, fc.integer({ min: 1, max: 20 })).map(([one, other, maxKw]) => [
  { maxKw, priceMinorPerKw: 10 * Math.min(one, other) },
  { maxKw: null, priceMinorPerKw: 10 * Math.max(one, other) },
])
const charge = fc.option(fc.record({ amountMinor: price.map((value) => value * 40), per: fc.constantFrom('month', 'day') }))
const three = <T>(of: fc.Arbitrary<T>) => fc.array(of, { minLength: 3, maxLength: 3 })
export const version: fc.Arbitrary<TariffVersion> = fc.record({
  name: fc.constant('any'),
  utility: fc.constant('any'),
  effectiveFrom: fc.constant('2000-01-01'),
  currency: fc.constant('GBP'),
  minorPerMajor: fc.constant(100),
  energyPeriods: three(tiers),
  weekdayGrid: grid,
  weekendGrid: grid,
  specialDays: fc.constant([{ day: '2026-03-17', dayType: 'weekend' }]),
  flatDemand: fc.option(demandTiers.map((all) => ({ tiersByStructure: [all], structureByMonth: Array<number>(12).fill(0) }))),
  periodDemand: fc.option(fc.record({ tiersByPeriod: three(demandTiers), weekdayGrid: grid, weekendGrid: grid })),
  demandWindowMin: fc.constantFrom(15, 30, 60),
  fixed: charge,
  minimum: charge,
  fuelAdjustmentMinorPerKwh: fc.option(fc.array(price, { minLength: 12, maxLength: 12 })),
})
const secondFrom = fc.option(fc.integer({ min: 2, max: 28 }))
/** A first version and, perhaps, a second one from some day of the month. */
export const tariffIn = (of: string) =>
  fc.tuple(zone, version, version, secondFrom).map(([where, first, second, day]): Tariff => ({
    zone: where,
    versions: day === null ? [first] : [first, { ...second, effectiveFrom: `${of}-${String(day).padStart(2, '0')}` }],
  }))
const slotMin = fc.constantFrom(5, 15, 30, 60)
/** A month's load of uneven slots, repeated from a short pattern. */
const loadIn = (tariff: Tariff, of: string) =>
  fc
    .tuple(slotMin, fc.array(fc.double({ min: 0, max: 3, noNaN: true }), { minLength: 1, maxLength: 40 }))
    .map(([minutes, pattern]): LoadSeries => {
      const { startsAtMs, endsAtMs } = monthBounds(of, tariff.zone)
      const count = Math.ceil((endsAtMs - startsAtMs) / (minutes * 60_000))
      return { startsAtMs, slotMin: minutes, energyKwh: Array.from({ length: count }, (_, slot) => pattern[slot % pattern.length] ?? 0) }
    })
export const billing = month.chain((of) => tariffIn(of).chain((tariff) => loadIn(tariff, of).map((load) => ({ of, tariff, load }))))
