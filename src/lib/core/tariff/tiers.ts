/**
 * Cuts an amount at a structure's tier bounds. Where a month has several periods, the month's total is cut and every period gets its
 * share of each tier, in proportion to its energy (the way of net-metering bills; a running total in time order is the other in use,
 * and gives slightly different bills).
 */
import type { DemandTier, EnergyTier } from './types.ts'

/** What a part of a month is billed on: a version that holds for fewer days has its bounds cut to them. */
export interface TierBasis {
  readonly days: number
  /** 1 for a whole month. */
  readonly monthFraction: number
  readonly peakKw: number
}
export interface TierCut {
  readonly quantity: number
  readonly priceMinor: number
  /** Bounds as billed, for the line's label; `null` = open. */
  readonly from: number
  readonly to: number | null
}

/** Upper bound in kWh of a tier in its unit; daily units count days, per-kW units the peak, monthly ones the share of the month. */
function boundKwh({ max, unit }: EnergyTier, { days, monthFraction, peakKw }: TierBasis): number {
  if (max === null) return Infinity
  if (unit === 'kWh') return max * monthFraction
  if (unit === 'kWh daily') return max * days
  return unit === 'kWh/kW' ? max * peakKw * monthFraction : max * peakKw * days
}

/** One period's part of each tier. */
export function cutEnergy(
  tiers: readonly EnergyTier[],
  periodKwh: number,
  total: { readonly totalKwh: number; readonly basis: TierBasis },
): readonly TierCut[] {
  const { totalKwh, basis } = total
  const bounds = tiers.map((tier, index) => (index === tiers.length - 1 ? Infinity : boundKwh(tier, basis)))
  const share = totalKwh > 0 ? periodKwh / totalKwh : 0
  return cut(totalKwh, bounds).map((piece, index) => ({
    ...piece,
    quantity: piece.quantity * share,
    priceMinor: tiers[index]?.priceMinorPerKwh ?? 0,
  }))
}

export function cutDemand(tiers: readonly DemandTier[], peakKw: number): readonly TierCut[] {
  const bounds = tiers.map(({ maxKw }, index) => (index === tiers.length - 1 ? Infinity : (maxKw ?? Infinity)))
  return cut(peakKw, bounds).map((piece, index) => ({ ...piece, priceMinor: tiers[index]?.priceMinorPerKw ?? 0 }))
}

function cut(amount: number, bounds: readonly number[]): readonly Omit<TierCut, 'priceMinor'>[] {
  return bounds.map((bound, index) => {
    const from = index === 0 ? 0 : (bounds[index - 1] ?? 0)
    const quantity = Math.max(0, Math.min(amount, bound) - from)
    return { quantity, from, to: Number.isFinite(bound) ? bound : null }
  })
}
