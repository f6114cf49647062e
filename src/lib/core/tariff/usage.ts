/**
 * Energy and peaks of a load in a stretch of time. A reading that straddles an edge is split by time, as if its power were even;
 * its mean power counts as a peak on both sides.
 */
import { intersect } from '../time/civil.ts'
import type { MsInterval, Zone } from '../time/types.ts'
import { offsetSegments } from '../time/zone.ts'
import { MIN_PER_HOUR, MS_PER_MIN } from '../units.ts'
import type { LoadSeries } from './types.ts'

const MS_PER_HOUR = MIN_PER_HOUR * MS_PER_MIN

export const loadEndMs = ({ startsAtMs, slotMin, energyKwh }: LoadSeries): number => startsAtMs + energyKwh.length * slotMin * MS_PER_MIN

export function energyIn({ startsAtMs, slotMin, energyKwh }: LoadSeries, range: MsInterval): number {
  const slotMs = slotMin * MS_PER_MIN
  const from = Math.max(0, (range.startsAtMs - startsAtMs) / slotMs)
  const to = Math.min(energyKwh.length, (range.endsAtMs - startsAtMs) / slotMs)
  if (to <= from) return 0
  const first = Math.floor(from)
  const last = Math.ceil(to) - 1
  if (first === last) return (energyKwh[first] ?? 0) * (to - from)
  let sum = (energyKwh[first] ?? 0) * (first + 1 - from) + (energyKwh[last] ?? 0) * (to - last)
  for (let slot = first + 1; slot < last; slot++) sum += energyKwh[slot] ?? 0
  return sum
}

/** Energy of each period of bands that tile the stretch, in the order in which periods first appear. */
export function energyByPeriod(
  load: LoadSeries,
  bands: readonly (MsInterval & { readonly periodIndex: number })[],
): ReadonlyMap<number, number> {
  const sums = new Map<number, number>()
  for (const band of bands) sums.set(band.periodIndex, (sums.get(band.periodIndex) ?? 0) + energyIn(load, band))
  return sums
}

/**
 * Demand windows of equal length side by side: window i covers `[startsAtMs + i·windowMs, …)`, cut to the stretch itself. A year has
 * tens of thousands of them, so their means stand in one array and not in an object each.
 */
export interface DemandStretch extends MsInterval {
  readonly windowMs: number
  /** Where the first window would start if it were whole: at or before the stretch. */
  readonly firstAtMs: number
  readonly meansKw: Float64Array
}
export interface WindowRule {
  readonly windowMin: number
  readonly zone: Zone
}

/**
 * The windows of a range in which the load has readings. They stand on the local clock (a 60-minute window starts on the hour) and
 * restart where clocks change by less. Readings as long as a window, or longer, are their own windows: a coarser meter cannot see shorter peaks.
 */
export function demandStretches(load: LoadSeries, range: MsInterval, { windowMin, zone }: WindowRule): readonly DemandStretch[] {
  const covered = intersect(range, { startsAtMs: load.startsAtMs, endsAtMs: loadEndMs(load) })
  if (!covered) return []
  if (load.slotMin >= windowMin) return [readingStretch(load, covered)]
  const windowMs = windowMin * MS_PER_MIN
  return offsetSegments(covered, zone).map(({ startsAtMs, endsAtMs, offsetMs }) => {
    const firstAtMs = Math.floor((startsAtMs + offsetMs) / windowMs) * windowMs - offsetMs
    const stretch = { startsAtMs, endsAtMs, windowMs, firstAtMs }
    return { ...stretch, meansKw: windowMeansKw(load, stretch) }
  })
}

function windowMeansKw(load: LoadSeries, { startsAtMs, endsAtMs, windowMs, firstAtMs }: Omit<DemandStretch, 'meansKw'>): Float64Array {
  const means = new Float64Array(Math.ceil((endsAtMs - firstAtMs) / windowMs))
  const slotMs = load.slotMin * MS_PER_MIN
  const slots = windowMs / slotMs
  const firstSlot = (firstAtMs - load.startsAtMs) / slotMs
  const isWhole = Number.isInteger(slots) && Number.isInteger(firstSlot)
  const { energyKwh } = load
  const windowsPerHour = MS_PER_HOUR / windowMs
  for (let window = 0; window < means.length; window++) {
    const fromMs = firstAtMs + window * windowMs
    if (isWhole && fromMs >= startsAtMs && fromMs + windowMs <= endsAtMs) {
      let sum = 0
      const endSlot = firstSlot + (window + 1) * slots
      for (let slot = endSlot - slots; slot < endSlot; slot++) sum += energyKwh[slot] ?? 0
      means[window] = sum * windowsPerHour
    } else means[window] = meanKw(load, { startsAtMs: Math.max(fromMs, startsAtMs), endsAtMs: Math.min(fromMs + windowMs, endsAtMs) })
  }
  return means
}

export const meanKw = (load: LoadSeries, window: MsInterval): number =>
  energyIn(load, window) / ((window.endsAtMs - window.startsAtMs) / MS_PER_HOUR)

function readingStretch(load: LoadSeries, covered: MsInterval): DemandStretch {
  const windowMs = load.slotMin * MS_PER_MIN
  const first = Math.floor((covered.startsAtMs - load.startsAtMs) / windowMs)
  const end = Math.ceil((covered.endsAtMs - load.startsAtMs) / windowMs)
  const meansKw = new Float64Array(end - first)
  const slotsPerHour = MIN_PER_HOUR / load.slotMin
  for (let slot = first; slot < end; slot++) meansKw[slot - first] = (load.energyKwh[slot] ?? 0) * slotsPerHour
  return { ...covered, windowMs, firstAtMs: load.startsAtMs + first * windowMs, meansKw }
}

/** Highest of the windows that touch a range. */
function peakIn({ startsAtMs, endsAtMs, windowMs, firstAtMs, meansKw }: DemandStretch, range: MsInterval): number {
  const fromMs = Math.max(startsAtMs, range.startsAtMs)
  const toMs = Math.min(endsAtMs, range.endsAtMs)
  if (fromMs >= toMs) return 0
  const end = Math.ceil((toMs - firstAtMs) / windowMs)
  let peak = 0
  for (let window = Math.floor((fromMs - firstAtMs) / windowMs); window < end; window++) {
    const kw = meansKw[window] ?? 0
    if (kw > peak) peak = kw
  }
  return peak
}

export const peakKw = (stretches: readonly DemandStretch[]): number =>
  stretches.reduce((peak, stretch) => Math.max(peak, peakIn(stretch, stretch)), 0)

/** Highest window that touches each period's bands. */
export function peakByPeriod(
  stretches: readonly DemandStretch[],
  bands: readonly (MsInterval & { readonly periodIndex: number })[],
): ReadonlyMap<number, number> {
  const peaks = new Map<number, number>()
  for (const band of bands) {
    let peak = peaks.get(band.periodIndex) ?? 0
    for (const stretch of stretches) peak = Math.max(peak, peakIn(stretch, band))
    peaks.set(band.periodIndex, peak)
  }
  return peaks
}
