/** A local day at a site, worked out once for all units: its length, clock change, cold water, on-peak and prices. */
import { inletC } from '#lib/core/tank/inlet.ts'
import { allBands, peakIntervals, preparedBands } from '#lib/core/tariff/price.ts'
import { clockChangesIn, dayBounds, weekdayOf } from '#lib/core/time/civil.ts'
import type { Day, MinuteInterval, MsInterval, Zone } from '#lib/core/time/types.ts'
import { MIN_PER_DAY, MS_PER_MIN } from '#lib/core/units.ts'
import type { ClockChange } from '#lib/strip/clock.ts'
import type { DayContext, PriceTable, Site } from './types.ts'

/** A day's cycle may begin up to a day before its midnight, and a run at its end may last into the next morning. */
const BEFORE_MIN = MIN_PER_DAY
const AFTER_MIN = MIN_PER_DAY / 2
/**
 * Cold water is rounded to a quarter kelvin, so that the days of a week share their simulations. It moves the heat of a shower
 * by at most 0.125 K in about 30 K, 0.4 %; the correlation itself is uncertain by more than a kelvin.
 */
const INLET_STEP_K = 0.25

export function dayContext(site: Pick<Site, 'zone' | 'climate' | 'tariff'>, day: Day): DayContext {
  const { startsAtMs, endsAtMs } = dayBounds(day, site.zone)
  const dayMin = (endsAtMs - startsAtMs) / MS_PER_MIN
  const prices = priceTable(site, { startsAtMs, endsAtMs })
  return {
    day,
    weekday: weekdayOf(day),
    startsAtMs,
    dayMin,
    clockChange: clockChangeOf(day, site.zone),
    inletC: Math.round(inletC(site.climate, day) / INLET_STEP_K) * INLET_STEP_K,
    peaks: prices ? peaksOf(prices, dayMin) : [],
    prices,
  }
}

/** The change inside a day, on the day's own count of elapsed minutes; `null` on ordinary days. */
export function clockChangeOf(day: Day, zone: Zone): ClockChange | null {
  const bounds = dayBounds(day, zone)
  const change = clockChangesIn(bounds, zone)[0]
  return change ? { atMin: (change.atMs - bounds.startsAtMs) / MS_PER_MIN, shiftMin: change.shiftMin } : null
}

/** Bands around the day, moved to its own count of time: an instant here is milliseconds from the day's first. */
function priceTable({ tariff }: Pick<Site, 'tariff'>, { startsAtMs, endsAtMs }: MsInterval): PriceTable | null {
  if (!tariff) return null
  const around = { startsAtMs: startsAtMs - BEFORE_MIN * MS_PER_MIN, endsAtMs: endsAtMs + AFTER_MIN * MS_PER_MIN }
  return allBands(tariff, around).map((band) => ({
    ...band,
    startsAtMs: band.startsAtMs - startsAtMs,
    endsAtMs: band.endsAtMs - startsAtMs,
  }))
}

/** On-peak of the day itself, in its elapsed minutes. */
const peaksOf = (prices: PriceTable, dayMin: number): readonly MinuteInterval[] =>
  peakIntervals(preparedBands(prices), { startsAtMs: 0, endsAtMs: dayMin * MS_PER_MIN }).map((peak) => ({
    startMin: peak.startsAtMs / MS_PER_MIN,
    endMin: peak.endsAtMs / MS_PER_MIN,
  }))
