/** A tenant's card: their unit and the day that is ahead of them in words, cautions, whom to call; nothing of any other tenancy. */
import type { OrgDb } from '#db/org-db.ts'
import { type Evaluation, findEvaluation } from '#db/queries/evaluation.ts'
import { findFeedback } from '#db/queries/feedback.ts'
import { listOpenFlags } from '#db/queries/flag.ts'
import { currentHardware } from '#db/queries/hardware.ts'
import { findPreference } from '#db/queries/preference.ts'
import { dayBounds, addDays } from '#lib/core/time/civil.ts'
import { MS_PER_MIN } from '#lib/core/units.ts'
import { formatDay } from '#lib/format.ts'
import { notFound } from '#lib/http/app-error.ts'
import { stripDayOf } from '#lib/unit/strip-day.ts'
import { cautionsFor, isPressed } from './cautions.ts'
import { type Home, openTenancy, ownTenancies, type TenancyChoice } from './own-tenancy.server.ts'
import { needsAhead, tipOf } from './tip.ts'
import { landlordsOf } from './whom-to-call.server.ts'

export type Card =
  | { readonly kind: 'over'; readonly unitCode: string; readonly propertyName: string; readonly toDay: string }
  | ({ readonly kind: 'open' } & Awaited<ReturnType<typeof openCard>>)
export type OpenCard = Extract<Card, { kind: 'open' }>

export async function loadCard(db: OrgDb, { tenancyId, nowMs }: TenancyChoice): Promise<Card> {
  const { open, over } = await ownTenancies(db, nowMs)
  if (!tenancyId && open.length === 0) {
    const [last] = over
    if (!last?.tenancy.toDay) throw notFound('tenancy of yours')
    return { kind: 'over', unitCode: last.unit.code, propertyName: last.property.name, toDay: last.tenancy.toDay }
  }
  const home = await openTenancy(db, { tenancyId, nowMs })
  return { kind: 'open', ...(await openCard(db, { home, open, nowMs })) }
}

interface CardCase {
  readonly home: Home
  readonly open: readonly Home[]
  readonly nowMs: number
}

async function openCard(db: OrgDb, { home, open, nowMs }: CardCase) {
  const { tenancy, unit, property, today } = home
  const passedMin = (nowMs - dayBounds(today, property.zone).startsAtMs) / MS_PER_MIN
  const record = await currentHardware(db, unit.id)
  const preference = await findPreference(db, tenancy.id)
  const { evaluation, isToday } = await evaluationAhead(db, { home, passedMin })
  const pressed = isPressed(record?.installation)
  const day = isToday ? today : addDays(today, 1)
  return {
    tenancy,
    unitCode: unit.code,
    others: open.filter((other) => other.tenancy.id !== tenancy.id).map((other) => ({ id: other.tenancy.id, unitCode: other.unit.code })),
    property: { name: property.name, zone: property.zone, currency: property.currency },
    today,
    day,
    isToday,
    /** A tenancy that is to begin has nothing to tell or to ask yet, but its showers. */
    begins: tenancy.fromDay > today ? tenancy.fromDay : null,
    preference,
    feedback: await findFeedback(db, tenancy.id, today),
    cautions: cautionsFor({ installation: record?.installation ?? null, flags: await listOpenFlags(db, { unitId: unit.id }) }),
    landlords: await landlordsOf(db),
    strip: evaluation ? stripDayOf(evaluation) : null,
    tip: evaluation
      ? tipOf({
          evaluation,
          pressed,
          when: isToday ? 'today' : `tomorrow, ${formatDay(day, 'EEEE')}`,
          ...(isToday ? { passedMin } : {}),
        })
      : null,
  }
}

/** Today while a shower of today is ahead, else tomorrow; a day outside the tenancy is somebody else's and is not looked at. */
async function evaluationAhead(
  db: OrgDb,
  { home, passedMin }: { readonly home: Home; readonly passedMin: number },
): Promise<{ readonly evaluation: Evaluation | null; readonly isToday: boolean }> {
  const { tenancy, unit, today } = home
  const own = (day: string) => tenancy.fromDay <= day && (tenancy.toDay === null || day < tenancy.toDay)
  const on = async (day: string) => (own(day) ? findEvaluation(db, unit.id, day) : null)
  const now = await on(today)
  if (now && needsAhead(now, passedMin).length > 0) return { evaluation: now, isToday: true }
  return { evaluation: await on(addDays(today, 1)), isToday: false }
}
