/** What a tenant has said of their own days, beside what had been computed of them. */
import type { OrgDb } from '#db/org-db.ts'
import { listAnsweredDays } from '#db/queries/feedback.ts'
import { formatDay } from '#lib/format.ts'
import { openTenancy, type TenancyChoice } from '#lib/tip/own-tenancy.server.ts'

const COMPUTED = {
  ready: 'computed as warm',
  short: 'computed as short',
  impossible: 'computed as not warm',
  'no-need': 'no shower was planned',
  unknown: 'not computed',
} as const

export async function loadHistory(db: OrgDb, choice: TenancyChoice) {
  const { tenancy, unit, cardQuery } = await openTenancy(db, choice)
  const answers = await listAnsweredDays(db, { tenancyId: tenancy.id }, tenancy.fromDay)
  return {
    unitCode: unit.code,
    cardQuery,
    cold: answers.filter(({ verdict }) => verdict === 'cold').length,
    answers: answers.map(({ day, verdict, evaluated }) => ({
      label: formatDay(day, 'EEEE d MMMM yyyy'),
      verdict,
      computed: COMPUTED[evaluated?.status ?? 'unknown'],
    })),
  }
}
