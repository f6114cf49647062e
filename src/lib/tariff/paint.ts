/** Painting periods on a draft's week: which columns there are, what a cell holds, and a rectangle given another period. Pure. */
import type { ScheduleGrid } from '#lib/core/tariff/types.ts'
import { MIN_PER_DAY } from '#lib/core/units.ts'
import { formatMinuteOfDay } from '#lib/figures.ts'
import { type Draft, type Layer, mapGrids, stepped } from './draft.ts'

/** One kind of day in one season. */
export interface Column {
  readonly season: number
  readonly dayType: string
}
/** Columns `[fromColumn, toColumn)` and slots `[fromSlot, toSlot)`. */
export interface Rectangle {
  readonly fromColumn: number
  readonly toColumn: number
  readonly fromSlot: number
  readonly toSlot: number
}

export const dayTypesOf = ({ extraDayTypes = [] }: Draft, layer: Layer): readonly string[] => [
  'weekday',
  'weekend',
  ...extraDayTypes.filter((one) => layer === 'energy' || one.demandGrid !== null).map((one) => one.name),
]

export const columnsOf = (draft: Draft, layer: Layer): readonly Column[] =>
  draft.seasons.flatMap((_, season) => dayTypesOf(draft, layer).map((dayType) => ({ season, dayType })))

export const dayTypeWords = (dayType: string): string =>
  dayType === 'weekday' ? 'Monday to Friday' : dayType === 'weekend' ? 'Saturday, Sunday' : dayType

export const slotCount = (draft: Draft): number => draft.weekdayGrid[0]?.length ?? 24

/** "16:00" of a slot's beginning; the count of slots is "24:00". */
export const slotTime = (draft: Draft, slot: number): string => formatMinuteOfDay((slot * MIN_PER_DAY) / slotCount(draft))

export function gridAt(draft: Draft, layer: Layer, dayType: string): ScheduleGrid {
  const { periodDemand, extraDayTypes = [] } = draft
  const extra = extraDayTypes.find((one) => one.name === dayType)
  if (layer === 'energy') return dayType === 'weekday' ? draft.weekdayGrid : (extra?.energyGrid ?? draft.weekendGrid)
  if (dayType === 'weekday') return periodDemand?.weekdayGrid ?? []
  return extra?.demandGrid ?? periodDemand?.weekendGrid ?? []
}

export const periodAt = (draft: Draft, layer: Layer, { season, dayType }: Column, slot: number): number =>
  gridAt(draft, layer, dayType)[season]?.[slot] ?? 0

function withGrid(draft: Draft, layer: Layer, dayType: string, grid: ScheduleGrid): Draft {
  if (dayType !== 'weekday' && dayType !== 'weekend') {
    const field = layer === 'energy' ? 'energyGrid' : 'demandGrid'
    return { ...draft, extraDayTypes: (draft.extraDayTypes ?? []).map((one) => (one.name === dayType ? { ...one, [field]: grid } : one)) }
  }
  const field = dayType === 'weekday' ? 'weekdayGrid' : 'weekendGrid'
  if (layer === 'energy') return { ...draft, [field]: grid }
  return draft.periodDemand ? { ...draft, periodDemand: { ...draft.periodDemand, [field]: grid } } : draft
}

export function paint(draft: Draft, layer: Layer, area: Rectangle, period: number): Draft {
  return columnsOf(draft, layer)
    .slice(area.fromColumn, area.toColumn)
    .reduce((painted, { season, dayType }) => {
      const grid = gridAt(painted, layer, dayType).map((row, index) =>
        index === season ? row.map((was, slot) => (slot >= area.fromSlot && slot < area.toSlot ? period : was)) : row,
      )
      return withGrid(painted, layer, dayType, grid)
    }, draft)
}

/** The rectangle between two cells, both included. */
export const between = (
  one: { readonly column: number; readonly slot: number },
  other: { readonly column: number; readonly slot: number },
): Rectangle => ({
  fromColumn: Math.min(one.column, other.column),
  toColumn: Math.max(one.column, other.column) + 1,
  fromSlot: Math.min(one.slot, other.slot),
  toSlot: Math.max(one.slot, other.slot) + 1,
})

/** "Summer, Monday to Friday, 16:00 to 20:00". */
export function areaWords(draft: Draft, layer: Layer, area: Rectangle): string {
  const columns = columnsOf(draft, layer).slice(area.fromColumn, area.toColumn)
  const where = columns.map(({ season, dayType }) => `${draft.seasons[season]?.name ?? ''}, ${dayTypeWords(dayType)}`)
  return `${where.join('; ')}, ${slotTime(draft, area.fromSlot)} to ${slotTime(draft, area.toSlot)}`
}

/** `null` where coarser steps would lose hours that differ. */
export function withSlots(draft: Draft, steps: number): Draft | null {
  const next = mapGrids(draft, (grid) => grid.map((row) => stepped(row, steps)))
  const back = mapGrids(next, (grid) => grid.map((row) => stepped(row, slotCount(draft))))
  return steps >= slotCount(draft) || JSON.stringify(back) === JSON.stringify(draft) ? next : null
}
