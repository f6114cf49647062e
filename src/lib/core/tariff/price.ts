/**
 * What a kilowatt-hour costs at an instant and when a property's hours are on-peak: marginal first-tier prices with the month's
 * adder. A caller who asks often prepares the tariff once; the answers are the same.
 */
import type { Day, MsInterval } from '../time/types.ts'
import { MIN_PER_DAY, MS_PER_MIN } from '../units.ts'
import { energyGrid, monthIndexOf, rowIndexOf, scheduleBands } from './schedule.ts'
import type { PeakInterval, PriceOutcome, Tariff, TariffVersion } from './types.ts'

export { versionOn } from './schedule.ts'

/** A stretch in which one price holds. */
export interface PriceBand extends MsInterval {
  readonly price: PriceOutcome
  readonly onPeak: boolean
}
/** Price bands worked out beforehand, for callers who ask millions of times. */
export interface PreparedTariff {
  readonly bandAt: (instantMs: number) => PriceBand
}

const MS_PER_DAY = MIN_PER_DAY * MS_PER_MIN

/** Marginal price of the first tier, adjustment and month's fuel adder included. */
export function periodPrice(version: TariffVersion, periodIndex: number, day: Day): number {
  const fuel = version.fuelAdjustmentMinorPerKwh?.[monthIndexOf(day)] ?? 0
  return (version.energyPeriods[periodIndex]?.[0]?.priceMinorPerKwh ?? 0) + fuel
}

/**
 * Prices above which an hour is on-peak, or at which it is too: the dearest price of the weekdays and weekends of a month or season.
 * Special days are left out, so that one critical day does not take the peak from all others; on such a day itself a dearer hour is
 * on-peak even where all other days have one price.
 */
function peakRule(version: TariffVersion, day: Day): (priceMinorPerKwh: number) => boolean {
  const row = rowIndexOf(version, day)
  const periods = new Set([...(version.weekdayGrid[row] ?? []), ...(version.weekendGrid[row] ?? [])])
  const prices = [...periods].map((period) => periodPrice(version, period, day))
  const dearest = Math.max(...prices)
  return dearest > Math.min(...prices) ? (price) => price >= dearest : (price) => price > dearest
}

/** Stretches of one period each that tile a range, unpriced ones too. */
export function allBands(tariff: Tariff, range: MsInterval): readonly PriceBand[] {
  const ruleOn = new Map<Day, ReturnType<typeof peakRule>>()
  return scheduleBands(tariff, range, energyGrid).map(({ startsAtMs, endsAtMs, day, version, periodIndex }) => {
    if (!version) {
      const reason = `No version of the tariff is in force on ${day}.`
      return { startsAtMs, endsAtMs, price: { status: 'no-version', reason }, onPeak: false }
    }
    const priceMinorPerKwh = periodPrice(version, periodIndex, day)
    let isPeak = ruleOn.get(day)
    if (!isPeak) ruleOn.set(day, (isPeak = peakRule(version, day)))
    return { startsAtMs, endsAtMs, price: { status: 'priced', priceMinorPerKwh, periodIndex }, onPeak: isPeak(priceMinorPerKwh) }
  })
}

export function prepareTariff(tariff: Tariff): PreparedTariff {
  const byUtcDay = new Map<number, readonly PriceBand[]>()
  return {
    bandAt: (instantMs) => {
      const utcDay = Math.floor(instantMs / MS_PER_DAY)
      let bands = byUtcDay.get(utcDay)
      if (!bands) {
        bands = allBands(tariff, { startsAtMs: utcDay * MS_PER_DAY, endsAtMs: (utcDay + 1) * MS_PER_DAY })
        byUtcDay.set(utcDay, bands)
      }
      for (const band of bands) if (instantMs < band.endsAtMs) return band
      throw new RangeError(`The bands of a day end before ${instantMs}.`)
    },
  }
}

/** Bands that somebody else worked out, in order and without a gap; before and after them there is no price. */
export function preparedBands(bands: readonly PriceBand[]): PreparedTariff {
  const unknown = { status: 'no-version', reason: 'No price is known for this time.' } as const
  const startsAtMs = bands[0]?.startsAtMs ?? Infinity
  return {
    bandAt: (instantMs) => {
      if (instantMs < startsAtMs) return { startsAtMs: -Infinity, endsAtMs: startsAtMs, price: unknown, onPeak: false }
      const band = bands.find((one) => instantMs < one.endsAtMs)
      return band ?? { startsAtMs: bands.at(-1)?.endsAtMs ?? -Infinity, endsAtMs: Infinity, price: unknown, onPeak: false }
    },
  }
}

export const asPrepared = (tariff: Tariff | PreparedTariff): PreparedTariff => ('bandAt' in tariff ? tariff : prepareTariff(tariff))

export const priceAt = (tariff: Tariff | PreparedTariff, instantMs: number): PriceOutcome => asPrepared(tariff).bandAt(instantMs).price

/** Stretches of equal price that tile a range, in order and as long as they can be; without a version there is none. */
export function priceBands(tariff: Tariff | PreparedTariff, range: MsInterval): readonly (PeakInterval & { readonly onPeak: boolean })[] {
  const { bandAt } = asPrepared(tariff)
  const bands: (PeakInterval & { readonly onPeak: boolean })[] = []
  for (let startsAtMs = range.startsAtMs; startsAtMs < range.endsAtMs;) {
    const band = bandAt(startsAtMs)
    const endsAtMs = Math.min(band.endsAtMs, range.endsAtMs)
    if (band.price.status === 'priced') {
      const { periodIndex, priceMinorPerKwh } = band.price
      const last = bands.at(-1)
      if (
        last?.endsAtMs === startsAtMs &&
        last.periodIndex === periodIndex &&
        last.priceMinorPerKwh === priceMinorPerKwh &&
        last.onPeak === band.onPeak
      )
        bands[bands.length - 1] = { ...last, endsAtMs }
      else bands.push({ startsAtMs, endsAtMs, periodIndex, priceMinorPerKwh, onPeak: band.onPeak })
    }
    startsAtMs = endsAtMs
  }
  return bands
}

/** On-peak: the dearest price of its month or season, where that has more than one; a weekend without it has no peak. Cut to the range. */
export const peakIntervals = (tariff: Tariff | PreparedTariff, range: MsInterval): readonly PeakInterval[] =>
  priceBands(tariff, range)
    .filter((band) => band.onPeak)
    .map(({ startsAtMs, endsAtMs, periodIndex, priceMinorPerKwh }) => ({ startsAtMs, endsAtMs, periodIndex, priceMinorPerKwh }))
