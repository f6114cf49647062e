/** Reads the tiers of a rate record and its demand charges: flat, by period, and the lookback to earlier months. */
import { decimal } from './money.ts'
import type { DemandTier, EnergyTier, Lookback, TariffVersion } from './types.ts'
import { type Fields, fieldsOf, gridOf, isNumber, isUsed, listOf, MONTHS, numbersOf, type Refuse } from './urdb-fields.ts'

const OPEN_TIER = 1e37
const ENERGY_UNITS = ['kWh', 'kWh daily', 'kWh/kW', 'kWh/kW daily'] as const
const LOOKBACK_LIMIT_MONTHS = 24

/** Cumulative bound; the last tier is open whatever it says (records with `max: 0` exist). */
const boundOf = (max: unknown, last: boolean): number | null => (last || !isNumber(max) || max >= OPEN_TIER ? null : max)

function tiersOf<Tier>(
  raw: unknown,
  field: string,
  refuse: Refuse,
  read: (tier: Fields, where: string, bound: number | null) => Tier,
): readonly Tier[] {
  const tiers = listOf(raw)
  if (tiers.length === 0) refuse(field, 'There is no tier here: a period needs at least one price.')
  let below = 0
  return tiers.map((one, index) => {
    const where = `${field}[${index}]`
    const tier = fieldsOf(one) ?? {}
    if (!isNumber(tier.rate)) refuse(`${where}.rate`, 'This tier has no rate: nothing can be billed with it.')
    if (tier.adj !== undefined && !isNumber(tier.adj)) refuse(`${where}.adj`, 'The adjustment of this tier is not a number.')
    const isLast = index === tiers.length - 1
    const bound = boundOf(tier.max, isLast)
    if (!isLast && !isNumber(tier.max))
      refuse(`${where}.max`, 'A tier before the last needs an upper bound, or the ones after it are never billed.')
    if (bound !== null && bound <= below) refuse(`${where}.max`, 'Bounds of tiers must rise: each is counted from zero.')
    below = bound ?? below
    return read(tier, where, bound)
  })
}

const priceOf = ({ rate, adj }: Fields, minorPerMajor: number): number =>
  decimal(((isNumber(rate) ? rate : 0) + (isNumber(adj) ? adj : 0)) * minorPerMajor)

export function energyPeriodsOf(record: Fields, minorPerMajor: number, refuse: Refuse): readonly (readonly EnergyTier[])[] {
  const structure = listOf(record.energyratestructure)
  if (structure.length === 0)
    refuse('energyratestructure', 'energyratestructure is missing: a rate needs at least one period with one price.')
  return structure.map((raw, period) => {
    const field = `energyratestructure[${period}]`
    const tiers = tiersOf(raw, field, refuse, (tier, where, max): EnergyTier => {
      const unit = ENERGY_UNITS.find((known) => known === (tier.unit ?? 'kWh'))
      if (!unit) refuse(`${where}.unit`, `Unit ${JSON.stringify(tier.unit)} is not one of ${ENERGY_UNITS.join(', ')}.`)
      return { max, unit: unit ?? 'kWh', priceMinorPerKwh: priceOf(tier, minorPerMajor) }
    })
    const bounded = new Set(tiers.filter((tier) => tier.max !== null).map((tier) => tier.unit))
    if (bounded.size > 1) refuse(`${field}.unit`, 'Tiers of one period in different units are not billed here.')
    return tiers
  })
}

function demandTiersOf(raw: unknown, field: string, minorPerMajor: number, refuse: Refuse): readonly DemandTier[] {
  return tiersOf(raw, field, refuse, (tier, where, maxKw): DemandTier => {
    if ((tier.unit ?? 'kW') !== 'kW') refuse(`${where}.unit`, `Demand in ${JSON.stringify(tier.unit)} is not billed here; only kW is.`)
    return { maxKw, priceMinorPerKw: priceOf(tier, minorPerMajor) }
  })
}

function requireKw(record: Fields, field: string, refuse: Refuse): void {
  const unit = record[field] ?? 'kW'
  if (unit !== 'kW') refuse(field, `Demand in ${JSON.stringify(unit)} is not billed here; only kW is.`)
}

export function flatDemandOf(record: Fields, minorPerMajor: number, refuse: Refuse): TariffVersion['flatDemand'] {
  if (!isUsed(record.flatdemandstructure)) return null
  requireKw(record, 'flatdemandunit', refuse)
  const tiersByStructure = listOf(record.flatdemandstructure).map((raw, index) =>
    demandTiersOf(raw, `flatdemandstructure[${index}]`, minorPerMajor, refuse),
  )
  const structureByMonth = numbersOf(record.flatdemandmonths) ?? []
  if (structureByMonth.length !== MONTHS || structureByMonth.some((index) => !tiersByStructure[index]))
    refuse('flatdemandmonths', 'flatdemandmonths must hold 12 indices into flatdemandstructure.')
  return { tiersByStructure, structureByMonth }
}

export function periodDemandOf(record: Fields, minorPerMajor: number, refuse: Refuse): TariffVersion['periodDemand'] {
  if (!isUsed(record.demandratestructure)) return null
  requireKw(record, 'demandrateunit', refuse)
  const tiersByPeriod = listOf(record.demandratestructure).map((raw, index) =>
    demandTiersOf(raw, `demandratestructure[${index}]`, minorPerMajor, refuse),
  )
  return {
    tiersByPeriod,
    weekdayGrid: gridOf(record, 'demandweekdayschedule', tiersByPeriod.length, refuse),
    weekendGrid: gridOf(record, 'demandweekendschedule', tiersByPeriod.length, refuse),
  }
}

/** `lookbackpercent` is a fraction. Where a record has both a range and months, the range is meant. */
export function lookbackOf(record: Fields, hasFlatDemand: boolean, refuse: Refuse): Lookback | null {
  const fraction = record.lookbackpercent
  if (!isUsed(fraction)) return null
  if (!isNumber(fraction) || fraction < 0 || fraction > 1) {
    refuse('lookbackpercent', 'lookbackpercent must be a fraction from 0 to 1.')
    return null
  }
  if (!hasFlatDemand) refuse('lookbackpercent', 'A lookback without a flat demand charge is not billed here.')
  if (isUsed(record.lookbackrange)) {
    const count = record.lookbackrange
    if (!isNumber(count) || !Number.isInteger(count) || count < 1 || count > LOOKBACK_LIMIT_MONTHS) {
      refuse('lookbackrange', `lookbackrange must be a whole number of months from 1 to ${LOOKBACK_LIMIT_MONTHS}.`)
      return null
    }
    return { fraction, months: { kind: 'range', count } }
  }
  const counts = listOf(record.lookbackmonths).map(isUsed)
  if (counts.length !== MONTHS) {
    refuse('lookbackmonths', 'A lookback needs lookbackrange, or lookbackmonths with 12 values.')
    return null
  }
  return { fraction, months: { kind: 'months', counts } }
}
