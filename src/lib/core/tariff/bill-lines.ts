/** The lines of one part of a month: what each charge of a version comes to for that part's energy and peaks. */
import type { Day, MsInterval } from '../time/types.ts'
import { roundMinor } from './money.ts'
import { demandGrid, energyGrid, monthIndexOf, scheduleBands } from './schedule.ts'
import { cutDemand, cutEnergy, type TierCut } from './tiers.ts'
import type { BillLine, LoadSeries, Tariff, TariffVersion } from './types.ts'
import { demandStretches, energyByPeriod, meanKw, peakByPeriod, peakKw } from './usage.ts'

/** Consecutive days of one month under one version. Bounds, fixed and demand charges are cut to its share of the month's days. */
export interface BillPart {
  readonly version: TariffVersion
  readonly interval: MsInterval
  readonly firstDay: Day
  readonly days: number
  readonly daysInMonth: number
}
export interface PartInput {
  readonly tariff: Tariff
  readonly load: LoadSeries
  /** Least flat demand that is billed whatever this month's peak, from earlier months. */
  readonly leastKw: number
}

const MONTHS_PER_YEAR = 12

/** Rounds once, here. */
export function lineOf(line: Omit<BillLine, 'exactMinor' | 'amountMinor'>): BillLine {
  const exactMinor = line.quantity * line.priceMinorPerUnit
  return { ...line, exactMinor, amountMinor: roundMinor(exactMinor) }
}

export function partLines(part: BillPart, input: PartInput): readonly BillLine[] {
  const { version, interval } = part
  const stretches = demandStretches(input.load, interval, { windowMin: version.demandWindowMin, zone: input.tariff.zone })
  const lines = [
    ...energyLines(part, input, peakKw(stretches)),
    ...flatDemandLines(part, Math.max(peakKw(stretches), input.leastKw)),
    ...periodDemandLines(part, peakByPeriod(stretches, scheduleBands(input.tariff, interval, demandGrid))),
    ...coincidentLines(part, input.load),
    ...fixedLines(part),
  ]
  return [...lines, ...minimumLines(part, lines)]
}

function energyLines(part: BillPart, { tariff, load }: PartInput, peak: number): readonly BillLine[] {
  const { version, interval, days, daysInMonth, firstDay } = part
  const byPeriod = energyByPeriod(load, scheduleBands(tariff, interval, energyGrid))
  const totalKwh = [...byPeriod.values()].reduce((sum, kwh) => sum + kwh, 0)
  const basis = { days, monthFraction: days / daysInMonth, peakKw: peak }
  const lines = [...byPeriod].flatMap(([periodIndex, periodKwh]) =>
    cutEnergy(version.energyPeriods[periodIndex] ?? [], periodKwh, { totalKwh, basis })
      .filter(({ quantity }) => quantity > 0)
      .map((cut) =>
        cutLine(cut, {
          kind: 'energy',
          label: `Energy, ${version.periodNames?.[periodIndex] ?? `period ${periodIndex}`}`,
          unit: 'kWh',
          periodIndex,
        }),
      ),
  )
  const fuel = version.fuelAdjustmentMinorPerKwh?.[monthIndexOf(firstDay)] ?? 0
  if (fuel === 0 || totalKwh === 0) return lines
  return [
    ...lines,
    lineOf({ kind: 'fuel', label: 'Fuel adjustment', quantity: totalKwh, unit: 'kWh', priceMinorPerUnit: fuel, periodIndex: null }),
  ]
}

function flatDemandLines({ version: { flatDemand }, firstDay, days, daysInMonth }: BillPart, billedKw: number): readonly BillLine[] {
  if (!flatDemand) return []
  const tiers = flatDemand.tiersByStructure[flatDemand.structureByMonth[monthIndexOf(firstDay)] ?? 0] ?? []
  return cutDemand(tiers, billedKw)
    .filter(({ quantity, priceMinor }) => quantity > 0 && priceMinor !== 0)
    .map((cut) =>
      cutLine(cut, { kind: 'flat-demand', label: 'Demand, highest of the month', unit: 'kW', periodIndex: null }, days / daysInMonth),
    )
}

function periodDemandLines(
  { version: { periodDemand }, days, daysInMonth }: BillPart,
  peaks: ReadonlyMap<number, number>,
): readonly BillLine[] {
  if (!periodDemand) return []
  return [...peaks].flatMap(([periodIndex, peak]) =>
    cutDemand(periodDemand.tiersByPeriod[periodIndex] ?? [], peak)
      .filter(({ quantity, priceMinor }) => quantity > 0 && priceMinor !== 0)
      .map((cut) =>
        cutLine(
          cut,
          {
            kind: 'period-demand',
            label: `Demand, ${periodDemand.periodNames?.[periodIndex] ?? `period ${periodIndex}`}`,
            unit: 'kW',
            periodIndex,
          },
          days / daysInMonth,
        ),
      ),
  )
}

/** Named hours are billed with the last of them, so that a group that spans months is billed once. */
function coincidentLines({ version, interval }: BillPart, load: LoadSeries): readonly BillLine[] {
  return (version.coincidentDemand ?? []).flatMap(({ hours, priceMinorPerKw }) => {
    const lastMs = Math.max(...hours.map((hour) => hour.startsAtMs))
    if (lastMs < interval.startsAtMs || lastMs >= interval.endsAtMs) return []
    const quantity = Math.max(...hours.map((hour) => meanKw(load, hour)))
    return [
      lineOf({
        kind: 'coincident-demand',
        label: 'Demand at the system’s peak',
        quantity,
        unit: 'kW',
        priceMinorPerUnit: priceMinorPerKw,
        periodIndex: null,
      }),
    ]
  })
}

/**
 * A daily charge counts the days of the month (some simulation tools bill 365/12 of them), a yearly one is billed in twelfths; a part
 * of a month bears its share of days.
 */
function fixedLines({ version: { fixed }, days, daysInMonth }: BillPart): readonly BillLine[] {
  if (!fixed || fixed.amountMinor === 0) return []
  const months = days / daysInMonth
  const quantity = fixed.per === 'day' ? days : fixed.per === 'month' ? months : months / MONTHS_PER_YEAR
  return [
    lineOf({ kind: 'fixed', label: 'Fixed charge', quantity, unit: fixed.per, priceMinorPerUnit: fixed.amountMinor, periodIndex: null }),
  ]
}

/** Tops the lines up to the minimum; both sides rounded, so that the total is the minimum to the unit. Yearly minimums are the year's. */
function minimumLines({ version: { minimum }, days, daysInMonth }: BillPart, lines: readonly BillLine[]): readonly BillLine[] {
  if (!minimum || minimum.per === 'year') return []
  const exactLeast = minimum.amountMinor * (minimum.per === 'day' ? days : days / daysInMonth)
  return topUp(exactLeast, lines, 'Up to the minimum charge')
}

export function topUp(
  leastMinor: number,
  lines: readonly Pick<BillLine, 'exactMinor' | 'amountMinor'>[],
  label: string,
): readonly BillLine[] {
  const exactMinor = Math.max(0, leastMinor - lines.reduce((sum, line) => sum + line.exactMinor, 0))
  const amountMinor = Math.max(0, roundMinor(leastMinor) - lines.reduce((sum, line) => sum + line.amountMinor, 0))
  if (exactMinor === 0 && amountMinor === 0) return []
  return [
    { kind: 'minimum', label, quantity: 1, unit: 'charge', priceMinorPerUnit: exactMinor, exactMinor, amountMinor, periodIndex: null },
  ]
}

type LineHead = Pick<BillLine, 'kind' | 'label' | 'unit' | 'periodIndex'>

function cutLine({ quantity, priceMinor, from, to }: TierCut, head: LineHead, share = 1): BillLine {
  const bounds = from > 0 ? `, above ${shown(from)} ${head.unit}` : to === null ? '' : `, up to ${shown(to)} ${head.unit}`
  return lineOf({ ...head, label: head.label + bounds, quantity, priceMinorPerUnit: priceMinor * share })
}

const shown = (bound: number): string => String(Math.round(bound * 100) / 100)
