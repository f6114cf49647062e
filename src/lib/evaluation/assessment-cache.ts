/** Remembers assessments of one evaluation run by their inputs: most days of a week are the same day to the model. */
import { type AlwaysOn, alwaysOn } from '#lib/core/tank/always-on.ts'
import { assessReadiness } from '#lib/core/tank/readiness.ts'
import type { Readiness, UnitDay } from '#lib/core/tank/types.ts'

export interface Assessment {
  readonly readiness: Readiness
  readonly baseline: AlwaysOn
}
export type Assess = (day: UnitDay) => Assessment

/** An assessment takes about 4 kB; a property of 10,000 units has more distinct ones than are worth keeping. */
const LIMIT = 4_000

/** One cache a run: it holds inputs for as long as the run lasts, never from one night to the next. */
export function cachedAssess(): Assess {
  const known = new Map<string, Assessment>()
  return (day) => {
    const key = JSON.stringify(day)
    const found = known.get(key)
    if (found) return found
    if (known.size >= LIMIT) known.clear()
    const assessment = { readiness: assessReadiness(day), baseline: alwaysOn(day) }
    known.set(key, assessment)
    return assessment
  }
}
