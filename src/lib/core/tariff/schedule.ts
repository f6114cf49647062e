/** Which version, day type and period is in force when: walks a range in stretches of one period, exact over clock changes. */
import { dayOfNumber, weekdayOf } from '../time/civil.ts'
import type { Day, MsInterval } from '../time/types.ts'
import { offsetSegments } from '../time/zone.ts'
import { MIN_PER_DAY, MS_PER_MIN } from '../units.ts'
import type { ScheduleGrid, Tariff, TariffVersion } from './types.ts'

const MS_PER_DAY = MIN_PER_DAY * MS_PER_MIN

/** The version in force on a local day; the newest that has begun. */
export function versionOn(tariff: Tariff, day: Day): TariffVersion | null {
  return tariff.versions.findLast((version) => version.effectiveFrom <= day) ?? null
}

/** Saturday and Sunday are the weekend; a special day bills as the type it is given. */
export function dayTypeOf(version: TariffVersion, day: Day): string {
  const special = version.specialDays.find((one) => one.day === day)
  return special?.dayType ?? (weekdayOf(day) >= 5 ? 'weekend' : 'weekday')
}

/** 0 = January. */
export const monthIndexOf = (day: Day): number => Number(day.slice(5, 7)) - 1

/** The grids' row for a local day: its month's, or its season's. */
export function rowIndexOf({ seasons }: Pick<TariffVersion, 'seasons'>, day: Day): number {
  if (!seasons?.length) return monthIndexOf(day)
  const begun = seasons.findLastIndex((season) => season.startsOn <= day.slice(5))
  return begun === -1 ? seasons.length - 1 : begun
}

/** Chooses the grid that a day type is billed by. */
export type GridOf = (version: TariffVersion, dayType: string) => ScheduleGrid

export const energyGrid: GridOf = (version, dayType) =>
  dayType === 'weekday'
    ? version.weekdayGrid
    : (version.extraDayTypes?.find((one) => one.name === dayType)?.energyGrid ?? version.weekendGrid)

const NO_PERIODS: ScheduleGrid = []
export const demandGrid: GridOf = ({ periodDemand, extraDayTypes }, dayType) => {
  if (!periodDemand) return NO_PERIODS
  if (dayType === 'weekday') return periodDemand.weekdayGrid
  return extraDayTypes?.find((one) => one.name === dayType)?.demandGrid ?? periodDemand.weekendGrid
}

/** A stretch of one local day in one period. */
export interface ScheduleBand extends MsInterval {
  readonly day: Day
  /** `null` before the first version. */
  readonly version: TariffVersion | null
  readonly periodIndex: number
}

/** The bands that tile a range. Both passes of a repeated hour are billed by what the wall clock shows. */
export function scheduleBands(tariff: Tariff, range: MsInterval, gridOf: GridOf): readonly ScheduleBand[] {
  const bands: ScheduleBand[] = []
  for (const segment of offsetSegments(range, tariff.zone)) {
    let startsAtMs = segment.startsAtMs
    while (startsAtMs < segment.endsAtMs) {
      const dayIndex = Math.floor((startsAtMs + segment.offsetMs) / MS_PER_DAY)
      const midnightMs = dayIndex * MS_PER_DAY - segment.offsetMs
      const dayEndMs = Math.min(segment.endsAtMs, midnightMs + MS_PER_DAY)
      const day = dayOfNumber(dayIndex)
      const version = versionOn(tariff, day)
      const row = (version && gridOf(version, dayTypeOf(version, day))[rowIndexOf(version, day)]) ?? [0]
      const columnMs = MS_PER_DAY / row.length
      let column = Math.floor((startsAtMs - midnightMs) / columnMs)
      while (startsAtMs < dayEndMs) {
        const periodIndex = row[column] ?? 0
        while (column < row.length && row[column] === periodIndex) column++
        const endsAtMs = Math.min(dayEndMs, midnightMs + column * columnMs)
        bands.push({ startsAtMs, endsAtMs, day, version, periodIndex })
        startsAtMs = endsAtMs
      }
    }
  }
  return bands
}
