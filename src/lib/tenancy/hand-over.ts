/** How a new tenancy fits a unit's others: days are half-open, one tenancy ends where the next begins, and two never overlap. */
import type { Tenancy } from '#db/queries/tenancy.ts'

export type HandOver =
  | { readonly status: 'fits'; /** Who moves out on the day the new one moves in. */ readonly ends: Tenancy | null }
  | { readonly status: 'refused'; readonly reason: string }

const isOpenOn = (tenancy: Tenancy, day: string): boolean => tenancy.toDay === null || day < tenancy.toDay

/** The tenancy that holds a day. */
export const tenancyOn = (tenancies: readonly Tenancy[], day: string): Tenancy | null =>
  tenancies.find((tenancy) => tenancy.fromDay <= day && isOpenOn(tenancy, day)) ?? null

/** Who lives there on a day, or else will; `null` when nobody is entered any more. */
export const tenancyFrom = (tenancies: readonly Tenancy[], day: string): Tenancy | null =>
  tenancyOn(tenancies, day) ??
  [...tenancies].sort((one, other) => one.fromDay.localeCompare(other.fromDay)).find((tenancy) => tenancy.fromDay > day) ??
  null

export function handOver(tenancies: readonly Tenancy[], fromDay: string): HandOver {
  const later = tenancies.find((tenancy) => tenancy.fromDay >= fromDay)
  if (later)
    return { status: 'refused', reason: `A tenancy of this unit begins on ${later.fromDay}. Choose a later day, or end that one first.` }
  return { status: 'fits', ends: tenancies.find((tenancy) => isOpenOn(tenancy, fromDay)) ?? null }
}

/** Why a tenancy cannot end on a day, or `null`. */
export function endRefusal(tenancies: readonly Tenancy[], tenancy: Tenancy, toDay: string): string | null {
  if (toDay <= tenancy.fromDay) return `It began on ${tenancy.fromDay}: choose a later day.`
  const next = tenancies.find((other) => other.id !== tenancy.id && other.fromDay > tenancy.fromDay && other.fromDay < toDay)
  return next ? `The next tenancy begins on ${next.fromDay}: choose that day or an earlier one.` : null
}
