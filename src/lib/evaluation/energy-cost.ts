/** The core's cost of heating along a day's table of prices, which the browser is sent in place of a whole tariff; rounded once. */
import { costAlong } from '#lib/core/tariff/cost.ts'
import type { MinuteInterval } from '#lib/core/time/types.ts'
import { MIN_PER_HOUR } from '#lib/core/units.ts'
import type { PriceTable } from './types.ts'

export interface EnergyCost {
  /** `null` without prices for every part of it. */
  readonly costMinor: number | null
  readonly peakKwh: number
}

export function energyCost(heating: readonly (MinuteInterval & { readonly powerW: number })[], prices: PriceTable | null): EnergyCost {
  if (!prices) return { costMinor: null, peakKwh: 0 }
  const { costMinor, peakKwh, unpricedAt } = costAlong(
    heating.map(({ startMin, endMin, powerW }) => ({ startsAt: startMin, endsAt: endMin, powerW })),
    {
      unitsPerHour: MIN_PER_HOUR,
      bandAt: (atMin) => {
        const slot = Math.floor((atMin - prices.fromMin) / prices.slotMin + 1e-9)
        const priceMinorPerKwh = prices.priceMinorPerKwh[slot]
        if (priceMinorPerKwh === undefined) return null
        return { endsAt: prices.fromMin + (slot + 1) * prices.slotMin, priceMinorPerKwh, onPeak: prices.onPeak[slot] ?? false }
      },
    },
  )
  return { costMinor: unpricedAt === null ? Math.round(costMinor) : null, peakKwh }
}
