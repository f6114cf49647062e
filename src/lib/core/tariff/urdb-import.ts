/**
 * Reads an open URDB JSON rate record (OpenEI Utility Rate Database, v7/v8 fields) into a TariffVersion, or refuses with the
 * field that cannot be billed. Prices become minor units, unrounded. What is left out of the bill on purpose is a warning.
 */
import type { Day } from '../time/types.ts'
import { decimal } from './money.ts'
import type { TariffVersion } from './types.ts'
import { energyPeriodsOf, flatDemandOf, lookbackOf, periodDemandOf } from './urdb-demand.ts'
import {
  chargeOf,
  dayOf,
  type Fields,
  fieldsOf,
  gridOf,
  isNumber,
  isUsed,
  listOf,
  MONTHS,
  numbersOf,
  type Refuse,
  refuseUnlessNumber,
  textOf,
} from './urdb-fields.ts'

export interface UrdbOptions {
  readonly currency: string
  readonly minorPerMajor: number
  /** Used when the record has no start date. */
  readonly effectiveFrom: Day
}
export interface UrdbProblem {
  readonly field: string
  readonly message: string
}
export type UrdbOutcome =
  | { readonly status: 'read'; readonly version: TariffVersion; readonly warnings: readonly string[] }
  | { readonly status: 'refused'; readonly problems: readonly UrdbProblem[] }

/** Fields that change the bill and are not billed here: a record that uses one is refused, never billed wrongly. */
const UNSUPPORTED: Readonly<Record<string, string>> = {
  coincidentratestructure: 'The hours of the system’s peak are known only afterwards and are not in the record.',
  coincidentrateschedule: 'The hours of the system’s peak are known only afterwards and are not in the record.',
  coincidentschedule: 'The hours of the system’s peak are known only afterwards and are not in the record.',
  demandratchetpercentage: 'Ratchets by month are not billed; a lookback (lookbackpercent) is.',
  demandreactivepowercharge: 'Reactive power is not measured here.',
}

export function readUrdb(json: unknown, options: UrdbOptions): UrdbOutcome {
  const problems: UrdbProblem[] = []
  const warnings: string[] = []
  const refuse: Refuse = (field, message) => problems.push({ field, message })
  const record = unwrap(json, warnings)
  if (!record) {
    refuse('', 'This is not a URDB rate: expected a JSON object with energyratestructure.')
    return { status: 'refused', problems }
  }
  for (const [field, reason] of Object.entries(UNSUPPORTED))
    if (isUsed(record[field])) refuse(field, `${field} is used by this rate and is not billed here. ${reason}`)
  const version = versionOf(record, options, { warnings, refuse })
  if (problems.length > 0) return { status: 'refused', problems }
  warnings.push(...leftOut(record))
  return { status: 'read', version, warnings }
}

/** The bare rate, `{ items: [rate] }` or `{ rate }`. */
function unwrap(json: unknown, warnings: string[]): Fields | null {
  const outer = fieldsOf(json)
  if (!outer) return null
  if (Array.isArray(outer.items)) {
    if (outer.items.length > 1) warnings.push(`The file holds ${outer.items.length} rates; the first is read.`)
    return fieldsOf(outer.items[0])
  }
  return 'energyratestructure' in outer ? outer : (fieldsOf(outer.rate) ?? outer)
}

interface Report {
  readonly warnings: string[]
  readonly refuse: Refuse
}

function versionOf(record: Fields, { currency, minorPerMajor, effectiveFrom }: UrdbOptions, { warnings, refuse }: Report): TariffVersion {
  const energyPeriods = energyPeriodsOf(record, minorPerMajor, refuse)
  const flatDemand = flatDemandOf(record, minorPerMajor, refuse)
  const periodDemand = periodDemandOf(record, minorPerMajor, refuse)
  const lookback = lookbackOf(record, flatDemand !== null, refuse)
  const startsOn = dayOf(record.startdate)
  if (startsOn === null && isUsed(record.startdate)) refuse('startdate', 'startdate must be seconds since 1970 or a date, year-month-day.')
  return {
    name: textOf(record.name) ?? 'Unnamed rate',
    utility: textOf(record.utility) ?? 'Unknown utility',
    effectiveFrom: startsOn ?? effectiveFrom,
    currency,
    minorPerMajor,
    energyPeriods,
    weekdayGrid: gridOf(record, 'energyweekdayschedule', energyPeriods.length, refuse),
    weekendGrid: gridOf(record, 'energyweekendschedule', energyPeriods.length, refuse),
    specialDays: [],
    flatDemand,
    periodDemand,
    demandWindowMin: windowOf(record, flatDemand !== null || periodDemand !== null, { warnings, refuse }),
    ...(lookback ? { lookback } : {}),
    fixed: fixedOf(record, minorPerMajor, refuse),
    minimum: minimumOf(record, minorPerMajor, refuse),
    fuelAdjustmentMinorPerKwh: fuelOf(record, minorPerMajor, refuse),
  }
}

function windowOf(record: Fields, hasDemand: boolean, { warnings, refuse }: Report): 15 | 30 | 60 {
  const window = record.demandwindow
  if (window === 15 || window === 30 || window === 60) return window
  if (isUsed(window) && hasDemand)
    refuse('demandwindow', `A demand window of ${JSON.stringify(window)} minutes is not billed here; 15, 30 and 60 are.`)
  else if (hasDemand) warnings.push('The record has no demandwindow: 15 minutes are assumed.')
  return 15
}

function fixedOf(record: Fields, minorPerMajor: number, refuse: Refuse): TariffVersion['fixed'] {
  const names = { amount: 'fixedchargefirstmeter', units: 'fixedchargeunits', monthly: 'fixedmonthlycharge' }
  const charge = chargeOf(record, names, refuse)
  return charge && { amountMinor: decimal(charge.amount * minorPerMajor), per: charge.per }
}

function minimumOf(record: Fields, minorPerMajor: number, refuse: Refuse): TariffVersion['minimum'] {
  const charge = chargeOf(record, { amount: 'mincharge', units: 'minchargeunits', monthly: 'minmonthlycharge' }, refuse)
  refuseUnlessNumber(record, 'annualmincharge', refuse)
  const annual = isNumber(record.annualmincharge) ? record.annualmincharge : 0
  if (annual < 0) refuse('annualmincharge', 'A minimum below zero is not billed here.')
  if (charge && annual > 0) refuse('annualmincharge', 'A minimum of the month and one of the year together are not billed here.')
  if (!charge) return annual > 0 ? { amountMinor: decimal(annual * minorPerMajor), per: 'year' } : null
  return { amountMinor: decimal(charge.amount * minorPerMajor), per: charge.per }
}

function fuelOf(record: Fields, minorPerMajor: number, refuse: Refuse): readonly number[] | null {
  if (!isUsed(record.fueladjustmentsmonthly)) return null
  const adders = numbersOf(record.fueladjustmentsmonthly)
  if (adders?.length !== MONTHS) refuse('fueladjustmentsmonthly', 'fueladjustmentsmonthly must hold 12 numbers.')
  return adders?.map((adder) => decimal(adder * minorPerMajor)) ?? null
}

/** What the record says beside what is billed. */
function leftOut(record: Fields): readonly string[] {
  const found: string[] = []
  const until = dayOf(record.enddate)
  if (until) found.push(`The record ends on ${until}. It is used until a newer version is entered.`)
  if (listOf(record.energyratestructure).some((period) => listOf(period).some((tier) => isUsed(fieldsOf(tier)?.sell))))
    found.push('Prices for energy fed back (sell) are left out.')
  if (isUsed(record.fixedchargeeaaddl)) found.push('The charge for further meters (fixedchargeeaaddl) is left out: one meter is billed.')
  if (textOf(record.servicetype)?.startsWith('Delivery'))
    found.push('The record is for delivery only: the energy itself may be billed by somebody else.')
  const { peakkwcapacitymin: least, peakkwcapacitymax: most } = record
  if (isNumber(least) || isNumber(most))
    found.push(
      `The rate is meant for customers ${[isNumber(least) && `from ${least} kW`, isNumber(most) && `up to ${most} kW`].filter(Boolean).join(' ')}.`,
    )
  return found
}
