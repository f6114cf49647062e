/** A month's figures from its evaluations: sums whose parts add up, unit codes instead of people. */
import type { Evaluation } from '#db/queries/evaluation.ts'
import type { DigestFigures, DigestVisit } from '#db/queries/digest.ts'
import type { Flag } from '#db/queries/flag.ts'
import type { Visit } from '#db/queries/visit.ts'
import type { UnitId } from '#db/ids.ts'
import type { MsInterval, Zone } from '#lib/core/time/types.ts'
import { civilOf, daysOfMonth } from '#lib/core/time/civil.ts'

const WORST_UNITS = 5

export interface MonthCase {
  readonly month: string
  readonly interval: MsInterval
  readonly zone: Zone
  readonly propertyName: string
  readonly currency: string
  readonly codes: ReadonlyMap<UnitId, string>
  readonly evaluations: readonly Evaluation[]
  /** Those open at some time of the month. */
  readonly flags: readonly Pick<Flag, 'severity' | 'openedAtMs' | 'closed'>[]
  readonly visits: readonly Pick<Visit, 'state' | 'doneAtMs' | 'unitCode' | 'dueDay'>[]
  readonly feedback: { readonly hot: number; readonly cold: number }
}

export function monthFigures(one: MonthCase): DigestFigures {
  const { month, interval, zone, evaluations, flags, visits } = one
  const within = (atMs: number | null): boolean => atMs !== null && atMs >= interval.startsAtMs && atMs < interval.endsAtMs
  const needed = evaluations.filter(({ status }) => status === 'ready' || status === 'short' || status === 'impossible')
  const warm = needed.filter(({ status }) => status === 'ready')
  const computed = evaluations.filter((evaluation) => evaluation.status !== 'unknown')
  const days = daysOfMonth(month).map((day) => {
    const ofDay = computed.filter((evaluation) => evaluation.day === day)
    return {
      day,
      energyKwh: round(sum(ofDay, (row) => row.energyInKwh)),
      peakKwh: round(sum(ofDay, (row) => row.peakKwh)),
      neededUnits: needed.filter((evaluation) => evaluation.day === day).length,
      warmUnits: warm.filter((evaluation) => evaluation.day === day).length,
    }
  })
  // A unit-day without a price keeps its energy and is counted as such; it does not take the month's cost away.
  const priced = computed.filter(isPriced)
  const warmPriced = warm.filter(isPriced)
  const openAt = (atMs: number) => flags.filter((flag) => flag.openedAtMs < atMs && (!flag.closed || flag.closed.atMs >= atMs))
  const openAtEnd = openAt(interval.endsAtMs)
  const done = visits.filter((visit) => visit.state === 'done' && within(visit.doneAtMs))
  const planned = visits.filter((visit) => visit.state === 'planned')
  return {
    propertyName: one.propertyName,
    currency: one.currency,
    unitCount: one.codes.size,
    unitDaysNeeded: needed.length,
    unitDaysWarm: warm.length,
    daysCovered: new Set(evaluations.map((evaluation) => evaluation.day)).size,
    daysInMonth: days.length,
    // The total is the sum of the rounded days, so that the parts shown add up to it.
    energyKwh: round(sum(days, (day) => day.energyKwh)),
    peakKwh: round(sum(days, (day) => day.peakKwh)),
    costMinor: priced.length > 0 ? sum(priced, (row) => row.costMinor) : null,
    pricedUnitDays: priced.length,
    computedUnitDays: computed.length,
    baselineEnergyKwh: round(sum(computed, (row) => row.baselineEnergyKwh)),
    baselineCostMinor: priced.length > 0 ? sum(priced, (row) => row.baselineCostMinor) : null,
    pricedBaselineKwh: round(sum(priced, (row) => row.baselineEnergyKwh)),
    savedKwh: round(sum(warm, (row) => row.baselineEnergyKwh - row.energyInKwh)),
    savedMinor: warmPriced.length === 0 && warm.length > 0 ? null : sum(warmPriced, (row) => row.baselineCostMinor - row.costMinor),
    pricedSavedKwh: round(sum(warmPriced, (row) => row.baselineEnergyKwh - row.energyInKwh)),
    days,
    flagsOpenAtStart: openAt(interval.startsAtMs).length,
    flagsRaised: flags.filter((flag) => within(flag.openedAtMs)).length,
    flagsClosed: flags.filter((flag) => within(flag.closed?.atMs ?? null)).length,
    flagsOpen: (['dangerous', 'cold', 'attention'] as const).map((severity) => ({
      severity,
      count: openAtEnd.filter((flag) => flag.severity === severity).length,
    })),
    worstUnits: worst(needed, one.codes),
    visitsDone: done.length,
    visitsPlanned: planned.length,
    signedOff: visitList(done, (visit) => (visit.doneAtMs === null ? null : civilOf(visit.doneAtMs, zone).day)),
    planned: visitList(planned, (visit) => visit.dueDay),
    feedbackHot: one.feedback.hot,
    feedbackCold: one.feedback.cold,
  }
}

const isPriced = (row: Evaluation): row is Evaluation & { readonly costMinor: number; readonly baselineCostMinor: number } =>
  row.costMinor !== null && row.baselineCostMinor !== null

const visitList = <T extends { readonly unitCode: string }>(
  visits: readonly T[],
  dayOf: (visit: T) => string | null,
): readonly DigestVisit[] =>
  visits
    .map((visit) => ({ code: visit.unitCode, day: dayOf(visit) }))
    .sort((one, other) => (one.day ?? '9999').localeCompare(other.day ?? '9999') || one.code.localeCompare(other.code))

function worst(needed: readonly Evaluation[], codes: ReadonlyMap<UnitId, string>): DigestFigures['worstUnits'] {
  const cold = new Map<UnitId, { coldDays: number; worstShortfallMin: number }>()
  for (const { unitId, status, shortfallMin } of needed) {
    if (status === 'ready') continue
    const before = cold.get(unitId) ?? { coldDays: 0, worstShortfallMin: 0 }
    cold.set(unitId, { coldDays: before.coldDays + 1, worstShortfallMin: Math.max(before.worstShortfallMin, Math.ceil(shortfallMin)) })
  }
  return [...cold]
    .map(([unitId, figures]) => ({ code: codes.get(unitId) ?? '', ...figures }))
    .sort(
      (one, other) =>
        other.coldDays - one.coldDays || other.worstShortfallMin - one.worstShortfallMin || one.code.localeCompare(other.code),
    )
    .slice(0, WORST_UNITS)
}

const sum = <T>(rows: readonly T[], of: (row: T) => number): number => rows.reduce((total, row) => total + of(row), 0)
/** Tenths of a kilowatt-hour: what is shown. */
const round = (energyKwh: number): number => Math.round(energyKwh * 10) / 10
