/** A property's load through a month: the coming week's expected heating repeated by weekday, over the base load. Pure. */
import type { Evaluation } from '#db/queries/evaluation.ts'
import type { Run } from '#db/queries/run.ts'
import type { LoadSeries } from '#lib/core/tariff/types.ts'
import { civilOf, dayBounds, daysOfMonth, instantOf, monthBounds, weekdayOf } from '#lib/core/time/civil.ts'
import { MIN_PER_DAY, MIN_PER_HOUR, MS_PER_MIN } from '#lib/core/units.ts'

export const SLOT_MIN = 15
const SLOTS_A_DAY = MIN_PER_DAY / SLOT_MIN

interface MonthCase {
  readonly month: string
  readonly zone: string
  readonly baseLoadW: number
  readonly runs: readonly Pick<Run, 'unitId' | 'day' | 'startsAtMs' | 'endsAtMs' | 'powerW'>[]
  readonly evaluations: readonly Pick<Evaluation, 'unitId' | 'day' | 'energyInKwh'>[]
}

/** Heating of each weekday, Monday first, by quarter hours of its clock, kWh. Plain data for the browser. */
export type HeatingWeek = readonly (readonly number[])[]

export const monthLoad = ({ runs, evaluations, ...month }: MonthCase): LoadSeries =>
  weekThroughMonth({ ...month, week: weekOf({ zone: month.zone, runs, evaluations }) })

/** On a day on which the clocks change the heating keeps to the clock; that of a missing hour follows an hour later. */
export function weekThroughMonth({
  month,
  zone,
  baseLoadW,
  week,
}: Pick<MonthCase, 'month' | 'zone' | 'baseLoadW'> & { readonly week: HeatingWeek }): LoadSeries {
  const { startsAtMs, endsAtMs } = monthBounds(month, zone)
  const baseKwh = (baseLoadW / 1_000) * (SLOT_MIN / MIN_PER_HOUR)
  const energyKwh = Array.from({ length: Math.round((endsAtMs - startsAtMs) / (SLOT_MIN * MS_PER_MIN)) }, () => baseKwh)
  for (const day of daysOfMonth(month)) {
    const bounds = dayBounds(day, zone)
    const isEven = bounds.endsAtMs - bounds.startsAtMs === MIN_PER_DAY * MS_PER_MIN
    week[weekdayOf(day)]?.forEach((kwh, slot) => {
      if (kwh === 0) return
      const atMs = isEven ? bounds.startsAtMs + slot * SLOT_MIN * MS_PER_MIN : instantOf(day, slot * SLOT_MIN, zone)
      const index = Math.floor((atMs - startsAtMs) / (SLOT_MIN * MS_PER_MIN))
      if (index < energyKwh.length) energyKwh[index] = (energyKwh[index] ?? 0) + kwh
    })
  }
  return { startsAtMs, slotMin: SLOT_MIN, energyKwh }
}

/**
 * Heating of each weekday by quarter hours of its clock. An element is on from the start of a run for as long as the energy that
 * the day was found to take lasts: its thermostat opens before the timer does.
 */
export function weekOf({ zone, runs, evaluations }: Pick<MonthCase, 'zone' | 'runs' | 'evaluations'>): HeatingWeek {
  const week = Array.from({ length: 7 }, () => Array.from({ length: SLOTS_A_DAY }, () => 0))
  const left = new Map(evaluations.map((one) => [`${one.unitId} ${one.day}`, one.energyInKwh]))
  for (const { unitId, day, startsAtMs, endsAtMs, powerW } of runs) {
    const key = `${unitId} ${day}`
    const mostKwh = (powerW / 1_000) * ((endsAtMs - startsAtMs) / (MIN_PER_HOUR * MS_PER_MIN))
    const energyKwh = Math.min(mostKwh, left.get(key) ?? mostKwh)
    left.set(key, (left.get(key) ?? mostKwh) - energyKwh)
    if (powerW > 0) spread(week, { civil: civilOf(startsAtMs, zone), energyKwh, powerW })
  }
  return week
}

interface Heating {
  readonly civil: { readonly minuteOfDay: number; readonly weekday: number }
  readonly energyKwh: number
  readonly powerW: number
}

function spread(week: number[][], { civil, energyKwh, powerW }: Heating): void {
  let leftKwh = energyKwh
  let minute = civil.minuteOfDay
  let weekday = civil.weekday
  while (leftKwh > 1e-9) {
    const slot = Math.floor(minute / SLOT_MIN)
    const untilMin = Math.min((slot + 1) * SLOT_MIN, MIN_PER_DAY)
    const kwh = Math.min(leftKwh, ((powerW / 1_000) * (untilMin - minute)) / MIN_PER_HOUR)
    const row = week[weekday]!
    row[slot] = (row[slot] ?? 0) + kwh
    leftKwh -= kwh
    minute = untilMin
    if (minute >= MIN_PER_DAY) {
      minute = 0
      weekday = (weekday + 1) % 7
    }
  }
}
