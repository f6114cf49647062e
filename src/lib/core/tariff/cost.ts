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

/** What one stretch of a price line costs; times in the caller's unit. */
interface Band {
  readonly endsAt: number
  readonly priceMinorPerKwh: number
  readonly onPeak: boolean
}
interface Stretch {
  readonly startsAt: number
  readonly endsAt: number
  readonly powerW: number
}
interface Along {
  /** `null`: no price from here on. */
  readonly bandAt: (at: number) => Band | null
  readonly unitsPerHour: number
}

/** Sums power along a line of prices, split exactly at its boundaries; stops where there is no price and says where. */
export function costAlong(
  stretches: readonly Stretch[],
  { bandAt, unitsPerHour }: Along,
): { readonly costMinor: number; readonly energyKwh: number; readonly peakKwh: number; readonly unpricedAt: number | null } {
  let costMinor = 0
  let energyKwh = 0
  let peakKwh = 0
  for (const { startsAt, endsAt, powerW } of stretches) {
    for (let at = startsAt; at < endsAt - 1e-9;) {
      const band = bandAt(at)
      if (!band) return { costMinor, energyKwh, peakKwh, unpricedAt: at }
      const until = Math.min(band.endsAt, endsAt)
      const kwh = (powerW / 1_000) * ((until - at) / unitsPerHour)
      costMinor += kwh * band.priceMinorPerKwh
      energyKwh += kwh
      if (band.onPeak) peakKwh += kwh
      at = until
    }
  }
  return { costMinor, energyKwh, peakKwh, unpricedAt: null }
}

export function costOf(tariff: Tariff | PreparedTariff, load: LoadSeries | readonly LoadPiece[]): CostOutcome {
  const { bandAt } = asPrepared(tariff)
  const pieces = 'slotMin' in load ? piecesOf(load) : load
  const { costMinor, energyKwh, peakKwh, unpricedAt } = costAlong(
    pieces.map(({ startsAtMs, endsAtMs, powerW }) => ({ startsAt: startsAtMs, endsAt: endsAtMs, powerW })),
    {
      unitsPerHour: MS_PER_HOUR,
      bandAt: (atMs) => {
        const { price, endsAtMs, onPeak } = bandAt(atMs)
        return price.status === 'priced' ? { endsAt: endsAtMs, priceMinorPerKwh: price.priceMinorPerKwh, onPeak } : null
      },
    },
  )
  if (unpricedAt !== null) {
    const { price } = bandAt(unpricedAt)
    if (price.status !== 'priced') return price
  }
  return { status: 'costed', costMinor, amountMinor: roundMinor(costMinor), energyKwh, peakKwh }
}
