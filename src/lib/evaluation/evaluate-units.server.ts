/** Units of a property through the model, one by one, outside any transaction; a unit that cannot be computed is an answer, not an end. */
import { setImmediate } from 'node:timers/promises'
import type { Assess } from './assessment-cache.ts'
import { evaluateDays } from './evaluate-day.ts'
import type { Finding } from './evidence.ts'
import { unitFindings } from './findings.ts'
import type { PropertyInputs, UnitInputs } from './load-inputs.server.ts'
import type { DayResult } from './types.ts'
import { durationOf } from './unit-day.ts'

export type UnitResult =
  | {
      readonly status: 'evaluated'
      readonly inputs: UnitInputs
      readonly days: readonly DayResult[]
      readonly findings: readonly Finding[]
    }
  | { readonly status: 'failed'; readonly inputs: UnitInputs; readonly error: unknown }

export async function* evaluateUnits({ site, contexts, units }: PropertyInputs, assess: Assess): AsyncGenerator<UnitResult> {
  for (const inputs of units) {
    // The model is synchronous; between units other work of the process gets its turn.
    await setImmediate()
    yield evaluateOne({ site, contexts }, inputs, assess)
  }
}

export function evaluateOne({ site, contexts }: Pick<PropertyInputs, 'site' | 'contexts'>, inputs: UnitInputs, assess: Assess): UnitResult {
  const { hardware, wants, answers } = inputs
  try {
    const duration = hardware && durationOf(hardware)
    const days = evaluateDays({ site, contexts, hardware, duration, wants }, assess)
    requireNumbers(days)
    return { status: 'evaluated', inputs, days, findings: unitFindings({ site, contexts, hardware, duration, wants, days, answers }) }
  } catch (error) {
    return { status: 'failed', inputs, error }
  }
}

/** A figure that is no number would be stored as "nothing to say" and read as well; such a unit is not known instead. */
function requireNumbers(days: readonly DayResult[]): void {
  for (const { readiness, peakKwh, costMinor, baselineEnergyKwh } of days) {
    const needs = readiness?.needs ?? []
    const figures = [peakKwh, costMinor, baselineEnergyKwh, readiness?.energyInKwh, readiness?.energyDeliveredKwh, readiness?.energyLostKwh]
    const ofNeeds = needs.flatMap((need) => [
      need.startByMin,
      need.requiredRunMin,
      need.chosenRunMin,
      need.shortfallMin,
      need.minutesServed,
    ])
    if ([...figures, ...ofNeeds].some(Number.isNaN)) throw new RangeError('a figure of the evaluation is no number')
  }
}
