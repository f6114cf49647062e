/**
 * A tariff on the planner's grid: a price a slot, and each month's demand charges with their metering windows. First tiers only;
 * lookbacks and hours that a supplier names afterwards are left out. Pure.
 */
import type { DemandCharge } from '#lib/core/plan/types.ts'
import { asPrepared } from '#lib/core/tariff/price.ts'
import { demandGrid, monthIndexOf, scheduleBands, versionOn } from '#lib/core/tariff/schedule.ts'
import type { Tariff } from '#lib/core/tariff/types.ts'
import { civilOf, monthBounds, monthOf } from '#lib/core/time/civil.ts'
import type { MsInterval } from '#lib/core/time/types.ts'
import { MS_PER_MIN } from '#lib/core/units.ts'
import { type Grid, instantAt, slotAt, slotMs } from './types.ts'

export interface SlotPrices {
  readonly priceMinorPerKwh: readonly number[]
  /** `false` where a slot has no price; it counts as nothing. */
  readonly isPriced: boolean
}

/** Bands change on whole slots of five minutes, so the price at a slot's start holds for all of it. */
export function slotPrices(tariff: Tariff | null, grid: Grid): SlotPrices {
  if (!tariff) return { priceMinorPerKwh: new Array<number>(grid.slots).fill(0), isPriced: false }
  const { bandAt } = asPrepared(tariff)
  let isPriced = true
  const priceMinorPerKwh = Array.from({ length: grid.slots }, (_, slot) => {
    const { price } = bandAt(instantAt(grid, slot))
    if (price.status === 'priced') return price.priceMinorPerKwh
    isPriced = false
    return 0
  })
  return { priceMinorPerKwh, isPriced }
}

export interface LoadOutside extends MsInterval {
  readonly powerW: number
}

interface Charged {
  readonly tariff: Tariff | null
  readonly grid: Grid
  /** Expected runs of the months concerned that are not planned, whenever they are. */
  readonly others: readonly LoadOutside[]
  readonly baseLoadW: number
}

interface Rule {
  readonly id: string
  readonly priceMinorPerKw: number
  readonly month: string
  /** Metering windows of the whole month that this charge looks at. */
  readonly windows: readonly MsInterval[]
}

export function demandCharges({ tariff, grid, others, baseLoadW }: Charged): readonly DemandCharge[] {
  if (!tariff) return []
  const horizon = { startsAtMs: grid.originMs, endsAtMs: instantAt(grid, grid.slots) }
  const dayIn = (instantMs: number) => civilOf(instantMs, tariff.zone).day
  const months = [...new Set([monthOf(dayIn(horizon.startsAtMs)), monthOf(dayIn(horizon.endsAtMs - 1))])]
  return months
    .flatMap((month) => rulesOf(tariff, month, grid))
    .flatMap(({ id, priceMinorPerKw, windows }): DemandCharge[] => {
      const inside = windows.filter((one) => one.startsAtMs >= horizon.startsAtMs && one.endsAtMs <= horizon.endsAtMs)
      if (priceMinorPerKw <= 0 || inside.length === 0) return []
      const outside = windows.filter((one) => one.endsAtMs <= horizon.startsAtMs || one.startsAtMs >= horizon.endsAtMs)
      return [
        {
          id,
          priceMinorPerKw,
          alreadyKw: highestMeanKw(outside, others, baseLoadW),
          windows: inside.map((one) => ({ from: slotAt(grid, one.startsAtMs), to: slotAt(grid, one.endsAtMs) })),
        },
      ]
    })
}

/** Every month that the horizon touches bills its own highest mean. */
function rulesOf(tariff: Tariff, month: string, grid: Grid): readonly Rule[] {
  const bounds = monthBounds(month, tariff.zone)
  const version = versionOn(tariff, civilOf(Math.max(bounds.startsAtMs, grid.originMs), tariff.zone).day)
  if (!version) return []
  const windowMs = Math.max(version.demandWindowMin * MS_PER_MIN, slotMs(grid))
  const cut = ({ startsAtMs, endsAtMs }: MsInterval): readonly MsInterval[] =>
    Array.from({ length: Math.floor((endsAtMs - startsAtMs) / windowMs) }, (_, index) => ({
      startsAtMs: startsAtMs + index * windowMs,
      endsAtMs: startsAtMs + (index + 1) * windowMs,
    }))
  const rules: Rule[] = []
  const { flatDemand, periodDemand } = version
  if (flatDemand) {
    const structure = flatDemand.structureByMonth[monthIndexOf(`${month}-01`)] ?? 0
    const priceMinorPerKw = flatDemand.tiersByStructure[structure]?.[0]?.priceMinorPerKw ?? 0
    rules.push({ id: `${month}, any hour`, priceMinorPerKw, month, windows: cut(bounds) })
  }
  if (periodDemand) {
    const byPeriod = new Map<number, MsInterval[]>()
    for (const band of scheduleBands(tariff, bounds, demandGrid))
      byPeriod.set(band.periodIndex, [...(byPeriod.get(band.periodIndex) ?? []), ...cut(band)])
    for (const [period, windows] of byPeriod) {
      const name = periodDemand.periodNames?.[period] ?? `period ${period + 1}`
      rules.push({
        id: `${month}, ${name}`,
        priceMinorPerKw: periodDemand.tiersByPeriod[period]?.[0]?.priceMinorPerKw ?? 0,
        month,
        windows,
      })
    }
  }
  return rules
}

/** Of windows in order and of one length; each run adds to those that it touches. */
function highestMeanKw(windows: readonly MsInterval[], runs: readonly LoadOutside[], baseLoadW: number): number {
  if (windows.length === 0) return 0
  const meanW = new Float64Array(windows.length).fill(baseLoadW)
  for (const run of runs) {
    for (let place = firstEndingAfter(windows, run.startsAtMs); place < windows.length; place++) {
      const window = windows[place] as MsInterval
      if (window.startsAtMs >= run.endsAtMs) break
      const sharedMs = Math.min(window.endsAtMs, run.endsAtMs) - Math.max(window.startsAtMs, run.startsAtMs)
      meanW[place] = (meanW[place] ?? 0) + (run.powerW * sharedMs) / (window.endsAtMs - window.startsAtMs)
    }
  }
  return meanW.reduce((most, value) => Math.max(most, value), 0) / 1_000
}

function firstEndingAfter(windows: readonly MsInterval[], instantMs: number): number {
  let low = 0
  let high = windows.length
  while (low < high) {
    const middle = (low + high) >> 1
    if ((windows[middle] as MsInterval).endsAtMs > instantMs) high = middle
    else low = middle + 1
  }
  return low
}
