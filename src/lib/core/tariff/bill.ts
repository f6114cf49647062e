/**
 * A month's and a year's bill of a load. Each version bills its own days of a month: its tier bounds, fixed, minimum and demand
 * charges are cut to the share of days, and its demand is the peak inside them. Every line is rounded once; the total adds the rounded lines.
 */
import { addDays, addMonths, dayBounds, daysOfMonth, intersect, monthBounds, monthOf } from '../time/civil.ts'
import type { Day, MsInterval } from '../time/types.ts'
import { type BillPart, partLines, topUp } from './bill-lines.ts'
import { versionOn } from './schedule.ts'
import type { Bill, BillLine, LoadSeries, Tariff, TariffVersion } from './types.ts'
import { demandStretches, loadEndMs, peakKw } from './usage.ts'

/** `month` is `YYYY-MM`. Readings before it are used where the tariff looks back. */
export function billMonth(tariff: Tariff, month: string, load: LoadSeries): Bill {
  const interval = monthBounds(month, tariff.zone)
  const runs = versionRuns(tariff, month)
  const notes = new Set<string>()
  const lines = runs.flatMap(({ version, ...part }) => {
    if (!version) return []
    const { leastKw, note } = lookBack(version, { tariff, month, load })
    if (note) notes.add(note)
    if (version.minimum?.per === 'year') notes.add('The minimum of the year is not in a month’s bill: it is settled with the year’s.')
    if (hasUnreadPeakHours(version, { interval: part.interval, load }))
      notes.add('The readings miss some of the hours of the system’s peak: demand at them may be higher.')
    return partLines({ version, ...part }, { tariff, load, leastKw })
  })
  const unbilled = runs
    .filter((run) => run.version === null)
    .map((run) => ({ interval: run.interval, reason: `No version of the tariff is in force from ${run.firstDay} for ${run.days} days.` }))
  const covered = intersect(interval, { startsAtMs: load.startsAtMs, endsAtMs: loadEndMs(load) })
  const coveredFraction = covered ? (covered.endsAtMs - covered.startsAtMs) / (interval.endsAtMs - interval.startsAtMs) : 0
  return { interval, lines, totalMinor: totalOf(lines), unbilled, coveredFraction, notes: [...notes] }
}

export interface YearBill {
  readonly months: readonly Bill[]
  /** What only a year can tell: the top-up to a yearly minimum. */
  readonly annualLines: readonly BillLine[]
  readonly totalMinor: number
}

export function billYear(tariff: Tariff, year: number, load: LoadSeries): YearBill {
  const first = `${String(year).padStart(4, '0')}-01`
  const months = Array.from({ length: 12 }, (_, index) => billMonth(tariff, addMonths(first, index), load))
  const lines = months.flatMap((bill) => bill.lines)
  const leastMinor = yearlyMinimum(tariff, first)
  const annualLines = leastMinor > 0 ? topUp(leastMinor, lines, 'Up to the minimum of the year') : []
  return { months, annualLines, totalMinor: totalOf(lines) + totalOf(annualLines) }
}

const totalOf = (lines: readonly BillLine[]): number => lines.reduce((sum, line) => sum + line.amountMinor, 0)

/** Each version's yearly minimum counts for its share of the year's days. */
function yearlyMinimum(tariff: Tariff, firstMonth: string): number {
  const days = Array.from({ length: 12 }, (_, index) => daysOfMonth(addMonths(firstMonth, index))).flat()
  const sum = days.reduce((total, day) => {
    const minimum = versionOn(tariff, day)?.minimum
    return total + (minimum?.per === 'year' ? minimum.amountMinor : 0)
  }, 0)
  return sum / days.length
}

/** The month's days grouped by the version in force. */
function versionRuns(tariff: Tariff, month: string): readonly (Omit<BillPart, 'version'> & { readonly version: TariffVersion | null })[] {
  const days = daysOfMonth(month)
  const groups: { version: TariffVersion | null; days: Day[] }[] = []
  for (const day of days) {
    const version = versionOn(tariff, day)
    const last = groups.at(-1)
    if (last && last.version === version) last.days.push(day)
    else groups.push({ version, days: [day] })
  }
  return groups.map((group) => {
    const firstDay = group.days[0] ?? `${month}-01`
    const interval: MsInterval = {
      startsAtMs: dayBounds(firstDay, tariff.zone).startsAtMs,
      endsAtMs: dayBounds(addDays(firstDay, group.days.length - 1), tariff.zone).endsAtMs,
    }
    return { version: group.version, interval, firstDay, days: group.days.length, daysInMonth: days.length }
  })
}

/** Whether hours that this part bills lie outside the readings. */
const hasUnreadPeakHours = (
  { coincidentDemand = [] }: TariffVersion,
  { interval, load }: { readonly interval: MsInterval; readonly load: LoadSeries },
) =>
  coincidentDemand
    .filter(
      ({ hours }) => intersect(interval, { startsAtMs: Math.max(...hours.map((hour) => hour.startsAtMs)), endsAtMs: Infinity }) !== null,
    )
    .some(({ hours }) => hours.some((hour) => hour.startsAtMs < load.startsAtMs || hour.endsAtMs > loadEndMs(load)))

/** The least demand that earlier months leave. What no reading tells is not invented: it is noted. */
function lookBack(
  { lookback, demandWindowMin }: TariffVersion,
  { tariff, month, load }: { readonly tariff: Tariff; readonly month: string; readonly load: LoadSeries },
): { readonly leastKw: number; readonly note: string | null } {
  if (!lookback) return { leastKw: 0, note: null }
  const { months } = lookback
  const count = months.kind === 'range' ? months.count : 11
  const earlier = Array.from({ length: count }, (_, index) => addMonths(month, -1 - index)).filter(
    (one) => months.kind === 'range' || months.counts[Number(one.slice(5, 7)) - 1],
  )
  const peaks = earlier.map((one) =>
    peakKw(demandStretches(load, monthBounds(one, tariff.zone), { windowMin: demandWindowMin, zone: tariff.zone })),
  )
  const unknown = earlier.filter((one) => monthBounds(one, tariff.zone).startsAtMs < load.startsAtMs)
  const note =
    unknown.length > 0
      ? `Billed demand looks back ${unknown.length} months further than the readings, to ${monthOf(unknown.at(-1) ?? month)}: it may be higher.`
      : null
  return { leastKw: lookback.fraction * Math.max(0, ...peaks), note }
}
