/** Who a roster row says lives in the unit, held against the tenancies on record. */
import type { Tenancy } from '#db/queries/tenancy.ts'
import { emailField, nameField } from '#lib/account/schemas.ts'
import { handOver, tenancyFrom } from '#lib/tenancy/hand-over.ts'
import { dayField } from '#lib/tenancy/schemas.ts'
import type { CellReader } from './cells.ts'

export type TenantChange =
  | { readonly kind: 'nothing-said'; readonly living: Tenancy | null }
  | { readonly kind: 'stays'; readonly living: Tenancy; /** `null`: spelled as before. */ readonly newName: string | null }
  | { readonly kind: 'moves-in'; readonly name: string; readonly email: string; readonly fromDay: string; readonly ends: Tenancy | null }

export interface TenantContext {
  readonly today: string
  readonly tenancies: readonly Tenancy[]
}

/** Another e-mail is another tenant; the same one with another name is spelled anew. */
export function readTenant(cell: CellReader, { today, tenancies }: TenantContext): TenantChange {
  const living = tenancyFrom(tenancies, today)
  const unchanged: TenantChange = { kind: 'nothing-said', living }
  if (cell.text('tenant') === '' && cell.text('email') === '') {
    if (cell.text('from') !== '' && cell.text('from') !== living?.fromDay)
      cell.problem('from', 'There is a first day without a tenant. Enter their name and e-mail, or empty the cell.')
    return unchanged
  }
  const name = nameField.safeParse(cell.text('tenant'))
  if (!name.success) cell.problem('tenant', 'Enter the tenant’s name, up to 100 characters.')
  const email = emailField.safeParse(cell.text('email'))
  if (!email.success) cell.problem('email', 'Enter the tenant’s e-mail, like name@example.org: tips go there.')
  const from = dayField.safeParse(cell.text('from') || today)
  if (!from.success) cell.problem('from', from.error.issues[0]?.message ?? 'This is not a day.')
  if (!name.success || !email.success || !from.success) return unchanged
  if (living?.email.toLowerCase() === email.data) {
    if (cell.text('from') !== '' && from.data !== living.fromDay)
      cell.problem('from', `Their tenancy begins on ${living.fromDay}. Leave the cell empty, or end that tenancy on the unit’s page first.`)
    return { kind: 'stays', living, newName: name.data === living.name ? null : name.data }
  }
  const fit = handOver(tenancies, from.data)
  if (fit.status === 'refused') {
    cell.problem('from', fit.reason)
    return unchanged
  }
  return { kind: 'moves-in', name: name.data, email: email.data, fromDay: from.data, ends: fit.ends }
}

/** In words for the preview; nothing when nobody moves. */
export function tenantWords(change: TenantChange): readonly string[] {
  if (change.kind === 'stays') return change.newName ? [`Tenant: ${change.living.name} → ${change.newName}`] : []
  if (change.kind !== 'moves-in') return []
  const before = change.ends ? `; ${change.ends.name} moves out` : ''
  return [`${change.name} moves in on ${change.fromDay}${before}`]
}
