/** Writes what was computed for some units: evaluations in the place of older ones, expected runs replaced, flags reconciled. A unit that could not be computed keeps none of the days ahead. */
import { type EvaluationId, newId, type PropertyId, type RunId, type UnitId } from '#db/ids.ts'
import type { OrgTrx } from '#db/org-db.ts'
import { putEvaluation, removeEvaluations } from '#db/queries/evaluation.ts'
import type { Flag } from '#db/queries/flag.ts'
import { addRun, removeExpectedRuns } from '#db/queries/run.ts'
import { MS_PER_MIN } from '#lib/core/units.ts'
import type { UnitResult } from './evaluate-units.server.ts'
import { inputsHash } from './inputs-hash.server.ts'
import { type Finding, NOT_EVALUATED } from './evidence.ts'
import type { PropertyInputs } from './load-inputs.server.ts'
import { type FlagChanges, reconcileFlags } from './reconcile-flags.server.ts'
import type { DayResult } from './types.ts'

export interface Batch {
  readonly inputs: Pick<PropertyInputs, 'property' | 'site' | 'fromDay' | 'toDay'>
  readonly results: readonly UnitResult[]
  readonly openFlags: readonly Flag[]
  readonly dismissals: readonly Flag[]
  readonly nowMs: number
}

export async function writeResults(trx: OrgTrx, { inputs, results, openFlags, dismissals, nowMs }: Batch): Promise<FlagChanges> {
  const { property, fromDay, toDay } = inputs
  const evaluated = results.filter((result) => result.status === 'evaluated')
  const unitIds = (of: readonly UnitResult[]) => of.map((result) => result.inputs.unit.id)
  await removeExpectedRuns(trx, unitIds(results), fromDay, toDay)
  const failed = results.filter((result) => result.status === 'failed')
  await removeEvaluations(trx, unitIds(failed), fromDay, toDay)
  for (const { inputs: unit, days } of evaluated) {
    const hash = inputsHash(inputs, unit)
    for (const day of days) {
      await putEvaluation(trx, toEvaluation({ propertyId: property.id, unit, day, hash, nowMs }))
      for (const run of day.runs) await addRun(trx, toRun({ propertyId: property.id, unitId: unit.unit.id, day, run }))
    }
  }
  const found = new Map<UnitId, readonly Finding[] | 'unknown'>(
    results.map((result) => [result.inputs.unit.id, result.status === 'evaluated' ? result.findings : 'unknown']),
  )
  return reconcileFlags(trx, {
    propertyId: property.id,
    subjects: [...found].map(([unitId, findings]) =>
      findings === 'unknown' ? { unitId, findings: [NOT_EVALUATED], keepOthers: true } : { unitId, findings, keepOthers: false },
    ),
    openFlags,
    dismissals,
    nowMs,
  })
}

interface UnitDayCase {
  readonly propertyId: PropertyId
  readonly unit: UnitResult['inputs']
  readonly day: DayResult
  readonly hash: string
  readonly nowMs: number
}

function toEvaluation({ propertyId, unit, day, hash, nowMs }: UnitDayCase) {
  const { context, readiness } = day
  // What a table shows of a day is its worst need: the one most short, or the first.
  const needs = readiness?.needs ?? []
  const worst = [...needs].sort((one, other) => severity(other.status) - severity(one.status) || other.shortfallMin - one.shortfallMin)[0]
  return {
    id: newId<EvaluationId>(),
    propertyId,
    unitId: unit.unit.id,
    day: context.day,
    status: day.status,
    readyByMin: worst?.need.readyByMin ?? null,
    startByMin: worst?.startByMin ?? null,
    requiredMin: worst?.requiredRunMin ?? null,
    chosenMin: worst?.chosenRunMin ?? null,
    shortfallMin: worst?.shortfallMin ?? 0,
    energyInKwh: readiness?.energyInKwh ?? 0,
    energyDeliveredKwh: readiness?.energyDeliveredKwh ?? 0,
    energyLostKwh: readiness?.energyLostKwh ?? 0,
    peakKwh: day.peakKwh,
    costMinor: day.costMinor,
    baselineEnergyKwh: day.baselineEnergyKwh,
    baselineCostMinor: day.baselineCostMinor,
    outcome: {
      reason: day.reason,
      needs,
      runs: day.runs.map(({ startMin, endMin, longestEndMin, short }) => ({ startMin, endMin, longestEndMin, short })),
      peaks: context.peaks,
      dayMin: context.dayMin,
      clockChange: context.clockChange,
      powerW: day.powerW,
      charge: readiness && {
        sampleMin: readiness.trace.sampleMin,
        percent: readiness.trace.chargeFraction.map((fraction) => Math.round(fraction * 100)),
      },
    },
    assumptions: day.assumptions,
    hardwareRecordId: unit.hardware?.recordId ?? null,
    inputsHash: hash,
    evaluatedAtMs: nowMs,
  }
}

const severity = (status: 'ready' | 'short' | 'impossible'): number => ({ ready: 0, short: 1, impossible: 2 })[status]

interface RunCase {
  readonly propertyId: PropertyId
  readonly unitId: UnitId
  readonly day: DayResult
  readonly run: DayResult['runs'][number]
}

function toRun({ propertyId, unitId, day, run }: RunCase) {
  const at = (minute: number) => day.context.startsAtMs + minute * MS_PER_MIN
  return {
    id: newId<RunId>(),
    propertyId,
    unitId,
    day: day.context.day,
    kind: 'expected' as const,
    startsAtMs: at(run.startMin),
    endsAtMs: at(run.endMin),
    longestEndsAtMs: run.longestEndMin === null ? null : at(run.longestEndMin),
    windowStartsAtMs: at(run.windowStartMin),
    windowEndsAtMs: at(run.windowEndMin),
    readyByAtMs: at(run.readyByMin),
    powerW: day.powerW,
    short: run.short,
  }
}
