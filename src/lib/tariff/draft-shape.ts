/** Changes to what a draft consists of: seasons, day types and periods, with their rows and cells kept in step. Pure. */
import { rowIndexOf } from '#lib/core/tariff/schedule.ts'
import type { ScheduleGrid } from '#lib/core/tariff/types.ts'
import { type Draft, type Layer, letterOf, mapGrids, openDemand, openEnergy } from './draft.ts'

/** Any leap year: seasons begin on a day of it. */
const YEAR = '2028'

/** A season that begins inside another has its hours, until they are painted. */
export function addSeason(draft: Draft, season: { readonly name: string; readonly startsOn: string }): Draft {
  const from = rowIndexOf(draft, `${YEAR}-${season.startsOn}`)
  const seasons = [...draft.seasons, season]
  return ordered({ ...mapGrids(draft, (grid) => [...grid, grid[from] ?? []]), seasons })
}

export const removeSeason = (draft: Draft, index: number): Draft =>
  draft.seasons.length === 1
    ? draft
    : { ...mapGrids(draft, (grid) => grid.filter((_, row) => row !== index)), seasons: draft.seasons.filter((_, row) => row !== index) }

export const changeSeason = (draft: Draft, index: number, change: { readonly name?: string; readonly startsOn?: string }): Draft =>
  ordered({ ...draft, seasons: draft.seasons.map((season, row) => (row === index ? { ...season, ...change } : season)) })

/** Seasons in the order of the year, each with its rows. */
function ordered(draft: Draft): Draft {
  const order = draft.seasons.map((_, row) => row)
  order.sort((one, other) => draft.seasons[one]!.startsOn.localeCompare(draft.seasons[other]!.startsOn))
  const moved = mapGrids(draft, (grid) => order.map((row) => grid[row] ?? []))
  return { ...moved, seasons: order.map((row) => draft.seasons[row]!) }
}

/** A day type of its own begins with the weekend's hours. */
export const addDayType = (draft: Draft, name: string): Draft => ({
  ...draft,
  extraDayTypes: [
    ...(draft.extraDayTypes ?? []),
    { name, energyGrid: draft.weekendGrid, demandGrid: draft.periodDemand?.weekendGrid ?? null },
  ],
})

/** Its days are billed as a weekend then. */
export const removeDayType = (draft: Draft, name: string): Draft => ({
  ...draft,
  extraDayTypes: (draft.extraDayTypes ?? []).filter((one) => one.name !== name),
  specialDays: draft.specialDays.map((one) => (one.dayType === name ? { ...one, dayType: 'weekend' } : one)),
})

/** Days in order; one that is there already takes the new kind. */
export const withSpecialDay = (draft: Draft, day: string, dayType: string): Draft => ({
  ...draft,
  specialDays: [...draft.specialDays.filter((one) => one.day !== day), { day, dayType }].sort((one, other) =>
    one.day.localeCompare(other.day),
  ),
})

export const withoutSpecialDay = (draft: Draft, day: string): Draft => ({
  ...draft,
  specialDays: draft.specialDays.filter((one) => one.day !== day),
})

export const periodNamesOf = (draft: Draft, layer: Layer): readonly string[] =>
  layer === 'energy' ? draft.periodNames : (draft.periodDemand?.periodNames ?? [])

export function withPeriodName(draft: Draft, layer: Layer, period: number, name: string): Draft {
  const periodNames = periodNamesOf(draft, layer).map((was, index) => (index === period ? name : was))
  if (layer === 'energy') return { ...draft, periodNames }
  return draft.periodDemand ? { ...draft, periodDemand: { ...draft.periodDemand, periodNames } } : draft
}

export function addPeriod(draft: Draft, layer: Layer): Draft {
  const names = periodNamesOf(draft, layer)
  if (layer === 'energy')
    return { ...draft, energyPeriods: [...draft.energyPeriods, openEnergy(0)], periodNames: [...names, `Period ${letterOf(names.length)}`] }
  const { periodDemand } = draft
  if (!periodDemand) return withPeriodDemand(draft)
  const periodNames = [...names, `Demand ${letterOf(names.length)}`]
  return { ...draft, periodDemand: { ...periodDemand, tiersByPeriod: [...periodDemand.tiersByPeriod, openDemand(0)], periodNames } }
}

/** Hours of the period that goes are the first one's then. */
export function removePeriod(draft: Draft, layer: Layer, period: number): Draft {
  const names = periodNamesOf(draft, layer)
  if (names.length === 1) return draft
  const left = <T>(all: readonly T[]): readonly T[] => all.filter((_, index) => index !== period)
  const regrid = (grid: ScheduleGrid): ScheduleGrid =>
    grid.map((row) => row.map((was) => (was === period ? 0 : was > period ? was - 1 : was)))
  const extraDayTypes = (draft.extraDayTypes ?? []).map((one) =>
    layer === 'energy' ? { ...one, energyGrid: regrid(one.energyGrid) } : { ...one, demandGrid: one.demandGrid && regrid(one.demandGrid) },
  )
  if (layer === 'energy')
    return {
      ...draft,
      energyPeriods: left(draft.energyPeriods),
      periodNames: left(names),
      weekdayGrid: regrid(draft.weekdayGrid),
      weekendGrid: regrid(draft.weekendGrid),
      extraDayTypes,
    }
  const { periodDemand } = draft
  if (!periodDemand) return draft
  return {
    ...draft,
    extraDayTypes,
    periodDemand: {
      tiersByPeriod: left(periodDemand.tiersByPeriod),
      periodNames: left(names),
      weekdayGrid: regrid(periodDemand.weekdayGrid),
      weekendGrid: regrid(periodDemand.weekendGrid),
    },
  }
}

/** Demand by period begins with one free period, to be painted over. */
export function withPeriodDemand(draft: Draft): Draft {
  if (draft.periodDemand) return draft
  const none = draft.weekdayGrid.map((row) => row.map(() => 0))
  return {
    ...draft,
    extraDayTypes: (draft.extraDayTypes ?? []).map((one) => ({ ...one, demandGrid: none })),
    periodDemand: {
      tiersByPeriod: [openDemand(0), openDemand(0)],
      periodNames: ['No demand charge', 'Demand hours'],
      weekdayGrid: none,
      weekendGrid: none,
    },
  }
}

export const withoutPeriodDemand = (draft: Draft): Draft => ({
  ...draft,
  periodDemand: null,
  extraDayTypes: (draft.extraDayTypes ?? []).map((one) => ({ ...one, demandGrid: null })),
})
