/** A version as it is edited: seasons, names and equal steps spelt out, so that every grid is painted alike. It bills like what it came from. Pure. */
import type { DemandTier, EnergyTier, ScheduleGrid, Season, TariffVersion } from '#lib/core/tariff/types.ts'

export interface Draft extends TariffVersion {
  readonly periodNames: readonly string[]
  readonly seasons: readonly Season[]
}
export type Layer = 'energy' | 'demand'

export const LETTERS = 'ABCDEFGHIJKLMNOPQRSTUVWXYZ'
const MONTHS = ['January', 'February', 'March', 'April', 'May', 'June', 'July', 'August', 'September', 'October', 'November', 'December']
const HOURS = 24

export const letterOf = (period: number): string => LETTERS[period] ?? String(period)

export function draftOf(version: TariffVersion): Draft {
  const steps = Math.max(HOURS, ...gridsOf(version).map((grid) => grid[0]?.length ?? 0))
  const finer = mapGrids(version, (grid) => grid.map((row) => stepped(row, steps)))
  const { seasons, rows } = version.seasons?.length
    ? { seasons: version.seasons, rows: version.seasons.map((_, index) => index) }
    : seasonsOf(gridsOf(finer))
  const named = mapGrids(finer, (grid) => rows.map((row) => grid[row] ?? []))
  const { periodDemand } = named
  return {
    ...named,
    seasons,
    periodNames: version.periodNames ?? version.energyPeriods.map((_, period) => `Period ${letterOf(period)}`),
    periodDemand: periodDemand && {
      ...periodDemand,
      periodNames: periodDemand.periodNames ?? periodDemand.tiersByPeriod.map((_, period) => `Demand ${letterOf(period)}`),
    },
  }
}

/** One price all day: where somebody begins without a record. */
export const blankDraft = (fields: Pick<TariffVersion, 'effectiveFrom' | 'currency' | 'minorPerMajor'>): Draft => {
  const grid: ScheduleGrid = [Array.from({ length: HOURS }, () => 0)]
  return {
    ...fields,
    name: '',
    utility: '',
    energyPeriods: [openEnergy(0)],
    periodNames: ['All hours'],
    seasons: [{ name: 'All year', startsOn: '01-01' }],
    weekdayGrid: grid,
    weekendGrid: grid,
    specialDays: [],
    flatDemand: null,
    periodDemand: null,
    demandWindowMin: 15,
    fixed: null,
    minimum: null,
    fuelAdjustmentMinorPerKwh: null,
  }
}

export const openEnergy = (priceMinorPerKwh: number): readonly EnergyTier[] => [{ max: null, unit: 'kWh', priceMinorPerKwh }]
export const openDemand = (priceMinorPerKw: number): readonly DemandTier[] => [{ maxKw: null, priceMinorPerKw }]

export const gridsOf = ({ weekdayGrid, weekendGrid, extraDayTypes = [], periodDemand }: TariffVersion): readonly ScheduleGrid[] => [
  weekdayGrid,
  weekendGrid,
  ...extraDayTypes.flatMap((one) => (one.demandGrid ? [one.energyGrid, one.demandGrid] : [one.energyGrid])),
  ...(periodDemand ? [periodDemand.weekdayGrid, periodDemand.weekendGrid] : []),
]

/** The same change to every grid of a version: seasons and steps are shared by all of them. */
export function mapGrids<V extends TariffVersion>(version: V, change: (grid: ScheduleGrid) => ScheduleGrid): V {
  const { extraDayTypes, periodDemand } = version
  return {
    ...version,
    weekdayGrid: change(version.weekdayGrid),
    weekendGrid: change(version.weekendGrid),
    ...(extraDayTypes && {
      extraDayTypes: extraDayTypes.map((one) => ({
        ...one,
        energyGrid: change(one.energyGrid),
        demandGrid: one.demandGrid && change(one.demandGrid),
      })),
    }),
    periodDemand: periodDemand && {
      ...periodDemand,
      weekdayGrid: change(periodDemand.weekdayGrid),
      weekendGrid: change(periodDemand.weekendGrid),
    },
  }
}

/** A row in finer or coarser steps; coarser takes what each step begins with. */
export const stepped = (row: readonly number[], steps: number): readonly number[] =>
  Array.from({ length: steps }, (_, step) => row[Math.floor((step * row.length) / steps)] ?? 0)

/** Months that are alike in every grid and follow each other are one season, over the new year too. */
function seasonsOf(grids: readonly ScheduleGrid[]): { readonly seasons: readonly Season[]; readonly rows: readonly number[] } {
  const kinds = MONTHS.map((_, month) => JSON.stringify(grids.map((grid) => grid[month])))
  const starts = kinds.flatMap((kind, month) => (kind === kinds.at(month - 1) ? [] : [month]))
  if (starts.length === 0) return { seasons: [{ name: 'All year', startsOn: '01-01' }], rows: [0] }
  const seasons = starts.map((start, index) => {
    const end = ((starts[index + 1] ?? starts[0]! + 12) + 11) % 12
    return {
      name: start === end ? MONTHS[start]! : `${MONTHS[start]!} to ${MONTHS[end]!}`,
      startsOn: `${String(start + 1).padStart(2, '0')}-01`,
    }
  })
  return { seasons, rows: starts }
}
