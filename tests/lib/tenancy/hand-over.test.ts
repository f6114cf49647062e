/** How tenancies of a unit follow one another: half-open days, none over another. */
import { describe, expect, it } from 'vitest'
import { newId, type TenancyId, type UnitId } from '#db/ids.ts'
import type { Tenancy } from '#db/queries/tenancy.ts'
import { endRefusal, handOver, tenancyFrom, tenancyOn } from '#lib/tenancy/hand-over.ts'

const unitId = newId<UnitId>()
const tenancy = (fromDay: string, toDay: string | null): Tenancy => ({
  id: newId<TenancyId>(),
  unitId,
  personId: null,
  name: `from ${fromDay}`,
  email: 'a@tenants.example',
  fromDay,
  toDay,
  tips: 'daily',
})
const past = tenancy('2025-01-01', '2025-07-01')
const open = tenancy('2026-01-01', null)
const coming = tenancy('2027-01-01', null)

describe('handOver', () => {
  it('ends whoever lives there on the day', () => expect(handOver([past, open], '2026-12-10')).toEqual({ status: 'fits', ends: open }))
  it('ends nobody in an empty unit', () => {
    expect(handOver([], '2026-12-10')).toEqual({ status: 'fits', ends: null })
    expect(handOver([past], '2025-07-01')).toEqual({ status: 'fits', ends: null })
  })
  it('refuses a day on or before the beginning of another, and names that day', () => {
    expect(handOver([open], '2026-01-01')).toMatchObject({ status: 'refused', reason: expect.stringContaining('2026-01-01') })
    expect(handOver([past, coming], '2026-06-01')).toMatchObject({ status: 'refused', reason: expect.stringContaining('2027-01-01') })
    expect(handOver([past], '2024-06-01')).toMatchObject({ status: 'refused' })
  })
})

describe('endRefusal', () => {
  it('allows a day after the first', () => expect(endRefusal([open], open, '2026-01-02')).toBeNull())
  it('refuses the first day itself', () => expect(endRefusal([open], open, '2026-01-01')).toContain('2026-01-01'))
  it('refuses to end after the next has begun', () => {
    const before = tenancy('2026-01-01', '2027-01-01')
    expect(endRefusal([before, coming], before, '2027-02-01')).toContain('2027-01-01')
    expect(endRefusal([before, coming], before, '2027-01-01')).toBeNull()
  })
})

describe('tenancyOn and tenancyFrom', () => {
  it('hold the first day and not the last', () => {
    expect(tenancyOn([past], '2025-01-01')).toBe(past)
    expect(tenancyOn([past], '2025-07-01')).toBeNull()
  })
  it('answer the one to come where nobody lives there yet, and never one that is over', () => {
    expect(tenancyFrom([past, coming], '2026-06-01')).toBe(coming)
    expect(tenancyFrom([past], '2026-06-01')).toBeNull()
  })
})
