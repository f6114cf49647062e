/** What is wrong with a tariff version, by field: the one list of rules for a version that a person writes. Empty = it can be billed. */
import { dayNumber, dayOfNumber } from '../time/civil.ts'
import type { Day } from '../time/types.ts'
import { MIN_PER_DAY, MIN_PER_HOUR } from '../units.ts'
import type { ScheduleGrid, TariffVersion } from './types.ts'

export interface VersionProblem {
  readonly field: string
  readonly message: string
}

const MONTHS = 12
const WEEK_DAY_TYPES = ['weekday', 'weekend']
/** Any leap year: 29 February may begin a season. */
const LEAP_YEAR = '2028'

export const isDay = (day: Day): boolean =>
  /^\d{4}-\d{2}-\d{2}$/.test(day) && Number.isFinite(dayNumber(day)) && dayOfNumber(dayNumber(day)) === day

export const checkVersion = (version: TariffVersion): readonly VersionProblem[] => [
  ...headProblems(version),
  ...seasonProblems(version),
  ...dayTypeProblems(version),
  ...energyProblems(version),
  ...demandProblems(version),
  ...chargeProblems(version),
]

const problem = (isWrong: boolean, field: string, message: string): readonly VersionProblem[] => (isWrong ? [{ field, message }] : [])

const headProblems = ({ name, effectiveFrom, energyPeriods, periodNames }: TariffVersion) => [
  ...problem(name.trim() === '', 'name', 'Name the rate, as it stands on the bill.'),
  ...problem(!isDay(effectiveFrom), 'effectiveFrom', 'Write the day from which it is in force as year-month-day.'),
  ...problem(energyPeriods.length === 0, 'energyPeriods', 'A rate needs at least one period with one price.'),
  ...problem(
    periodNames !== undefined && periodNames.length !== energyPeriods.length,
    'periodNames',
    'There must be a name for every period, or none.',
  ),
]

function seasonProblems({ seasons = [] }: TariffVersion): readonly VersionProblem[] {
  return seasons.flatMap(({ name, startsOn }, index) => [
    ...problem(name.trim() === '', `seasons[${index}].name`, 'Name the season.'),
    ...problem(
      !isDay(`${LEAP_YEAR}-${startsOn}`),
      `seasons[${index}].startsOn`,
      'Write the season’s first day as month-day, such as 06-01.',
    ),
    ...problem(
      index > 0 && startsOn <= (seasons[index - 1]?.startsOn ?? ''),
      `seasons[${index}].startsOn`,
      'Seasons must stand in the order of the year, each from a day of its own.',
    ),
  ])
}

function dayTypeProblems({ specialDays, extraDayTypes = [] }: TariffVersion): readonly VersionProblem[] {
  const names = extraDayTypes.map((one) => one.name)
  const known = new Set([...WEEK_DAY_TYPES, ...names])
  const days = specialDays.map((one) => one.day)
  return [
    ...names.flatMap((name, index) => [
      ...problem(name.trim() === '', `extraDayTypes[${index}].name`, 'Name the day type.'),
      ...problem(
        WEEK_DAY_TYPES.includes(name) || names.indexOf(name) !== index,
        `extraDayTypes[${index}].name`,
        `“${name}” is taken: every day type has a name of its own.`,
      ),
    ]),
    ...specialDays.flatMap(({ day, dayType }, index) => [
      ...problem(!isDay(day), `specialDays[${index}].day`, `“${day}” is not a day: write year-month-day.`),
      ...problem(days.indexOf(day) !== index, `specialDays[${index}].day`, `${day} is listed twice.`),
      ...problem(!known.has(dayType), `specialDays[${index}].dayType`, `${day} is billed as “${dayType}”, and there is no such day type.`),
    ]),
  ]
}

function energyProblems(version: TariffVersion): readonly VersionProblem[] {
  const { energyPeriods, weekdayGrid, weekendGrid, extraDayTypes = [] } = version
  const rows = rowCount(version)
  const periods = energyPeriods.length
  return [
    ...energyPeriods.flatMap((tiers, period) => [
      ...tierProblems(
        `energyPeriods[${period}]`,
        tiers.map(({ max, priceMinorPerKwh }) => ({ max, priceMinor: priceMinorPerKwh })),
      ),
      ...problem(
        new Set(tiers.filter((tier) => tier.max !== null).map((tier) => tier.unit)).size > 1,
        `energyPeriods[${period}]`,
        'Tiers of one period are bounded in one unit.',
      ),
    ]),
    ...gridProblems('weekdayGrid', weekdayGrid, { rows, periods }),
    ...gridProblems('weekendGrid', weekendGrid, { rows, periods }),
    ...extraDayTypes.flatMap((one, index) => gridProblems(`extraDayTypes[${index}].energyGrid`, one.energyGrid, { rows, periods })),
  ]
}

function demandProblems(version: TariffVersion): readonly VersionProblem[] {
  const { flatDemand, periodDemand, extraDayTypes = [], lookback } = version
  const rows = rowCount(version)
  const periods = periodDemand?.tiersByPeriod.length ?? 0
  const tiersOf = (tiers: readonly { readonly maxKw: number | null; readonly priceMinorPerKw: number }[]) =>
    tiers.map(({ maxKw, priceMinorPerKw }) => ({ max: maxKw, priceMinor: priceMinorPerKw }))
  return [
    ...(flatDemand
      ? [
          ...flatDemand.tiersByStructure.flatMap((tiers, index) => tierProblems(`flatDemand.tiersByStructure[${index}]`, tiersOf(tiers))),
          ...problem(
            flatDemand.structureByMonth.length !== MONTHS ||
              flatDemand.structureByMonth.some((index) => !flatDemand.tiersByStructure[index]),
            'flatDemand.structureByMonth',
            'Each of the twelve months needs one of the demand prices.',
          ),
        ]
      : problem(lookback !== undefined, 'lookback', 'A lookback needs a demand charge on the month’s highest.')),
    ...(periodDemand
      ? [
          ...periodDemand.tiersByPeriod.flatMap((tiers, index) => tierProblems(`periodDemand.tiersByPeriod[${index}]`, tiersOf(tiers))),
          ...gridProblems('periodDemand.weekdayGrid', periodDemand.weekdayGrid, { rows, periods }),
          ...gridProblems('periodDemand.weekendGrid', periodDemand.weekendGrid, { rows, periods }),
          ...extraDayTypes.flatMap(({ demandGrid }, index) =>
            demandGrid ? gridProblems(`extraDayTypes[${index}].demandGrid`, demandGrid, { rows, periods }) : [],
          ),
        ]
      : []),
  ]
}

const chargeProblems = ({ fixed, minimum, fuelAdjustmentMinorPerKwh: fuel }: TariffVersion) => [
  ...problem(fixed !== null && !isAmount(fixed.amountMinor), 'fixed', 'The fixed charge must be a number that is not below zero.'),
  ...problem(minimum !== null && !isAmount(minimum.amountMinor), 'minimum', 'The minimum must be a number that is not below zero.'),
  ...problem(
    fuel !== null && (fuel.length !== MONTHS || !fuel.every(Number.isFinite)),
    'fuelAdjustmentMinorPerKwh',
    'The fuel adjustment needs a number for each of the twelve months.',
  ),
]

const isAmount = (minor: number): boolean => Number.isFinite(minor) && minor >= 0
const rowCount = ({ seasons }: TariffVersion): number => (seasons?.length ? seasons.length : MONTHS)

/** Prices may be below zero: some hours of some rates are. */
function tierProblems(
  field: string,
  tiers: readonly { readonly max: number | null; readonly priceMinor: number }[],
): readonly VersionProblem[] {
  return [
    ...problem(tiers.length === 0, field, 'A period needs at least one price.'),
    ...tiers.flatMap(({ max, priceMinor }, index) => {
      const below = tiers[index - 1]?.max ?? 0
      const isLast = index === tiers.length - 1
      return [
        ...problem(!Number.isFinite(priceMinor), `${field}[${index}].price`, 'Write a price: a number.'),
        ...problem(isLast && max !== null, `${field}[${index}].max`, 'The last tier has no upper bound: the rest is billed there.'),
        ...problem(
          !isLast && (max === null || !Number.isFinite(max)),
          `${field}[${index}].max`,
          'A tier before the last needs an upper bound.',
        ),
        ...problem(
          !isLast && max !== null && max <= below,
          `${field}[${index}].max`,
          'Bounds of tiers must rise: each is counted from zero.',
        ),
      ]
    }),
  ]
}

function gridProblems(
  field: string,
  grid: ScheduleGrid,
  { rows, periods }: { readonly rows: number; readonly periods: number },
): readonly VersionProblem[] {
  const slots = grid[0]?.length ?? 0
  const stepMin = MIN_PER_DAY / slots
  const stepsFit = slots > 0 && Number.isInteger(stepMin) && MIN_PER_HOUR % stepMin === 0
  return [
    ...problem(grid.length !== rows, field, `The hours need a row for each of ${rows} seasons or months.`),
    ...problem(!stepsFit || grid.some((row) => row.length !== slots), field, 'A day is cut into hours or equal parts of them.'),
    ...problem(
      grid.some((row) => row.some((period) => !Number.isInteger(period) || period < 0 || period >= periods)),
      field,
      'An hour names a period that there is no price for.',
    ),
  ]
}
