/** Reads single fields of a rate record whose shape is not known yet; each reader says what it could not read, by field. */
import { dayNumber, dayOfNumber } from '../time/civil.ts'
import type { Day } from '../time/types.ts'
import { MIN_PER_DAY } from '../units.ts'
import type { ScheduleGrid } from './types.ts'

export type Fields = Readonly<Record<string, unknown>>
export type Refuse = (field: string, message: string) => void

export const MONTHS = 12
const HOURS = 24
const S_PER_DAY = 86_400
/** The year 9999, the last that a date is written with four digits. */
const LATEST_S = 253_402_300_800

export const fieldsOf = (value: unknown): Fields | null =>
  typeof value === 'object' && value !== null && !Array.isArray(value) ? (value as Fields) : null
export const listOf = (value: unknown): readonly unknown[] => (Array.isArray(value) ? (value as readonly unknown[]) : [])
export const isNumber = (value: unknown): value is number => typeof value === 'number' && Number.isFinite(value)
export const numbersOf = (value: unknown): readonly number[] | null => (Array.isArray(value) && value.every(isNumber) ? value : null)
export const textOf = (value: unknown): string | null => (typeof value === 'string' && value.trim() !== '' ? value.trim() : null)

/** A field counts as used when it holds anything but zeros and emptiness; a tier, when its rate or adjustment does. */
export function isUsed(value: unknown): boolean {
  if (Array.isArray(value)) return value.some(isUsed)
  const tier = fieldsOf(value)
  if (tier && 'rate' in tier) return isUsed(tier.rate) || isUsed(tier.adj)
  if (typeof value === 'number') return value !== 0
  return value !== undefined && value !== null && value !== '' && value !== false
}

/**
 * Unix seconds, or a string that starts with a date; both occur. The seconds are read as a date in UTC, whatever the utility's zone:
 * published records hold midnight in several American zones or in UTC for a rate that starts on the first of a month, and only UTC
 * gives that first in all of them.
 */
export function dayOf(value: unknown): Day | null {
  if (isNumber(value) && Math.abs(value) < LATEST_S) return dayOfNumber(Math.floor(value / S_PER_DAY))
  const written = typeof value === 'string' ? /^\d{4}-\d{2}-\d{2}/.exec(value)?.[0] : undefined
  // A date that does not exist, such as 31 February, comes back as another one or none.
  return written && Number.isFinite(dayNumber(written)) && dayOfNumber(dayNumber(written)) === written ? written : null
}

/** 12 months of 24 hours, or of finer steps; every value names a period. */
export function gridOf(record: Fields, field: string, periods: number, refuse: Refuse): ScheduleGrid {
  const rows = listOf(record[field]).map((row) => numbersOf(row) ?? [])
  const slots = rows[0]?.length ?? 0
  // A step is a whole part of an hour and whole minutes.
  const stepsFit = slots >= HOURS && slots % HOURS === 0 && Number.isInteger(MIN_PER_DAY / slots)
  if (rows.length !== MONTHS || !stepsFit || rows.some((row) => row.length !== slots))
    refuse(field, `${field} must hold 12 months of 24 hours (or of equal parts of hours, in whole minutes).`)
  else if (rows.some((row) => row.some((period) => !Number.isInteger(period) || period < 0 || period >= periods)))
    refuse(field, `${field} names a period that its structure does not have.`)
  return rows
}

/** A charge that is there and cannot be read is refused: left out in silence, it would be missing from every bill. */
export function refuseUnlessNumber(record: Fields, field: string, refuse: Refuse): void {
  if (isUsed(record[field]) && !isNumber(record[field])) refuse(field, `${field} must be a number, not ${JSON.stringify(record[field])}.`)
}

/** An amount and its units under the newer names, or a monthly amount under the older one. */
export function chargeOf(
  record: Fields,
  names: { readonly amount: string; readonly units: string; readonly monthly: string },
  refuse: Refuse,
): { readonly amount: number; readonly per: 'month' | 'day' | 'year' } | null {
  for (const field of [names.amount, names.monthly]) refuseUnlessNumber(record, field, refuse)
  const newer = isNumber(record[names.amount])
  const amount = newer ? record[names.amount] : record[names.monthly]
  if (!isNumber(amount) || amount === 0) return null
  const units = newer ? (record[names.units] ?? '$/month') : '$/month'
  const per = typeof units === 'string' ? ({ '$/month': 'month', '$/day': 'day', '$/year': 'year' } as const)[units] : undefined
  if (!per) refuse(names.units, `Units ${JSON.stringify(units)} are not known; $/month, $/day and $/year are.`)
  if (amount < 0) refuse(newer ? names.amount : names.monthly, 'A charge below zero is not billed here.')
  return { amount, per: per ?? 'month' }
}
