/** Remembers assessments of one evaluation run by their inputs: units of the same hardware and habits are the same week to the model. */
import { type AlwaysOn, alwaysOn } from '#lib/core/tank/always-on.ts'
import type { Readiness, UnitDay } from '#lib/core/tank/types.ts'
import { assessWeek } from '#lib/core/tank/week.ts'

/** In step with the days. */
export interface Assessment {
  readonly readiness: readonly Readiness[]
  readonly baseline: readonly AlwaysOn[]
}
export type Assess = (days: readonly UnitDay[]) => Assessment

/** An assessment takes about 30 kB; a property of 10,000 units has more distinct ones than are worth keeping. */
const LIMIT = 500

/** One cache a run: it holds inputs for as long as the run lasts, never from one night to the next. */
export function cachedAssess(): Assess {
  const known = new Map<string, Assessment>()
  return (days) => {
    const key = JSON.stringify(days)
    const found = known.get(key)
    if (found) return found
    if (known.size >= LIMIT) known.clear()
    const assessment = { readiness: assessWeek(days), baseline: alwaysOn(days) }
    known.set(key, assessment)
    return assessment
  }
}
