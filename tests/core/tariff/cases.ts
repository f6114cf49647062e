/** Turns the reference cases of `tests/fixtures/tariff` into tariffs and loads. */
import { readFileSync } from 'node:fs'
import { daysOfMonth, instantOf, monthBounds } from '#lib/core/time/civil.ts'
import type { Bill, BillLine, LoadSeries, Tariff, TariffVersion } from '#lib/core/tariff/types.ts'
import { readUrdb } from '#lib/core/tariff/urdb-import.ts'

const FIXTURES = new URL('../../fixtures/tariff/', import.meta.url)
const OPTIONS = { currency: 'USD', minorPerMajor: 100, effectiveFrom: '2000-01-01' }
export const MINOR_PER_MAJOR = OPTIONS.minorPerMajor

export const readRecord = (name: string): Rate => JSON.parse(readFileSync(new URL(name, FIXTURES), 'utf8'))

export type Rate = Readonly<Record<string, unknown>>

/** Sums of a bill in major units, by charge. */
export interface ExpectedBill {
  readonly totalMajor: number
  readonly energyKwh: number
  readonly kwhByPeriod: Readonly<Record<string, number>>
  readonly energyMajor: number
  readonly flatDemandMajor: number
  readonly periodDemandMajor: number
  readonly fixedMajor: number
}
/** A case has the fields that its own test reads. */
export interface CalendarCase {
  readonly id: string
  readonly zone: string
  readonly month: string
  readonly year: number
  readonly rate: Rate
  readonly load: {
    readonly slotMin: number
    readonly kw: number
    readonly extraKwh?: Readonly<Record<string, number>>
    readonly startsAt: string
    readonly kwh: readonly number[]
    readonly parts: readonly { readonly from: string; readonly to: string; readonly kw: number }[]
    readonly baseKw: number
    readonly heaterKw: number
    readonly heaterMin: number
    readonly burstKw: number
    readonly burstSlot: number
  }
  readonly expected: ExpectedBill
  readonly billedAtStartMajor: number
  readonly wholeYear: { readonly energyKwh: number; readonly totalMajor: number }
  readonly expectedMonths: readonly ExpectedBill[]
  readonly expectedYear: { readonly energyKwh: number; readonly totalMajor: number }
  readonly versions: readonly { readonly effectiveFrom: string; readonly rate: Rate }[]
  readonly expectedParts: readonly ExpectedBill[]
  readonly expectedTotalMajor: number
  readonly allOldMajor: number
  readonly allNewMajor: number
  readonly variants: readonly {
    readonly name: string
    readonly starts: readonly string[]
    readonly slotMin: 15 | 30 | 60
    readonly rate: Rate
    readonly expected: ExpectedBill
  }[]
}
/** A year billed by a simulation, month by month and charge by charge. */
export interface SimulatedYear {
  readonly id: string
  readonly load: string
  readonly slotMin: number
  readonly rate?: Rate
  readonly record?: string
  readonly annual?: { readonly annualMajor: number; readonly toleranceMajor: number }
  readonly expected: Readonly<Record<string, readonly number[] | undefined>>
}
/** Charges of a year asserted by a published test. */
export interface AnnualCase {
  readonly id: string
  readonly year: number
  readonly record: string
  readonly rate: Rate
  readonly load: {
    readonly file: string
    readonly annualKwh: number
    readonly baseKw: number
    readonly exceptKw: Readonly<Record<string, number>>
  }
  readonly expected: {
    readonly energyMajor: number
    readonly totalMajor: number
    readonly flatDemandMajor: number
    readonly periodDemandMajor: number
    readonly monthlyEnergyMajor: readonly number[]
    readonly monthlyKwh: readonly number[]
    readonly billedKw: readonly number[]
  }
  readonly coincident: {
    readonly annualKwh: number
    readonly hoursFromOne: readonly (readonly number[])[]
    readonly priceMajorPerKw: readonly number[]
    readonly expectedMajor: number
  }
}
export const readCases = <Case extends { readonly id: string }>(name: string): readonly Case[] =>
  (readRecord(`cases/${name}`) as { readonly cases: readonly Case[] }).cases

/** Finds cases by name and remembers which were asked for. */
export function caseBook<Case extends { readonly id: string }>(cases: readonly Case[]) {
  const asked = new Set<string>()
  return {
    asked,
    caseOf(id: string): Case {
      const one = cases.find((candidate) => candidate.id === id)
      if (!one) throw new Error(`${id} is missing.`)
      asked.add(id)
      return one
    },
  }
}

/** Values of a file of one number a line, under comment lines. */
export const readValues = (name: string): readonly number[] =>
  readFileSync(new URL(`loads/${name}`, FIXTURES), 'utf8')
    .split('\n')
    .filter((line) => line !== '' && !line.startsWith('#'))
    .map(Number)

/** Schedules of the fixtures are strings of one digit a step. */
const unpack = (record: Rate): Rate =>
  Object.fromEntries(
    Object.entries(record).map(([field, value]) => [
      field,
      Array.isArray(value) && typeof value[0] === 'string' ? value.map((row: string) => [...row].map(Number)) : value,
    ]),
  )

export function versionOf(record: Rate, effectiveFrom?: string): TariffVersion {
  const outcome = readUrdb(unpack(record), OPTIONS)
  if (outcome.status !== 'read') throw new Error(outcome.problems.map((problem) => problem.message).join(' '))
  return { ...outcome.version, effectiveFrom: effectiveFrom ?? OPTIONS.effectiveFrom }
}

export const tariffOf = (zone: string, record: Rate): Tariff => ({ zone, versions: [versionOf(record)] })

/** Mean power in kW for each slot of an interval. */
export function loadOf(
  interval: { startsAtMs: number; endsAtMs: number },
  slotMin: number,
  kwAt: (slot: number, startsAtMs: number) => number,
): LoadSeries {
  const count = (interval.endsAtMs - interval.startsAtMs) / (slotMin * 60_000)
  const energyKwh = Array.from({ length: count }, (_, slot) => (kwAt(slot, interval.startsAtMs + slot * slotMin * 60_000) * slotMin) / 60)
  return { startsAtMs: interval.startsAtMs, slotMin, energyKwh }
}

export const yearBounds = (year: number, zone: string) => ({
  startsAtMs: monthBounds(`${year}-01`, zone).startsAtMs,
  endsAtMs: monthBounds(`${year}-12`, zone).endsAtMs,
})

/** Slots at which a timer's run of `lengthMin` from a wall-clock start, every day of a month, is on. */
export function runsOf(month: string, zone: string, starts: readonly string[], lengthMin: number) {
  return daysOfMonth(month).flatMap((day) =>
    starts.map((start) => {
      const startsAtMs = instantOf(day, Number(start.slice(0, 2)) * 60 + Number(start.slice(3)), zone)
      return { startsAtMs, endsAtMs: startsAtMs + lengthMin * 60_000 }
    }),
  )
}

/** Sum of the lines of a kind, not rounded, in major units. */
export const exactMajor = (bill: Pick<Bill, 'lines'>, ...kinds: readonly BillLine['kind'][]): number =>
  bill.lines.reduce((sum, line) => sum + (kinds.length === 0 || kinds.includes(line.kind) ? line.exactMinor : 0), 0) / MINOR_PER_MAJOR

export const kwhOf = (bill: Bill): number => bill.lines.reduce((sum, line) => sum + (line.kind === 'energy' ? line.quantity : 0), 0)
