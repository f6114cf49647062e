/**
 * Reads an open URDB JSON rate record (OpenEI Utility Rate Database, v7/v8 fields) into a TariffVersion, or refuses with the
 * field that cannot be billed. Prices become minor units per kWh, unrounded.
 */
import { dayOfNumber } from '../time/civil.ts'
import type { DemandTier, EnergyTier, ScheduleGrid, TariffVersion } from './types.ts'

export interface UrdbOptions {
  readonly currency: string
  readonly minorPerMajor: number
  /** Used when the record has no start date. */
  readonly effectiveFrom: string
}
export interface UrdbProblem {
  readonly field: string
  readonly message: string
}
export type UrdbOutcome =
  | { readonly status: 'read'; readonly version: TariffVersion; readonly warnings: readonly string[] }
  | { readonly status: 'refused'; readonly problems: readonly UrdbProblem[] }

type Fields = Readonly<Record<string, unknown>>
const MONTHS = 12
const S_PER_DAY = 86_400
const OPEN_TIER = 1e37
/** Fields that change the bill and are not billed here: a record that uses one is refused, never billed wrongly. */
const UNSUPPORTED = ['coincidentratestructure', 'demandratchetpercentage', 'lookbackpercent', 'annualmincharge'] as const
const ENERGY_UNITS = ['kWh', 'kWh daily', 'kWh/kW', 'kWh/kW daily'] as const

export function readUrdb(json: unknown, options: UrdbOptions): UrdbOutcome {
  const record = unwrap(json)
  if (!record)
    return {
      status: 'refused',
      problems: [{ field: '', message: 'This is not a URDB rate: expected a JSON object with energyratestructure.' }],
    }
  const problems: UrdbProblem[] = []
  const warnings: string[] = []
  const refuse = (field: string, message: string) => problems.push({ field, message })

  for (const field of UNSUPPORTED)
    if (isUsed(record[field]))
      refuse(field, `${field} is used by this rate and is not billed here. Enter the rate without it, or ask for it.`)
  const energyPeriods = energyOf(record, options.minorPerMajor, refuse)
  const periods = energyPeriods.length
  const weekdayGrid = gridOf(record, 'energyweekdayschedule', periods, refuse)
  const weekendGrid = gridOf(record, 'energyweekendschedule', periods, refuse)
  const flatDemand = flatDemandOf(record, options.minorPerMajor, refuse)
  const periodDemand = periodDemandOf(record, options.minorPerMajor, refuse)
  const demandWindowMin = windowOf(record, flatDemand !== null || periodDemand !== null, warnings, refuse)
  const fixed = fixedOf(record, options.minorPerMajor, refuse)
  const minimum = minimumOf(record, options.minorPerMajor, refuse)
  const fuel = numbers(record.fueladjustmentsmonthly)
  if (record.fueladjustmentsmonthly !== undefined && fuel?.length !== MONTHS)
    refuse('fueladjustmentsmonthly', 'fueladjustmentsmonthly must hold 12 numbers.')
  if (problems.length > 0) return { status: 'refused', problems }
  return {
    status: 'read',
    warnings,
    version: {
      name: text(record.name) ?? 'Unnamed rate',
      utility: text(record.utility) ?? 'Unknown utility',
      effectiveFrom: startDay(record.startdate) ?? options.effectiveFrom,
      currency: options.currency,
      minorPerMajor: options.minorPerMajor,
      energyPeriods,
      weekdayGrid,
      weekendGrid,
      specialDays: [],
      flatDemand,
      periodDemand,
      demandWindowMin,
      fixed,
      minimum,
      fuelAdjustmentMinorPerKwh: fuel ? fuel.map((value) => value * options.minorPerMajor) : null,
    },
  }
}

type Refuse = (field: string, message: string) => void

/** The bare rate, `{ items: [rate] }` or `{ rate }`. */
function unwrap(json: unknown): Fields | null {
  const outer = fields(json)
  if (!outer) return null
  if (Array.isArray(outer.items)) return fields(outer.items[0])
  const inner = fields(outer.rate)
  return inner && !('energyratestructure' in outer) ? inner : outer
}

function energyOf(record: Fields, minor: number, refuse: Refuse): readonly (readonly EnergyTier[])[] {
  const structure = record.energyratestructure
  if (!Array.isArray(structure) || structure.length === 0) {
    refuse('energyratestructure', 'energyratestructure is missing: a rate needs at least one period with one price.')
    return []
  }
  return structure.map((period: unknown, p) => {
    const tiers = Array.isArray(period) ? (period as readonly unknown[]) : []
    if (tiers.length === 0) refuse(`energyratestructure[${p}]`, `Period ${p} has no tier.`)
    return tiers.map((raw, t): EnergyTier => {
      const tier = fields(raw) ?? {}
      const where = `energyratestructure[${p}][${t}]`
      const unit = ENERGY_UNITS.find((known) => known === (tier.unit ?? 'kWh'))
      if (!unit) refuse(`${where}.unit`, `Unit ${JSON.stringify(tier.unit)} is not one of ${ENERGY_UNITS.join(', ')}.`)
      if (typeof tier.rate !== 'number') refuse(`${where}.rate`, 'This tier has no rate: nothing can be billed with it.')
      return { max: tierMax(tier.max, t === tiers.length - 1), unit: unit ?? 'kWh', priceMinorPerKwh: price(tier, minor) }
    })
  })
}

const price = (tier: Fields, minor: number): number => (number(tier.rate) + number(tier.adj)) * minor
/** Cumulative bound; the last tier is open whatever it says (records with `max: 0` exist). */
const tierMax = (max: unknown, last: boolean): number | null => (last || typeof max !== 'number' || max >= OPEN_TIER ? null : max)

function gridOf(record: Fields, field: string, periods: number, refuse: Refuse): ScheduleGrid {
  const grid = record[field]
  const rows = Array.isArray(grid) ? grid.map((row: unknown) => numbers(row) ?? []) : []
  const slots = rows[0]?.length ?? 0
  const wellFormed = rows.length === MONTHS && slots >= 24 && slots % 24 === 0 && rows.every((row) => row.length === slots)
  if (!wellFormed) refuse(field, `${field} must hold 12 months of 24 hours (or a multiple of 24).`)
  else if (rows.some((row) => row.some((period) => !Number.isInteger(period) || period < 0 || period >= periods))) {
    refuse(field, `${field} names a period that its structure does not have.`)
  }
  return rows
}

function demandTiers(raw: unknown, field: string, minor: number, refuse: Refuse): readonly (readonly DemandTier[])[] {
  if (!Array.isArray(raw)) return []
  return raw.map((period: unknown, p) => {
    const tiers = Array.isArray(period) ? (period as readonly unknown[]) : []
    return tiers.map((one, t): DemandTier => {
      const tier = fields(one) ?? {}
      if (typeof tier.rate !== 'number') refuse(`${field}[${p}][${t}].rate`, 'This demand tier has no rate.')
      return { maxKw: tierMax(tier.max, t === tiers.length - 1), priceMinorPerKw: price(tier, minor) }
    })
  })
}

function demandUnit(record: Fields, field: string, refuse: Refuse): void {
  const unit = record[field] ?? 'kW'
  if (unit !== 'kW') refuse(field, `Demand in ${JSON.stringify(unit)} is not billed here; only kW is.`)
}

function flatDemandOf(record: Fields, minor: number, refuse: Refuse): TariffVersion['flatDemand'] {
  if (!isUsed(record.flatdemandstructure)) return null
  demandUnit(record, 'flatdemandunit', refuse)
  const tiersByStructure = demandTiers(record.flatdemandstructure, 'flatdemandstructure', minor, refuse)
  const structureByMonth = numbers(record.flatdemandmonths) ?? []
  if (structureByMonth.length !== MONTHS || structureByMonth.some((index) => !tiersByStructure[index])) {
    refuse('flatdemandmonths', 'flatdemandmonths must hold 12 indices into flatdemandstructure.')
  }
  return { tiersByStructure, structureByMonth }
}

function periodDemandOf(record: Fields, minor: number, refuse: Refuse): TariffVersion['periodDemand'] {
  if (!isUsed(record.demandratestructure)) return null
  demandUnit(record, 'demandrateunit', refuse)
  const tiersByPeriod = demandTiers(record.demandratestructure, 'demandratestructure', minor, refuse)
  const weekdayGrid = gridOf(record, 'demandweekdayschedule', tiersByPeriod.length, refuse)
  const weekendGrid = gridOf(record, 'demandweekendschedule', tiersByPeriod.length, refuse)
  return { tiersByPeriod, weekdayGrid, weekendGrid }
}

function windowOf(record: Fields, hasDemand: boolean, warnings: string[], refuse: Refuse): 15 | 30 | 60 {
  const window = record.demandwindow
  if (window === 15 || window === 30 || window === 60) return window
  if (window !== undefined && hasDemand)
    refuse('demandwindow', `A demand window of ${JSON.stringify(window)} minutes is not billed here; 15, 30 and 60 are.`)
  else if (hasDemand) warnings.push('The record has no demandwindow: 15 minutes are assumed.')
  return 15
}

function fixedOf(record: Fields, minor: number, refuse: Refuse): TariffVersion['fixed'] {
  const amount = record.fixedchargefirstmeter ?? record.fixedmonthlycharge
  if (typeof amount !== 'number') return null
  const units = record.fixedchargefirstmeter === undefined ? '$/month' : (record.fixedchargeunits ?? '$/month')
  const per = { '$/month': 'month', '$/day': 'day', '$/year': 'year' }[String(units)] as 'month' | 'day' | 'year' | undefined
  if (!per) refuse('fixedchargeunits', `Fixed charge units ${JSON.stringify(units)} are not known.`)
  return { amountMinor: amount * minor, per: per ?? 'month' }
}

function minimumOf(record: Fields, minor: number, refuse: Refuse): TariffVersion['minimum'] {
  const amount = record.mincharge ?? record.minmonthlycharge
  if (typeof amount !== 'number' || amount === 0) return null
  const units = record.mincharge === undefined ? '$/month' : (record.minchargeunits ?? '$/month')
  if (units !== '$/month') refuse('minchargeunits', `A minimum charge in ${JSON.stringify(units)} is not billed here; $/month is.`)
  return { amountMinor: amount * minor, per: 'month' }
}

/** Unix seconds, or a string that starts with a date; both occur. */
function startDay(value: unknown): string | null {
  if (typeof value === 'number' && Number.isFinite(value)) return dayOfNumber(Math.floor(value / S_PER_DAY))
  const match = typeof value === 'string' ? /^\d{4}-\d{2}-\d{2}/.exec(value) : null
  return match ? match[0] : null
}

const fields = (value: unknown): Fields | null =>
  typeof value === 'object' && value !== null && !Array.isArray(value) ? (value as Fields) : null
const number = (value: unknown): number => (typeof value === 'number' && Number.isFinite(value) ? value : 0)
const numbers = (value: unknown): readonly number[] | null =>
  Array.isArray(value) && value.every((item) => typeof item === 'number') ? (value as number[]) : null
const text = (value: unknown): string | null => (typeof value === 'string' && value.trim() !== '' ? value.trim() : null)
/** A field counts as used when it holds anything but zeros and emptiness. */
const isUsed = (value: unknown): boolean =>
  Array.isArray(value)
    ? value.some(isUsed)
    : typeof value === 'object' && value !== null
      ? true
      : typeof value === 'number'
        ? value !== 0
        : value !== undefined && value !== null && value !== ''
