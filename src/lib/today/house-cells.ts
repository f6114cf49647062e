/** Units and their evaluations of one day as the cells of the house. */
import type { UnitId } from '#db/ids.ts'
import type { Evaluation } from '#db/queries/evaluation.ts'
import type { Flag } from '#db/queries/flag.ts'
import type { Unit } from '#db/queries/unit.ts'
import { needEndMin } from '#lib/core/tank/cycle.ts'
import type { NeedOutcome } from '#lib/core/tank/types.ts'
import { KIND_WORDS } from '#lib/flag/view.ts'
import type { StripNeed } from '#lib/strip/types.ts'
import type { HouseCell } from './types.ts'

/** From this many units on a cell has no room for a tank and a strip. */
export const SMALL_CELLS_FROM = 60

export interface HouseCase {
  readonly units: readonly Unit[]
  readonly evaluations: readonly Evaluation[]
  readonly flags: readonly Flag[]
  readonly unitsHref: string
}

export const stripNeed = ({ need, readyAtMin, shortfallMin }: NeedOutcome): StripNeed => ({
  readyByMin: need.readyByMin,
  endMin: needEndMin(need),
  count: need.count,
  minutesEach: need.minutesEach,
  readyAtMin,
  shortfallMin,
})

export function houseCells({ units, evaluations, flags, unitsHref }: HouseCase): readonly HouseCell[] {
  const byUnit = new Map<UnitId, Evaluation>(evaluations.map((one) => [one.unitId, one]))
  const hazards = new Map<UnitId, string>()
  for (const flag of flags) {
    if (flag.unitId && flag.severity === 'dangerous' && !hazards.has(flag.unitId)) {
      hazards.set(flag.unitId, KIND_WORDS[flag.kind].toLowerCase())
    }
  }
  return units.map((unit) => {
    const evaluation = byUnit.get(unit.id)
    return {
      code: unit.code,
      href: `${unitsHref}/${encodeURIComponent(unit.code)}`,
      floor: unit.floor,
      stack: unit.stack,
      runs: evaluation?.outcome.runs ?? [],
      needs: evaluation?.outcome.needs.map(stripNeed) ?? [],
      nothing: nothingWords(evaluation),
      hazard: hazards.get(unit.id) ?? '',
      charge: units.length < SMALL_CELLS_FROM ? (evaluation?.outcome.charge?.percent ?? []) : [],
    }
  })
}

function nothingWords(evaluation: Evaluation | undefined): string {
  if (!evaluation) return 'not computed'
  if (evaluation.status === 'unknown') return evaluation.hardwareRecordId === null ? 'no record' : 'showers not said'
  if (evaluation.status === 'no-need') return evaluation.outcome.reason.startsWith('Nobody') ? 'nobody' : 'no shower'
  return ''
}
