/** How fast loads are billed and prices answered; and how much a prepared tariff saves, in one run. */
import { execFileSync } from 'node:child_process'
import { fileURLToPath } from 'node:url'
import { billYear } from '#lib/core/tariff/bill.ts'
import { costOf } from '#lib/core/tariff/cost.ts'
import { prepareTariff, priceAt } from '#lib/core/tariff/price.ts'
import type { LoadSeries, Tariff, TariffVersion } from '#lib/core/tariff/types.ts'
import { instantOf } from '#lib/core/time/civil.ts'

const ZONE = 'America/New_York'
const YEAR = 2026
const ROUNDS = 9
const QUESTIONS = 1_000_000
const UNPREPARED_QUESTIONS = 20_000

/** Tiers, three periods, weekday and weekend, flat and period demand, fixed and minimum charge: everything a bill has to work out. */
const version: TariffVersion = {
  name: 'bench',
  utility: 'bench',
  effectiveFrom: '2020-01-01',
  currency: 'USD',
  minorPerMajor: 100,
  energyPeriods: [9.1, 14.7, 31.2].map((priceMinorPerKwh) => [
    { max: 900, unit: 'kWh', priceMinorPerKwh },
    { max: null, unit: 'kWh', priceMinorPerKwh: priceMinorPerKwh * 1.4 },
  ]),
  weekdayGrid: Array.from({ length: 12 }, () => Array.from({ length: 48 }, (_, half) => (half < 13 ? 0 : half >= 33 && half < 42 ? 2 : 1))),
  weekendGrid: Array.from({ length: 12 }, () => Array.from({ length: 24 }, (_, hour) => (hour < 8 ? 0 : 1))),
  specialDays: [{ day: '2026-07-03', dayType: 'weekend' }],
  flatDemand: { tiersByStructure: [[{ maxKw: null, priceMinorPerKw: 740 }]], structureByMonth: Array<number>(12).fill(0) },
  periodDemand: {
    tiersByPeriod: [[{ maxKw: null, priceMinorPerKw: 0 }], [{ maxKw: null, priceMinorPerKw: 1_150 }]],
    weekdayGrid: Array.from({ length: 12 }, () => Array.from({ length: 24 }, (_, hour) => (hour >= 16 && hour < 21 ? 1 : 0))),
    weekendGrid: Array.from({ length: 12 }, () => Array<number>(24).fill(0)),
  },
  demandWindowMin: 30,
  fixed: { amountMinor: 61, per: 'day' },
  minimum: { amountMinor: 4_000, per: 'month' },
  fuelAdjustmentMinorPerKwh: null,
}
const tariff: Tariff = { zone: ZONE, versions: [version] }
const startsAtMs = instantOf(`${YEAR}-01-01`, 0, ZONE)
const load: LoadSeries = { startsAtMs, slotMin: 15, energyKwh: Array.from({ length: 8_760 * 4 }, (_, slot) => 0.2 + (slot % 97) / 60) }

/** The middle of several, in milliseconds. */
function medianMs(measure: () => void): number {
  const times = Array.from({ length: ROUNDS }, () => {
    const begunAtMs = performance.now()
    measure()
    return performance.now() - begunAtMs
  })
  return times.sort((one, other) => one - other)[(ROUNDS - 1) / 2] ?? 0
}

/** Run by itself with this word, the bench bills once in its own fresh process and prints how long that took. */
const ONCE = 'bill-once'
const FRESH_PROCESSES = 9
if (process.argv[2] === ONCE) {
  const begunAtMs = performance.now()
  billYear(tariff, YEAR, load)
  process.stdout.write(String(performance.now() - begunAtMs))
}

function coldMs(): readonly number[] {
  const once = () => Number(execFileSync(process.execPath, [fileURLToPath(import.meta.url), ONCE], { encoding: 'utf8' }))
  return Array.from({ length: FRESH_PROCESSES }, once).sort((one, other) => one - other)
}

export function benchTariff(): { label: string; value: number; unit: string }[] {
  const cold = coldMs()
  const billMs = medianMs(() => billYear(tariff, YEAR, load))
  const costMs = medianMs(() => costOf(tariff, load))
  const prepared = prepareTariff(tariff)
  const spread = (question: number) => startsAtMs + ((question * 7_919) % 525_600) * 60_000
  const preparedMs = medianMs(() => {
    for (let question = 0; question < QUESTIONS; question++) priceAt(prepared, spread(question))
  })
  const plainMs = medianMs(() => {
    for (let question = 0; question < UNPREPARED_QUESTIONS; question++) priceAt(tariff, spread(question))
  })
  const perPreparedNs = (preparedMs / QUESTIONS) * 1e6
  return [
    { label: 'a year billed by a fresh process, median of nine', value: cold[(FRESH_PROCESSES - 1) / 2] ?? 0, unit: 'ms' },
    { label: 'a year billed by a fresh process, least of nine', value: cold[0] ?? 0, unit: 'ms' },
    { label: 'a year of 15-minute readings billed, median of nine', value: billMs, unit: 'ms' },
    { label: 'a year of 15-minute readings costed at marginal prices', value: costMs, unit: 'ms' },
    { label: 'price at a scattered instant, prepared tariff', value: perPreparedNs, unit: 'ns' },
    { label: 'prepared against unprepared, ratio', value: ((plainMs / UNPREPARED_QUESTIONS) * 1e6) / perPreparedNs, unit: 'times' },
  ]
}
