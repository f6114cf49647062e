/** What heating costs at the local times at which it happens: marginal energy prices, split exactly at price boundaries, rounded once. */
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
  let costMinor = 0
  let peakKwh = 0
  for (const { startMin, endMin, powerW } of heating) {
    for (let atMin = startMin; atMin < endMin - 1e-9;) {
      const slot = Math.floor((atMin - prices.fromMin) / prices.slotMin + 1e-9)
      const untilMin = Math.min(endMin, prices.fromMin + (slot + 1) * prices.slotMin)
      const price = prices.priceMinorPerKwh[slot]
      if (price === undefined) return { costMinor: null, peakKwh }
      const energyKwh = ((powerW / 1_000) * (untilMin - atMin)) / MIN_PER_HOUR
      costMinor += energyKwh * price
      if (prices.onPeak[slot]) peakKwh += energyKwh
      atMin = untilMin
    }
  }
  return { costMinor: Math.round(costMinor), peakKwh }
}
