/**
 * Energy and peaks of a load in a stretch of time. A reading that straddles an edge is split by time, as if its power were even;
 * its mean power counts as a peak on both sides.
 */
import type { MsInterval, Zone } from '../time/types.ts'
import { offsetSegments } from '../time/zone.ts'
import { MIN_PER_HOUR, MS_PER_MIN } from '../units.ts'
import type { LoadSeries } from './types.ts'

const MS_PER_HOUR = MIN_PER_HOUR * MS_PER_MIN

export const loadEndMs = ({ startsAtMs, slotMin, energyKwh }: LoadSeries): number => startsAtMs + energyKwh.length * slotMin * MS_PER_MIN

export const energyIn = (load: LoadSeries, { startsAtMs, endsAtMs }: MsInterval): number => energyBetween(load, startsAtMs, endsAtMs)

function energyBetween({ startsAtMs, slotMin, energyKwh }: LoadSeries, fromMs: number, toMs: number): number {
  const slotMs = slotMin * MS_PER_MIN
  const from = Math.max(0, (fromMs - startsAtMs) / slotMs)
  const to = Math.min(energyKwh.length, (toMs - startsAtMs) / slotMs)
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

/** A demand window and its mean power. */
export interface DemandWindow extends MsInterval {
  readonly meanKw: number
}
export interface WindowRule {
  readonly windowMin: number
  readonly zone: Zone
}

/**
 * The windows of a range in which the load has readings. They stand on the local clock (a 60-minute window starts on the hour) and
 * restart where clocks change by less. Readings as long as a window, or longer, are their own windows: a coarser meter cannot see shorter peaks.
 */
export function demandWindows(load: LoadSeries, range: MsInterval, { windowMin, zone }: WindowRule): readonly DemandWindow[] {
  const covered = { startsAtMs: Math.max(range.startsAtMs, load.startsAtMs), endsAtMs: Math.min(range.endsAtMs, loadEndMs(load)) }
  if (covered.startsAtMs >= covered.endsAtMs) return []
  if (load.slotMin >= windowMin) return slotWindows(load, covered)
  const windowMs = windowMin * MS_PER_MIN
  const windows: DemandWindow[] = []
  for (const segment of offsetSegments(covered, zone)) {
    let boundaryMs = Math.floor((segment.startsAtMs + segment.offsetMs) / windowMs) * windowMs - segment.offsetMs
    for (; boundaryMs < segment.endsAtMs; boundaryMs += windowMs) {
      const startsAtMs = Math.max(boundaryMs, segment.startsAtMs)
      const endsAtMs = Math.min(boundaryMs + windowMs, segment.endsAtMs)
      windows.push({ startsAtMs, endsAtMs, meanKw: energyBetween(load, startsAtMs, endsAtMs) / ((endsAtMs - startsAtMs) / MS_PER_HOUR) })
    }
  }
  return windows
}

export const meanKw = (load: LoadSeries, window: MsInterval): number =>
  energyIn(load, window) / ((window.endsAtMs - window.startsAtMs) / MS_PER_HOUR)

function slotWindows(load: LoadSeries, covered: MsInterval): readonly DemandWindow[] {
  const slotMs = load.slotMin * MS_PER_MIN
  const windows: DemandWindow[] = []
  const first = Math.floor((covered.startsAtMs - load.startsAtMs) / slotMs)
  for (let slot = first; load.startsAtMs + slot * slotMs < covered.endsAtMs; slot++) {
    const startsAtMs = load.startsAtMs + slot * slotMs
    windows.push({ startsAtMs, endsAtMs: startsAtMs + slotMs, meanKw: (load.energyKwh[slot] ?? 0) * (MIN_PER_HOUR / load.slotMin) })
  }
  return windows
}

export function peakKw(windows: readonly DemandWindow[]): number {
  let peak = 0
  for (const window of windows) if (window.meanKw > peak) peak = window.meanKw
  return peak
}

/** Highest window that touches each period; both lists are in time order. */
export function peakByPeriod(
  windows: readonly DemandWindow[],
  bands: readonly (MsInterval & { readonly periodIndex: number })[],
): ReadonlyMap<number, number> {
  const peaks = new Map<number, number>()
  let next = 0
  for (const band of bands) {
    while (next > 0 && (windows[next - 1]?.endsAtMs ?? 0) > band.startsAtMs) next--
    while (next < windows.length && (windows[next]?.endsAtMs ?? 0) <= band.startsAtMs) next++
    let peak = peaks.get(band.periodIndex) ?? 0
    for (; next < windows.length; next++) {
      const window = windows[next]
      if (!window || window.startsAtMs >= band.endsAtMs) break
      if (window.meanKw > peak) peak = window.meanKw
    }
    peaks.set(band.periodIndex, peak)
  }
  return peaks
}
