/** A tariff version in words and bands for one month. */
import { periodPrice } from '#lib/core/tariff/price.ts'
import { monthIndexOf, rowIndexOf } from '#lib/core/tariff/schedule.ts'
import type { TariffVersion } from '#lib/core/tariff/types.ts'
import { formatDay } from '#lib/format.ts'
import { formatMoney } from '#lib/figures.ts'

export interface HourBand {
  readonly fromHour: number
  readonly toHour: number
  readonly price: string
  readonly peak: boolean
}
export interface TariffView {
  readonly name: string
  readonly utility: string
  readonly weekday: readonly HourBand[]
  readonly weekend: readonly HourBand[]
  readonly ownDays: readonly { readonly label: string; readonly bands: readonly HourBand[] }[]
  readonly charges: readonly string[]
  readonly calendar: readonly string[]
}

/** Prices of a kilowatt-hour have more digits than money: tenths of the minor unit are shown. */
export const formatPrice = (
  priceMinorPerKwh: number,
  { currency, minorPerMajor }: Pick<TariffVersion, 'currency' | 'minorPerMajor'>,
): string =>
  `${new Intl.NumberFormat('en', { style: 'currency', currency, minimumFractionDigits: 4 }).format(priceMinorPerKwh / minorPerMajor)}/kWh`

export function tariffView(version: TariffVersion, day: string): TariffView {
  const row = rowIndexOf(version, day)
  const priceOf = (period: number) => periodPrice(version, period, day)
  const prices = [...(version.weekdayGrid[row] ?? []), ...(version.weekendGrid[row] ?? [])].map(priceOf)
  const dearest = Math.max(...prices)
  const flat = dearest === Math.min(...prices)
  const bands = (row: readonly number[]): readonly HourBand[] => {
    const found: { fromHour: number; toHour: number; period: number }[] = []
    row.forEach((period, slot) => {
      const last = found.at(-1)
      const toHour = ((slot + 1) * 24) / row.length
      if (last?.period === period) last.toHour = toHour
      else found.push({ fromHour: (slot * 24) / row.length, toHour, period })
    })
    return found.map(({ fromHour, toHour, period }) => ({
      fromHour,
      toHour,
      price: formatPrice(priceOf(period), version),
      peak: !flat && priceOf(period) === dearest,
    }))
  }
  return {
    name: version.name,
    utility: version.utility,
    weekday: bands(version.weekdayGrid[row] ?? []),
    weekend: bands(version.weekendGrid[row] ?? []),
    ownDays: (version.extraDayTypes ?? []).map((one) => ({ label: one.name, bands: bands(one.energyGrid[row] ?? []) })),
    charges: charges(version, day),
    calendar: calendarWords(version, day),
  }
}

/** Seasons, and the special days still to come. */
function calendarWords({ seasons = [], specialDays }: TariffVersion, today: string): readonly string[] {
  const ahead = specialDays.filter((one) => one.day >= today)
  const kind = (dayType: string) => (dayType === 'weekday' || dayType === 'weekend' ? `a ${dayType}` : dayType)
  return [
    ...(seasons.length > 1
      ? [`Seasons: ${seasons.map(({ name, startsOn }) => `${name} from ${formatDay(`2028-${startsOn}`, 'd MMMM')}`).join(', ')}.`]
      : []),
    ...(ahead.length > 0
      ? [`Special days ahead: ${ahead.map(({ day, dayType }) => `${formatDay(day, 'd MMMM yyyy')} as ${kind(dayType)}`).join(', ')}.`]
      : []),
  ]
}

function charges(version: TariffVersion, day: string): readonly string[] {
  const month = monthIndexOf(day)
  const row = rowIndexOf(version, day)
  const { flatDemand, periodDemand, fixed, minimum, currency, demandWindowMin } = version
  const money = (minor: number) => formatMoney(minor, currency)
  const found: string[] = []
  const tiers = flatDemand?.tiersByStructure[flatDemand.structureByMonth[month] ?? 0]
  if (tiers?.[0])
    found.push(`Demand: ${money(tiers[0].priceMinorPerKw)} for each kW of the month’s highest ${demandWindowMin}-minute mean.`)
  const inMonth = new Set([...(periodDemand?.weekdayGrid[row] ?? []), ...(periodDemand?.weekendGrid[row] ?? [])])
  for (const period of inMonth) {
    const price = periodDemand?.tiersByPeriod[period]?.[0]?.priceMinorPerKw ?? 0
    if (price > 0)
      found.push(`Demand within its hours (${periodDemand?.periodNames?.[period] ?? `period ${period}`}): ${money(price)} for each kW.`)
  }
  if (fixed) found.push(`Fixed: ${money(fixed.amountMinor)} a ${fixed.per}.`)
  if (minimum) found.push(`Minimum: ${money(minimum.amountMinor)} a ${minimum.per}.`)
  return found
}
