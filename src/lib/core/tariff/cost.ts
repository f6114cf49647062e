/** What a load's energy costs at marginal first-tier prices, split exactly at price boundaries; demand and fixed charges are the bill's. */
import { MIN_PER_HOUR, MS_PER_MIN } from '../units.ts'
import { roundMinor } from './money.ts'
import { asPrepared, type PreparedTariff } from './price.ts'
import type { LoadPiece, LoadSeries, Tariff } from './types.ts'

export type CostOutcome =
  | {
      readonly status: 'costed'
      /** Not rounded: for sums and comparisons. */
      readonly costMinor: number
      /** Rounded once, for showing and storing. */
      readonly amountMinor: number
      readonly energyKwh: number
      readonly peakKwh: number
    }
  | { readonly status: 'no-version'; readonly reason: string }

const MS_PER_HOUR = MIN_PER_HOUR * MS_PER_MIN

function piecesOf({ startsAtMs, slotMin, energyKwh }: LoadSeries): readonly LoadPiece[] {
  const slotMs = slotMin * MS_PER_MIN
  return energyKwh.map((kwh, slot) => ({
    startsAtMs: startsAtMs + slot * slotMs,
    endsAtMs: startsAtMs + (slot + 1) * slotMs,
    powerW: (kwh * MIN_PER_HOUR * 1_000) / slotMin,
  }))
}

export function costOf(tariff: Tariff | PreparedTariff, load: LoadSeries | readonly LoadPiece[]): CostOutcome {
  const { bandAt } = asPrepared(tariff)
  let costMinor = 0
  let energyKwh = 0
  let peakKwh = 0
  for (const { startsAtMs, endsAtMs, powerW } of 'slotMin' in load ? piecesOf(load) : load) {
    for (let atMs = startsAtMs; atMs < endsAtMs;) {
      const band = bandAt(atMs)
      if (band.price.status !== 'priced') return band.price
      const untilMs = Math.min(band.endsAtMs, endsAtMs)
      const kwh = (powerW / 1_000) * ((untilMs - atMs) / MS_PER_HOUR)
      costMinor += kwh * band.price.priceMinorPerKwh
      energyKwh += kwh
      if (band.onPeak) peakKwh += kwh
      atMs = untilMs
    }
  }
  return { status: 'costed', costMinor, amountMinor: roundMinor(costMinor), energyKwh, peakKwh }
}
