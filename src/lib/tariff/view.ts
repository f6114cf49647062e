/** A tariff version in words and bands for one month. */
import { periodPrice } from '#lib/core/tariff/price.ts'
import type { TariffVersion } from '#lib/core/tariff/types.ts'
import { formatMoney } from '#lib/money.ts'

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
  readonly charges: readonly string[]
}

/** Prices of a kilowatt-hour have more digits than money: tenths of the minor unit are shown. */
export const formatPrice = (
  priceMinorPerKwh: number,
  { currency, minorPerMajor }: Pick<TariffVersion, 'currency' | 'minorPerMajor'>,
): string =>
  `${new Intl.NumberFormat('en', { style: 'currency', currency, minimumFractionDigits: 4 }).format(priceMinorPerKwh / minorPerMajor)}/kWh`

export function tariffView(version: TariffVersion, day: string): TariffView {
  const month = Number(day.slice(5, 7)) - 1
  const priceOf = (period: number) => periodPrice(version, period, day)
  const prices = [...(version.weekdayGrid[month] ?? []), ...(version.weekendGrid[month] ?? [])].map(priceOf)
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
    weekday: bands(version.weekdayGrid[month] ?? []),
    weekend: bands(version.weekendGrid[month] ?? []),
    charges: charges(version, month),
  }
}

function charges(version: TariffVersion, month: number): readonly string[] {
  const { flatDemand, periodDemand, fixed, minimum, currency, demandWindowMin } = version
  const money = (minor: number) => formatMoney(minor, currency)
  const found: string[] = []
  const tiers = flatDemand?.tiersByStructure[flatDemand.structureByMonth[month] ?? 0]
  if (tiers?.[0])
    found.push(`Demand: ${money(tiers[0].priceMinorPerKw)} for each kW of the month’s highest ${demandWindowMin}-minute mean.`)
  const inMonth = new Set([...(periodDemand?.weekdayGrid[month] ?? []), ...(periodDemand?.weekendGrid[month] ?? [])])
  for (const period of inMonth) {
    const price = periodDemand?.tiersByPeriod[period]?.[0]?.priceMinorPerKw ?? 0
    if (price > 0) found.push(`Demand within its hours (period ${period}): ${money(price)} for each kW.`)
  }
  if (fixed) found.push(`Fixed: ${money(fixed.amountMinor)} a ${fixed.per}.`)
  if (minimum) found.push(`Minimum: ${money(minimum.amountMinor)} a ${minimum.per}.`)
  return found
}
