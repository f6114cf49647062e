/** For a timer that may never stop: the parts with which it surely does, from the core's parts advice. */
import type { EvidenceLine } from '#db/queries/flag.ts'
import type { DurationOutcome } from '#lib/core/controller/types.ts'
import { partsAdvice } from '#lib/core/controller/parts-advice.ts'
import { meantRun, runNeed } from '#lib/hardware/run-need.ts'
import type { DayResult, UnitHardware } from './types.ts'

/** The electrician carries parts for one way and, if a shop has not got them, for another. */
const SHOWN = 2
const FROM = 'computed from published limits of leakage and bias'

export function sureParts(hardware: UnitHardware, duration: DurationOutcome, days: readonly DayResult[]): readonly EvidenceLine[] {
  const { controller } = hardware.installation
  const need = longestNeed(days) ?? (duration.nominalMin === null ? null : meantRun(duration.nominalMin))
  if (!need) return []
  const advice = partsAdvice(controller, need)
  if (advice.status === 'none') return [{ kind: 'fix', label: 'Other parts', value: advice.reason.replace(/\.$/, ''), from: FROM }]
  return advice.suggestions
    .slice(0, SHOWN)
    .map(({ what, reason }) => ({ kind: 'fix', label: what, value: reason.replace(/\.$/, ''), from: FROM }))
}

function longestNeed(days: readonly DayResult[]) {
  const needs = days.flatMap(({ context, readiness }) =>
    (readiness?.needs ?? []).flatMap(({ requiredRunMin, need }) =>
      requiredRunMin === null || requiredRunMin === 0
        ? []
        : [{ requiredMin: requiredRunMin, readyByMin: need.readyByMin, day: context.day, clockChange: context.clockChange }],
    ),
  )
  const longest = needs.reduce<(typeof needs)[number] | null>(
    (best, one) => (best && best.requiredMin >= one.requiredMin ? best : one),
    null,
  )
  return longest && runNeed(longest)
}
