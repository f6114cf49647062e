/** The round of a property at a clock change: whom to visit, when and why; what comes right alone; whose supplier to ask. Pure. */
import type { UnitId } from '#db/ids.ts'
import { clockRound, nextClockChanges, type RoundChange, type VisitWhen, visitWhen } from '#lib/core/controller/clock-change.ts'
import type { Controller } from '#lib/core/controller/types.ts'
import type { Zone } from '#lib/core/time/types.ts'

export interface RoundUnit {
  readonly unitId: UnitId
  readonly code: string
  readonly controller: Controller
  /** When its record was made, and its clock taken to be as recorded. */
  readonly recordedAtMs: number
}

export interface RoundVisit extends VisitWhen {
  readonly unit: RoundUnit
  /** Above 0 it switches early, below 0 late. */
  readonly aheadMin: number
}

export interface Round {
  readonly change: RoundChange
  /** Those to be made before the change first, then by code as given. */
  readonly visits: readonly RoundVisit[]
  readonly comesRight: readonly RoundUnit[]
  readonly askSupplier: readonly RoundUnit[]
  readonly follows: number
}

export function roundsOf(units: readonly RoundUnit[], { zone, nowMs }: { readonly zone: Zone; readonly nowMs: number }): readonly Round[] {
  const steps = units.map((unit) => ({ unit, steps: clockRound(unit.controller, { zone, nowMs, rightAtMs: unit.recordedAtMs }) }))
  return nextClockChanges(zone, nowMs).map((change, index) => {
    const effects = steps.flatMap((one) => {
      const effect = one.steps[index]?.effect
      return effect ? [{ unit: one.unit, effect }] : []
    })
    const visits = effects.flatMap(({ unit, effect }): RoundVisit[] =>
      effect.status === 'off' ? [{ unit, aheadMin: effect.aheadMin, ...visitWhen(effect, { zone, change }) }] : [],
    )
    const because = (reason: 'comes-right' | 'follows') =>
      effects.filter(({ effect }) => effect.status === 'right' && effect.because === reason).map(({ unit }) => unit)
    return {
      change,
      visits: [...visits].sort((one, other) => one.dueDay.localeCompare(other.dueDay)),
      comesRight: because('comes-right'),
      askSupplier: effects.filter(({ effect }) => effect.status === 'ask-supplier').map(({ unit }) => unit),
      follows: because('follows').length,
    }
  })
}

const CAUSE = 'clock-change '
/** One visit a unit and change, however often the round is planned. */
export const causeOf = ({ atMs }: Pick<RoundChange, 'atMs'>): string => `${CAUSE}${new Date(atMs).toISOString()}`
export const isClockCause = (cause: string | undefined): boolean => cause?.startsWith(CAUSE) ?? false
