/** What a day's heating costs: the core's cost, for minutes of the day. */
import { costOf } from '#lib/core/tariff/cost.ts'
import { roundMinor } from '#lib/core/tariff/money.ts'
import { preparedBands } from '#lib/core/tariff/price.ts'
import type { MinuteInterval } from '#lib/core/time/types.ts'
import { MS_PER_MIN } from '#lib/core/units.ts'
import type { PriceTable } from './types.ts'

export interface EnergyCost {
  /** `null` without prices for every part of it. */
  readonly costMinor: number | null
  readonly peakKwh: number
  /** Of the cost, what falls on-peak. */
  readonly peakMinor: number
}

const UNPRICED: EnergyCost = { costMinor: null, peakKwh: 0, peakMinor: 0 }

export function energyCost(heating: readonly (MinuteInterval & { readonly powerW: number })[], prices: PriceTable | null): EnergyCost {
  if (!prices) return UNPRICED
  const pieces = heating.map(({ startMin, endMin, powerW }) => ({
    startsAtMs: startMin * MS_PER_MIN,
    endsAtMs: endMin * MS_PER_MIN,
    powerW,
  }))
  const cost = costOf(preparedBands(prices), pieces)
  if (cost.status !== 'costed') return UNPRICED
  return { costMinor: cost.amountMinor, peakKwh: cost.peakKwh, peakMinor: roundMinor(cost.peakMinor) }
}
