/** What a load's energy costs at marginal first-tier prices, split exactly at price boundaries; demand and fixed charges are the bill's. */
import { MIN_PER_HOUR, MS_PER_MIN } from '../units.ts'
import { roundMinor } from './money.ts'
import { asPrepared, type PreparedTariff, type PriceBand } from './price.ts'
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
      /** Of the cost, what falls on-peak; not rounded. */
      readonly peakMinor: number
    }
  | { readonly status: 'no-version'; readonly reason: string }

const MS_PER_HOUR = MIN_PER_HOUR * MS_PER_MIN

/** A generator, so that a year of readings is not held twice. */
function* piecesOf({ startsAtMs, slotMin, energyKwh }: LoadSeries): Iterable<LoadPiece> {
  const slotMs = slotMin * MS_PER_MIN
  for (let slot = 0; slot < energyKwh.length; slot++) {
    const fromMs = startsAtMs + slot * slotMs
    yield { startsAtMs: fromMs, endsAtMs: fromMs + slotMs, powerW: ((energyKwh[slot] ?? 0) * MIN_PER_HOUR * 1_000) / slotMin }
  }
}

export function costOf(tariff: Tariff | PreparedTariff, load: LoadSeries | readonly LoadPiece[]): CostOutcome {
  const { bandAt } = asPrepared(tariff)
  let costMinor = 0
  let energyKwh = 0
  let peakKwh = 0
  let peakMinor = 0
  let band: PriceBand | null = null
  for (const { startsAtMs, endsAtMs, powerW } of 'slotMin' in load ? piecesOf(load) : load) {
    for (let atMs = startsAtMs; atMs < endsAtMs;) {
      // Pieces mostly follow each other: the band of the last one often still holds.
      if (!band || atMs < band.startsAtMs || atMs >= band.endsAtMs) band = bandAt(atMs)
      if (band.price.status !== 'priced') return band.price
      const untilMs = Math.min(band.endsAtMs, endsAtMs)
      const kwh = (powerW / 1_000) * ((untilMs - atMs) / MS_PER_HOUR)
      const pieceMinor = kwh * band.price.priceMinorPerKwh
      costMinor += pieceMinor
      energyKwh += kwh
      if (band.onPeak) {
        peakKwh += kwh
        peakMinor += pieceMinor
      }
      atMs = untilMs
    }
  }
  return { status: 'costed', costMinor, amountMinor: roundMinor(costMinor), energyKwh, peakKwh, peakMinor }
}
