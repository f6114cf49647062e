/**
 * Writes a version as an open URDB JSON rate record that `readUrdb` reads back unchanged, and names what the format has no place for.
 * Rates are written with their adjustment included.
 */
import { dayNumber } from '../time/civil.ts'
import { decimal } from './money.ts'
import { rowIndexOf } from './schedule.ts'
import type { DemandTier, ScheduleGrid, TariffVersion } from './types.ts'

export type UrdbRecord = Readonly<Record<string, unknown>>
export interface WrittenUrdb {
  readonly record: UrdbRecord
  readonly notCarried: readonly string[]
}

const S_PER_DAY = 86_400
const HOURS = 24
const MONTHS = 12

export function writeUrdb(version: TariffVersion): WrittenUrdb {
  const major = (minor: number): number => decimal(minor / version.minorPerMajor)
  return {
    record: {
      utility: version.utility,
      name: version.name,
      startdate: dayNumber(version.effectiveFrom) * S_PER_DAY,
      energyratestructure: version.energyPeriods.map((tiers) =>
        tiers.map(({ max, unit, priceMinorPerKwh }) => ({ ...(max === null ? {} : { max }), rate: major(priceMinorPerKwh), unit })),
      ),
      energyweekdayschedule: monthRows(version, version.weekdayGrid),
      energyweekendschedule: monthRows(version, version.weekendGrid),
      ...demandFields(version, major),
      ...chargeFields(version, major),
    },
    notCarried: notCarried(version),
  }
}

/** The format knows months only: each is written by the season of its 15th day. */
const monthRows = (version: TariffVersion, grid: ScheduleGrid): ScheduleGrid =>
  version.seasons?.length
    ? Array.from({ length: MONTHS }, (_, month) => grid[rowIndexOf(version, `2001-${String(month + 1).padStart(2, '0')}-15`)] ?? [])
    : grid

type ToMajor = (minor: number) => number

function demandFields(version: TariffVersion, major: ToMajor): UrdbRecord {
  const { flatDemand, periodDemand, demandWindowMin, lookback } = version
  const tiersOut = (tiers: readonly DemandTier[]) =>
    tiers.map(({ maxKw, priceMinorPerKw }) => ({ ...(maxKw === null ? {} : { max: maxKw }), rate: major(priceMinorPerKw) }))
  return {
    ...(flatDemand && {
      flatdemandunit: 'kW',
      flatdemandstructure: flatDemand.tiersByStructure.map(tiersOut),
      flatdemandmonths: flatDemand.structureByMonth,
    }),
    ...(periodDemand && {
      demandrateunit: 'kW',
      demandratestructure: periodDemand.tiersByPeriod.map(tiersOut),
      demandweekdayschedule: monthRows(version, periodDemand.weekdayGrid),
      demandweekendschedule: monthRows(version, periodDemand.weekendGrid),
    }),
    demandwindow: demandWindowMin,
    ...(lookback && {
      lookbackpercent: lookback.fraction,
      ...(lookback.months.kind === 'range'
        ? { lookbackrange: lookback.months.count }
        : { lookbackmonths: lookback.months.counts.map((counts) => (counts ? 1 : 0)) }),
    }),
  }
}

function chargeFields({ fixed, minimum, fuelAdjustmentMinorPerKwh: fuel }: TariffVersion, major: ToMajor): UrdbRecord {
  return {
    ...(fixed && { fixedchargefirstmeter: major(fixed.amountMinor), fixedchargeunits: `$/${fixed.per}` }),
    ...(minimum && { mincharge: major(minimum.amountMinor), minchargeunits: `$/${minimum.per}` }),
    ...(fuel && { fueladjustmentsmonthly: fuel.map(major) }),
  }
}

function notCarried({
  currency,
  specialDays,
  extraDayTypes,
  seasons = [],
  coincidentDemand,
  weekdayGrid,
  weekendGrid,
  periodDemand,
}: TariffVersion): readonly string[] {
  const grids = [weekdayGrid, weekendGrid, ...(periodDemand ? [periodDemand.weekdayGrid, periodDemand.weekendGrid] : [])]
  const columns = Math.max(...grids.flat().map((row) => row.length))
  return [
    ...(currency === 'USD' ? [] : [`The format has no currency: the amounts are in ${currency}.`]),
    ...(specialDays.length === 0 ? [] : [`The format has no holidays: ${specialDays.length} special days are left out.`]),
    ...(extraDayTypes?.length
      ? [`The format has weekdays and weekends only: ${extraDayTypes.map((one) => one.name).join(', ')} are left out.`]
      : []),
    ...seasons
      .filter(({ startsOn }) => !startsOn.endsWith('-01'))
      .map(({ name, startsOn }) => `The format knows whole months: ${name}, from ${startsOn}, is written by the 15th of each.`),
    ...(coincidentDemand?.length ? ['The hours of the system’s peak are left out.'] : []),
    ...(columns > HOURS ? [`Days are written in ${columns} steps; programs that know hours only will refuse or misread them.`] : []),
  ]
}
