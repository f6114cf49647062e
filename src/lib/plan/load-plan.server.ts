/** What the plan's page opens with: the days that can be planned, the plans so far and which may be undone, and whom tenants call. */
import type { OrgDb } from '#db/org-db.ts'
import { listMembers } from '#db/queries/organisation.ts'
import { type AcceptedPlan, listPlans } from '#db/queries/plan.ts'
import type { Property } from '#db/queries/property.ts'
import { listUnits } from '#db/queries/unit.ts'
import { requireRole } from '#lib/auth/permission.ts'
import { addDays, civilOf } from '#lib/core/time/civil.ts'
import { formatInstant } from '#lib/format.ts'
import { landlordsOf } from '#lib/tip/whom-to-call.server.ts'
import { PLAN_DAYS } from './schemas.ts'
import { dayWords } from './words.ts'

export interface PastPlan extends AcceptedPlan {
  readonly acceptedWords: string
  /** Empty while it stands. */
  readonly undoneWords: string
  readonly daysWords: string
  readonly mayBeUndone: boolean
}

const SHOWN = 10

export async function loadPlanPage(db: OrgDb, { property, nowMs }: { readonly property: Property; readonly nowMs: number }) {
  requireRole(db, ['landlord'], 'plan starts')
  const { zone } = property
  const today = civilOf(nowMs, zone).day
  const days = Array.from({ length: PLAN_DAYS }, (_, index) => addDays(today, index + 1))
  const plans = await listPlans(db, property.id)
  const names = new Map((await listMembers(db)).map((member) => [member.personId, member.name]))
  const said = (atMs: number, by: AcceptedPlan['acceptedBy']) =>
    `${formatInstant(atMs, zone, 'd MMM, HH:mm')} by ${(by && names.get(by)) ?? 'somebody who has left'}`
  const standing = plans.find((plan) => plan.undoneAtMs === null)
  return {
    property,
    days: days.map((day) => ({ day, words: dayWords(day) })),
    weekEnd: addDays(today, PLAN_DAYS + 1),
    units: (await listUnits(db, property.id)).length,
    landlords: await landlordsOf(db),
    plans: plans.slice(0, SHOWN).map((plan): PastPlan => {
      const last = addDays(plan.toDay, -1)
      return {
        ...plan,
        acceptedWords: said(plan.acceptedAtMs, plan.acceptedBy),
        undoneWords: plan.undoneAtMs === null ? '' : said(plan.undoneAtMs, plan.undoneBy),
        daysWords: last === plan.fromDay ? dayWords(last) : `${dayWords(plan.fromDay)} to ${dayWords(last)}`,
        mayBeUndone: plan === standing && plan.toDay > today,
      }
    }),
  }
}

export type PlanPage = Awaited<ReturnType<typeof loadPlanPage>>
