/** Which pattern a period wears on the week grid: none when cheapest, dusk hatching when dearest, one of its own between. Pure. */
import type { Draft, Layer } from './draft.ts'

export type Pattern = 'plain' | 'lines' | 'bars' | 'cross' | 'slope' | 'dusk'
const MIDDLE: readonly Pattern[] = ['lines', 'bars', 'cross', 'slope']

export function patternsOf({ energyPeriods, periodDemand }: Draft, layer: Layer): readonly Pattern[] {
  const prices =
    layer === 'energy'
      ? energyPeriods.map((tiers) => tiers[0]?.priceMinorPerKwh ?? 0)
      : (periodDemand?.tiersByPeriod ?? []).map((tiers) => tiers[0]?.priceMinorPerKw ?? 0)
  const [cheapest, dearest] = [Math.min(...prices), Math.max(...prices)]
  let middle = 0
  return prices.map((price) => {
    if (price === dearest && dearest > cheapest) return 'dusk'
    // A price that is not typed yet is no number: it is told apart like one in between.
    return price === cheapest ? 'plain' : (MIDDLE[middle++ % MIDDLE.length] ?? 'lines')
  })
}
