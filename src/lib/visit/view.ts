/** Visits as they are read: building by building, the most urgent first, and when they are due in words. */
import type { Visit } from '#db/queries/visit.ts'
import { civilOf } from '#lib/core/time/civil.ts'
import { formatDay } from '#lib/format.ts'

export interface BuildingVisits {
  readonly propertyName: string
  readonly visits: readonly Visit[]
}

/** Without a day comes last: nothing presses. */
export const nearestFirst = (one: Visit, other: Visit): number =>
  (one.dueDay ?? '9999').localeCompare(other.dueDay ?? '9999') || one.unitCode.localeCompare(other.unitCode)

/** The building whose first visit is due soonest stands first, so that one journey is planned at a time. */
export function byBuilding(visits: readonly Visit[]): readonly BuildingVisits[] {
  const found = new Map<string, Visit[]>()
  for (const visit of [...visits].sort(nearestFirst)) found.set(visit.propertyId, [...(found.get(visit.propertyId) ?? []), visit])
  return [...found.values()].map((ofBuilding) => ({ propertyName: ofBuilding[0]?.propertyName ?? '', visits: ofBuilding }))
}

export interface Due {
  readonly words: string
  /** The day has passed at the property. */
  readonly late: boolean
}

export function dueOf({ dueDay, zone }: Pick<Visit, 'dueDay' | 'zone'>, nowMs: number): Due {
  if (dueDay === null) return { words: 'no day set', late: false }
  const today = civilOf(nowMs, zone).day
  if (dueDay === today) return { words: 'due today', late: false }
  return dueDay < today ? { words: `was due on ${formatDay(dueDay)}`, late: true } : { words: `by ${formatDay(dueDay)}`, late: false }
}
