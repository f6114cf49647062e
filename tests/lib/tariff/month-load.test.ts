/** The load that a month's bill is previewed with, by arithmetic: nothing is lost or doubled, on months of clock changes too. */
import { describe, expect, it } from 'vitest'
import { newId, type UnitId } from '#db/ids.ts'
import { billMonth } from '#lib/core/tariff/bill.ts'
import { readUrdb } from '#lib/core/tariff/urdb-import.ts'
import { instantOf } from '#lib/core/time/civil.ts'
import { PORT_ALDANE_RATE } from '#lib/demo/rates.ts'
import { billView } from '#lib/tariff/bill-view.ts'
import { monthLoad } from '#lib/tariff/month-load.ts'

const zone = 'America/Los_Angeles'
const unitId = newId<UnitId>()
const HOUR_MS = 3_600_000
/** A run at 06:30 on each day of the week from Monday 2 November 2026, an hour of 4 kW of which 3 kWh are taken. */
const days = ['02', '03', '04', '05', '06', '07', '08'].map((date) => `2026-11-${date}`)
const runs = days.map((day) => {
  const startsAtMs = instantOf(day, 390, zone)
  return { unitId, day, startsAtMs, endsAtMs: startsAtMs + HOUR_MS, powerW: 4_000 }
})
const evaluations = days.map((day) => ({ unitId, day, energyInKwh: 3 }))
const sum = (values: readonly number[]) => values.reduce((total, value) => total + value, 0)

describe('monthLoad', () => {
  it('holds every day’s heat and the base load, in a month of 30 days and an hour', () => {
    const load = monthLoad({ month: '2026-11', zone, baseLoadW: 2_000, runs, evaluations })
    expect(load.energyKwh).toHaveLength((30 * 24 + 1) * 4)
    expect(sum(load.energyKwh)).toBeCloseTo(30 * 3 + 2 * (30 * 24 + 1), 6)
  })
  it('heats from the run’s start at its power until its heat is in: 45 min of 4 kW from 06:30', () => {
    const load = monthLoad({ month: '2026-11', zone, baseLoadW: 0, runs, evaluations })
    const first = (instantOf('2026-11-10', 390, zone) - load.startsAtMs) / (15 * 60_000)
    expect(load.energyKwh.slice(first - 1, first + 4)).toEqual([0, 1, 1, 1, 0])
  })
  it('keeps to the clock on the day on which it changes, and loses nothing of a missing hour', () => {
    // Sunday 1 November 2026 has an hour twice before 06:30; on Sunday 8 March 2026 02:30 is missing.
    const autumn = monthLoad({ month: '2026-11', zone, baseLoadW: 0, runs, evaluations })
    const slot = (instantOf('2026-11-01', 390, zone) - autumn.startsAtMs) / (15 * 60_000)
    expect(slot).toBe((6.5 + 1) * 4)
    expect(autumn.energyKwh.slice(slot - 1, slot + 4)).toEqual([0, 1, 1, 1, 0])
    const night = days.map((day) => ({
      unitId,
      day,
      startsAtMs: instantOf(day, 150, zone),
      endsAtMs: instantOf(day, 165, zone),
      powerW: 4_000,
    }))
    const spring = monthLoad({ month: '2026-03', zone, baseLoadW: 0, runs: night, evaluations: [] })
    expect(sum(spring.energyKwh)).toBeCloseTo(31, 9)
  })
  it('carries a run over midnight into the day after', () => {
    const startsAtMs = instantOf('2026-11-02', 1_430, zone)
    const late = [{ unitId, day: '2026-11-03', startsAtMs, endsAtMs: startsAtMs + HOUR_MS, powerW: 3_000 }]
    const load = monthLoad({ month: '2026-11', zone, baseLoadW: 0, runs: late, evaluations: [] })
    const midnight = (instantOf('2026-11-10', 0, zone) - load.startsAtMs) / (15 * 60_000)
    expect(load.energyKwh[midnight - 1]).toBeCloseTo(0.5, 9)
    expect(sum(load.energyKwh.slice(midnight, midnight + 4))).toBeCloseTo(2.5, 9)
  })
})

describe('billView', () => {
  it('shows lines that add up to its total', () => {
    const read = readUrdb(PORT_ALDANE_RATE, { currency: 'USD', minorPerMajor: 100, effectiveFrom: '2025-01-01' })
    if (read.status !== 'read') throw new Error('The rate of this test was refused.')
    const load = monthLoad({ month: '2026-11', zone, baseLoadW: 2_000, runs, evaluations })
    const bill = billMonth({ zone, versions: [read.version] }, '2026-11', load)
    const { lines, total, missing } = billView(bill, 'USD')
    const dollars = (text: string) => Number(text.replace(/[$,]/g, ''))
    expect(sum(lines.map((line) => dollars(line.amount)))).toBeCloseTo(dollars(total), 6)
    expect(lines.length).toBeGreaterThan(1)
    expect(missing).toEqual([])
  })
})
