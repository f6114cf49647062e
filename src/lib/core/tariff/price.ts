/** What a kilowatt-hour costs at an instant, when a property's hours are on-peak, and what a load costs. */
import { civilOf, dayBounds, addDays } from '../time/civil.ts'
import type { Day, MsInterval } from '../time/types.ts'
import { MIN_PER_DAY, MS_PER_MIN } from '../units.ts'
import type { PeakInterval, PriceOutcome, ScheduleGrid, Tariff, TariffVersion } from './types.ts'

/** The version in force on a local day; the newest that has begun. */
export function versionOn(tariff: Tariff, day: Day): TariffVersion | null {
  return tariff.versions.findLast((version) => version.effectiveFrom <= day) ?? null
}

/** Saturday and Sunday are the weekend; a special day bills as the type it is given. */
export function dayTypeOf(version: TariffVersion, day: Day, weekday: number): 'weekday' | 'weekend' {
  return version.specialDays.find((special) => special.day === day)?.dayType ?? (weekday >= 5 ? 'weekend' : 'weekday')
}

export function periodIn(grid: ScheduleGrid, day: Day, minuteOfDay: number): number {
  const row = grid[Number(day.slice(5, 7)) - 1] ?? []
  return row[Math.min(row.length - 1, Math.floor((minuteOfDay * row.length) / MIN_PER_DAY))] ?? 0
}

/** Marginal price of the first tier, adjustment and month's fuel adder included. */
export function periodPrice(version: TariffVersion, periodIndex: number, day: Day): number {
  const fuel = version.fuelAdjustmentMinorPerKwh?.[Number(day.slice(5, 7)) - 1] ?? 0
  return (version.energyPeriods[periodIndex]?.[0]?.priceMinorPerKwh ?? 0) + fuel
}

export function priceAt(tariff: Tariff, instantMs: number): PriceOutcome {
  const { day, minuteOfDay, weekday } = civilOf(instantMs, tariff.zone)
  const version = versionOn(tariff, day)
  if (!version) return { status: 'no-version', reason: `No version of the tariff is in force on ${day}.` }
  const grid = dayTypeOf(version, day, weekday) === 'weekend' ? version.weekendGrid : version.weekdayGrid
  const periodIndex = periodIn(grid, day, minuteOfDay)
  return { status: 'priced', periodIndex, priceMinorPerKwh: periodPrice(version, periodIndex, day) }
}

const STEP_MIN = 15

/** Quarter hours of a local day with their price; grids and clock changes fall on quarter hours. */
function pricedDay(tariff: Tariff, day: Day): readonly (MsInterval & { periodIndex: number; priceMinorPerKwh: number })[] {
  const { startsAtMs, endsAtMs } = dayBounds(day, tariff.zone)
  const priced: { startsAtMs: number; endsAtMs: number; periodIndex: number; priceMinorPerKwh: number }[] = []
  for (let atMs = startsAtMs; atMs < endsAtMs; atMs += STEP_MIN * MS_PER_MIN) {
    const price = priceAt(tariff, atMs)
    if (price.status !== 'priced') return []
    const last = priced.at(-1)
    const untilMs = Math.min(endsAtMs, atMs + STEP_MIN * MS_PER_MIN)
    if (last && last.periodIndex === price.periodIndex) last.endsAtMs = untilMs
    else priced.push({ startsAtMs: atMs, endsAtMs: untilMs, periodIndex: price.periodIndex, priceMinorPerKwh: price.priceMinorPerKwh })
  }
  return priced
}

/** Stretches of equal price through the local days that a range touches, in order. */
export function priceBands(tariff: Tariff, range: MsInterval): readonly PeakInterval[] {
  const bands: PeakInterval[] = []
  for (let day = civilOf(range.startsAtMs, tariff.zone).day; dayBounds(day, tariff.zone).startsAtMs < range.endsAtMs; day = addDays(day, 1))
    bands.push(...pricedDay(tariff, day))
  return bands
}

/** The dearest price of a month, or `null` where the month has one price only. */
function dearestOfMonth(version: TariffVersion, day: Day): number | null {
  const month = Number(day.slice(5, 7)) - 1
  const periods = new Set([...(version.weekdayGrid[month] ?? []), ...(version.weekendGrid[month] ?? [])])
  const prices = [...periods].map((period) => periodPrice(version, period, day))
  const dearest = Math.max(...prices)
  return prices.length > 0 && dearest > Math.min(...prices) ? dearest : null
}

/** On-peak: the dearest price of its month, where the month has more than one; a weekend without it has no peak. */
export function peakIntervals(tariff: Tariff, range: MsInterval): readonly PeakInterval[] {
  const peaks: PeakInterval[] = []
  for (
    let day = civilOf(range.startsAtMs, tariff.zone).day;
    dayBounds(day, tariff.zone).startsAtMs < range.endsAtMs;
    day = addDays(day, 1)
  ) {
    const version = versionOn(tariff, day)
    const dearest = version && dearestOfMonth(version, day)
    if (dearest !== null) peaks.push(...pricedDay(tariff, day).filter((band) => band.priceMinorPerKwh === dearest))
  }
  return peaks.filter((peak) => peak.endsAtMs > range.startsAtMs && peak.startsAtMs < range.endsAtMs)
}

export interface LoadPiece extends MsInterval {
  readonly powerW: number
}
export type CostOutcome =
  | {
      readonly status: 'costed'
      /** Not rounded: round once, where it is shown or stored. */ readonly costMinor: number
      readonly energyKwh: number
      readonly peakKwh: number
    }
  | { readonly status: 'no-version'; readonly reason: string }

/** Energy cost of a load at marginal first-tier prices, split exactly at price boundaries; demand and fixed charges are the bill's. */
export function costOf(tariff: Tariff, load: readonly LoadPiece[]): CostOutcome {
  let costMinor = 0
  let energyKwh = 0
  let peakKwh = 0
  for (const piece of load) {
    const peaks = peakIntervals(tariff, piece)
    for (let atMs = piece.startsAtMs; atMs < piece.endsAtMs;) {
      const boundaryMs = (Math.floor(atMs / (STEP_MIN * MS_PER_MIN)) + 1) * STEP_MIN * MS_PER_MIN
      const untilMs = Math.min(boundaryMs, piece.endsAtMs)
      const price = priceAt(tariff, atMs)
      if (price.status !== 'priced') return price
      const kwh = (piece.powerW / 1_000) * ((untilMs - atMs) / (60 * MS_PER_MIN))
      costMinor += kwh * price.priceMinorPerKwh
      energyKwh += kwh
      if (peaks.some((peak) => peak.startsAtMs <= atMs && atMs < peak.endsAtMs)) peakKwh += kwh
      atMs = untilMs
    }
  }
  return { status: 'costed', costMinor, energyKwh, peakKwh }
}
