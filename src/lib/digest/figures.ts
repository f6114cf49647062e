/** A month's figures from its evaluations: sums whose parts add up, unit codes instead of people. */
import type { Evaluation } from '#db/queries/evaluation.ts'
import type { DigestFigures } from '#db/queries/digest.ts'
import type { Flag } from '#db/queries/flag.ts'
import type { UnitId } from '#db/ids.ts'
import type { MsInterval } from '#lib/core/time/types.ts'
import { daysOfMonth } from '#lib/core/time/civil.ts'

const WORST_UNITS = 5

export interface MonthCase {
  readonly month: string
  readonly interval: MsInterval
  readonly propertyName: string
  readonly currency: string
  readonly codes: ReadonlyMap<UnitId, string>
  readonly evaluations: readonly Evaluation[]
  /** Flags open at the month's end, raised or closed within it. */
  readonly flags: readonly Flag[]
  readonly visits: readonly { readonly state: 'planned' | 'done' | 'cancelled'; readonly doneAtMs: number | null }[]
  readonly feedback: { readonly hot: number; readonly cold: number }
}

export function monthFigures(one: MonthCase): DigestFigures {
  const { month, interval, evaluations, flags, visits } = one
  const within = (atMs: number | null | undefined): boolean =>
    atMs !== null && atMs !== undefined && atMs >= interval.startsAtMs && atMs < interval.endsAtMs
  const needed = evaluations.filter(
    (evaluation) => evaluation.status === 'ready' || evaluation.status === 'short' || evaluation.status === 'impossible',
  )
  const computed = evaluations.filter((evaluation) => evaluation.status !== 'unknown')
  const days = daysOfMonth(month).map((day) => {
    const ofDay = computed.filter((evaluation) => evaluation.day === day)
    return { day, energyKwh: round(sum(ofDay, (row) => row.energyInKwh)), peakKwh: round(sum(ofDay, (row) => row.peakKwh)) }
  })
  const warm = needed.filter((evaluation) => evaluation.status === 'ready')
  const costs = computed.map((row) => row.costMinor)
  const baselines = computed.map((row) => row.baselineCostMinor)
  const openAtEnd = flags.filter((flag) => flag.openedAtMs < interval.endsAtMs && (!flag.closed || flag.closed.atMs >= interval.endsAtMs))
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
    costMinor: costs.length > 0 && costs.every((cost) => cost !== null) ? sum(costs, (cost) => cost ?? 0) : null,
    baselineEnergyKwh: round(sum(computed, (row) => row.baselineEnergyKwh)),
    baselineCostMinor: baselines.length > 0 && baselines.every((cost) => cost !== null) ? sum(baselines, (cost) => cost ?? 0) : null,
    savedKwh: round(sum(warm, (row) => row.baselineEnergyKwh - row.energyInKwh)),
    savedMinor: warm.some((row) => row.costMinor === null || row.baselineCostMinor === null)
      ? null
      : sum(warm, (row) => (row.baselineCostMinor ?? 0) - (row.costMinor ?? 0)),
    days,
    flagsRaised: flags.filter((flag) => within(flag.openedAtMs)).length,
    flagsClosed: flags.filter((flag) => within(flag.closed?.atMs)).length,
    flagsOpen: (['dangerous', 'cold', 'attention'] as const).map((severity) => ({
      severity,
      count: openAtEnd.filter((flag) => flag.severity === severity).length,
    })),
    worstUnits: worst(needed, one.codes),
    visitsDone: visits.filter((visit) => visit.state === 'done' && within(visit.doneAtMs)).length,
    visitsPlanned: visits.filter((visit) => visit.state === 'planned').length,
    feedbackHot: one.feedback.hot,
    feedbackCold: one.feedback.cold,
  }
}

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
