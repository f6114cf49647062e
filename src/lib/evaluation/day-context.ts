/** A local day at a site, worked out once for all units: its length, clock change, cold water, on-peak and prices. */
import { inletC } from '#lib/core/tank/inlet.ts'
import { peakIntervals, prepareTariff, priceAt } from '#lib/core/tariff/price.ts'
import { clockChangesIn, dayBounds, weekdayOf } from '#lib/core/time/civil.ts'
import type { Day, MinuteInterval, Zone } from '#lib/core/time/types.ts'
import { MIN_PER_DAY, MS_PER_MIN } from '#lib/core/units.ts'
import type { ClockChange } from '#lib/strip/clock.ts'
import type { DayContext, PriceTable, Site } from './types.ts'

/** Prices and clocks change on quarter hours. */
const SLOT_MIN = 15
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
  const prices = priceTable(site, { startsAtMs, dayMin })
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

function priceTable(
  { tariff }: Pick<Site, 'tariff'>,
  { startsAtMs, dayMin }: { readonly startsAtMs: number; readonly dayMin: number },
): PriceTable | null {
  if (!tariff) return null
  const prepared = prepareTariff(tariff)
  const count = (BEFORE_MIN + dayMin + AFTER_MIN) / SLOT_MIN
  const instants = Array.from({ length: count }, (_, slot) => startsAtMs + (slot * SLOT_MIN - BEFORE_MIN) * MS_PER_MIN)
  const prices = instants.map((atMs) => priceAt(prepared, atMs))
  if (prices.some((price) => price.status !== 'priced')) return null
  const peaks = peakIntervals(prepared, { startsAtMs: instants[0] ?? startsAtMs, endsAtMs: startsAtMs + (dayMin + AFTER_MIN) * MS_PER_MIN })
  return {
    fromMin: -BEFORE_MIN,
    slotMin: SLOT_MIN,
    priceMinorPerKwh: prices.map((price) => (price.status === 'priced' ? price.priceMinorPerKwh : 0)),
    onPeak: instants.map((atMs) => peaks.some((peak) => peak.startsAtMs <= atMs && atMs < peak.endsAtMs)),
  }
}

/** On-peak slots of the day itself, joined. */
function peaksOf({ fromMin, slotMin, onPeak }: PriceTable, dayMin: number): readonly MinuteInterval[] {
  const peaks: { startMin: number; endMin: number }[] = []
  onPeak.forEach((peak, slot) => {
    const startMin = fromMin + slot * slotMin
    if (!peak || startMin < 0 || startMin >= dayMin) return
    const last = peaks.at(-1)
    if (last?.endMin === startMin) last.endMin += slotMin
    else peaks.push({ startMin, endMin: startMin + slotMin })
  })
  return peaks
}
