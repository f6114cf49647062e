/** In what two versions differ, in words: what the second of two writers is told, and what a reader of the history sees. Pure. */
import { versionOn } from '#lib/core/tariff/price.ts'
import { energyGrid, demandGrid, type GridOf, rowIndexOf } from '#lib/core/tariff/schedule.ts'
import type { TariffVersion } from '#lib/core/tariff/types.ts'
import { MIN_PER_DAY } from '#lib/core/units.ts'
import { formatMinuteOfDay } from '#lib/figures.ts'
import { draftOf } from './draft.ts'

/** Days are compared in five minutes, the finest step that is kept. */
const STEP_MIN = 5
const MONTHS = 12

export function differencesOf(before: TariffVersion, after: TariffVersion): readonly string[] {
  const [one, other] = [draftOf(before), draftOf(after)]
  return [
    ...changed('Name', one.name, other.name),
    ...changed('Supplier', one.utility, other.utility),
    ...changed('In force from', one.effectiveFrom, other.effectiveFrom),
    ...energyChanges(one, other),
    ...hourChanges('Energy', energyGrid, before, after),
    ...flagChanged('Demand charge on the month’s highest', one.flatDemand, other.flatDemand),
    ...flagChanged('Demand prices by period', one.periodDemand?.tiersByPeriod, other.periodDemand?.tiersByPeriod),
    ...hourChanges('Demand', demandGrid, before, after),
    ...changed('Demand window, minutes', one.demandWindowMin, other.demandWindowMin),
    ...flagChanged('Lookback', one.lookback, other.lookback),
    ...flagChanged('Fixed charge', one.fixed, other.fixed),
    ...flagChanged('Minimum charge', one.minimum, other.minimum),
    ...flagChanged('Fuel adjustment', one.fuelAdjustmentMinorPerKwh, other.fuelAdjustmentMinorPerKwh),
    ...flagChanged('Seasons', one.seasons, other.seasons),
    ...dayChanges(one, other),
  ]
}

/** What the versions in force from a day on say now, against what they said before. */
export function changesSince(before: readonly TariffVersion[], after: readonly TariffVersion[]): readonly string[] {
  return after
    .filter((version) => !before.some((one) => JSON.stringify(one) === JSON.stringify(version)))
    .flatMap((version) => {
      const was =
        before.find((one) => one.effectiveFrom === version.effectiveFrom) ??
        versionOn({ zone: 'UTC', versions: before }, version.effectiveFrom)
      const head = `A version from ${version.effectiveFrom} has been saved: ${version.name}.`
      return was ? [head, ...differencesOf(was, version).map((one) => `Against the one from ${was.effectiveFrom}: ${one}`)] : [head]
    })
}

const changed = (what: string, one: string | number, other: string | number): readonly string[] =>
  one === other ? [] : [`${what}: was ${one || 'empty'}, is ${other || 'empty'}.`]

/** Of charges that are made of parts, what they come to is read in the version itself. */
const flagChanged = (what: string, one: unknown, other: unknown): readonly string[] =>
  JSON.stringify(one ?? null) === JSON.stringify(other ?? null)
    ? []
    : [`${what}: ${one === null || one === undefined ? 'added' : other === null || other === undefined ? 'taken away' : 'changed'}.`]

function energyChanges(one: ReturnType<typeof draftOf>, other: ReturnType<typeof draftOf>): readonly string[] {
  const count = Math.max(one.energyPeriods.length, other.energyPeriods.length)
  return Array.from({ length: count }, (_, period) => period).flatMap((period) => {
    const [was, is] = [one.energyPeriods[period], other.energyPeriods[period]]
    const name = (other.periodNames[period] ?? one.periodNames[period] ?? '').trim()
    if (!was) return [`Price of ${name}: added.`]
    if (!is) return [`Price of ${name}: taken away.`]
    const [first, then] = [was, is].map((tiers) => tiers.map((tier) => tier.priceMinorPerKwh / one.minorPerMajor).join(', '))
    if (JSON.stringify(was) !== JSON.stringify(is)) return [`Price of ${name}: was ${first}, is ${then} ${other.currency}/kWh.`]
    return changed(`Name of period ${period + 1}`, one.periodNames[period] ?? '', other.periodNames[period] ?? '')
  })
}

/** Hours are told by the clock, with the number of months in which they differ. */
function hourChanges(what: string, gridOf: GridOf, one: TariffVersion, other: TariffVersion): readonly string[] {
  const steps = MIN_PER_DAY / STEP_MIN
  const kinds = new Set(['weekday', 'weekend', ...[one, other].flatMap((v) => (v.extraDayTypes ?? []).map((type) => type.name))])
  return [...kinds].flatMap((dayType) => {
    const rows = Array.from({ length: MONTHS }, (_, month) => {
      const day = `2027-${String(month + 1).padStart(2, '0')}-15`
      const [was, is] = [one, other].map((version) => gridOf(version, dayType)[rowIndexOf(version, day)] ?? [0])
      return Array.from({ length: steps }, (_, step) => valueAt(was!, step / steps) !== valueAt(is!, step / steps))
    })
    const months = rows.filter((row) => row.some(Boolean)).length
    if (months === 0) return []
    const anyMonth = Array.from({ length: steps }, (_, step) => rows.some((row) => row[step]))
    const label = dayType === 'weekday' ? 'weekdays' : dayType === 'weekend' ? 'weekends' : dayType
    return [`${what} hours of ${label}: ${stretches(anyMonth).join(', ')} changed in ${months} of 12 months.`]
  })
}

const valueAt = (row: readonly number[], fraction: number): number => row[Math.floor(fraction * row.length)] ?? 0

function stretches(marked: readonly boolean[]): readonly string[] {
  const found: { from: number; to: number }[] = []
  marked.forEach((isMarked, step) => {
    const last = found.at(-1)
    if (isMarked && last?.to === step) last.to = step + 1
    else if (isMarked) found.push({ from: step, to: step + 1 })
  })
  return found.map(({ from, to }) => `${formatMinuteOfDay(from * STEP_MIN)}–${formatMinuteOfDay(to * STEP_MIN)}`)
}

function dayChanges(one: TariffVersion, other: TariffVersion): readonly string[] {
  const days = (version: TariffVersion) => version.specialDays.map(({ day, dayType }) => `${day} (${dayType})`)
  const [was, is] = [days(one), days(other)]
  const added = is.filter((day) => !was.includes(day))
  const gone = was.filter((day) => !is.includes(day))
  return [
    ...(added.length > 0 ? [`Holidays and special days added: ${added.join(', ')}.`] : []),
    ...(gone.length > 0 ? [`Holidays and special days taken away: ${gone.join(', ')}.`] : []),
  ]
}
