/** A tenant's card: their unit, today and tomorrow in words, whether they have said hot or cold; nothing of any other unit. */
import type { PersonId } from '#db/ids.ts'
import type { OrgDb } from '#db/org-db.ts'
import { findEvaluation } from '#db/queries/evaluation.ts'
import { findFeedback } from '#db/queries/feedback.ts'
import { currentHardware } from '#db/queries/hardware.ts'
import { findPreference } from '#db/queries/preference.ts'
import { findProperty } from '#db/queries/property.ts'
import { listTenanciesOfPerson, tenancyCovers } from '#db/queries/tenancy.ts'
import { findUnit } from '#db/queries/unit.ts'
import { actingPerson, requireRole } from '#lib/auth/permission.ts'
import { assessScald } from '#lib/core/hygiene/scald.ts'
import { addDays, civilOf } from '#lib/core/time/civil.ts'
import { formatDay } from '#lib/format.ts'
import { notFound } from '#lib/http/app-error.ts'
import { stripDayOf } from '#lib/unit/strip-day.ts'
import { tipOf } from './tip.ts'

/** After this local hour the card speaks of tomorrow. */
const EVENING_FROM_MIN = 12 * 60

export async function loadCard(db: OrgDb, nowMs: number) {
  requireRole(db, ['tenant'], 'see a tenant’s card')
  const personId = actingPerson(db)
  const home = personId ? await presentHome(db, personId, nowMs) : null
  // Whoever has moved out, or not yet in, sees nothing: the unit's day is somebody else's.
  if (!home) throw notFound('tenancy of yours today')
  const { tenancy, unit, property } = home
  const { day: today, minuteOfDay } = civilOf(nowMs, property.zone)
  const day = minuteOfDay >= EVENING_FROM_MIN ? addDays(today, 1) : today
  const evaluation = tenancyCovers(tenancy, day) ? await findEvaluation(db, unit.id, day) : null
  const record = await currentHardware(db, unit.id)
  const kind = record?.installation.controller.kind
  const tank = record?.installation.load.tank
  return {
    tenancy,
    unitCode: unit.code,
    property: { name: property.name, zone: property.zone, currency: property.currency },
    today,
    day,
    isToday: day === today,
    preference: await findPreference(db, tenancy.id),
    feedback: await findFeedback(db, tenancy.id, today),
    scald: tank ? assessScald(tank.setPointC, tank.mixingValveC) : null,
    strip: evaluation ? stripDayOf(evaluation) : null,
    tip: evaluation
      ? tipOf({
          evaluation,
          pressed: kind !== 'time-switch' && kind !== 'supplier-contactor',
          when: day === today ? 'today' : `tomorrow, ${formatDay(day, 'EEEE')}`,
        })
      : null,
  }
}
export type Card = Awaited<ReturnType<typeof loadCard>>

/** The person's tenancy that is in force on the unit's own local today. */
async function presentHome(db: OrgDb, personId: PersonId, nowMs: number) {
  for (const tenancy of await listTenanciesOfPerson(db, personId)) {
    const unit = await findUnit(db, tenancy.unitId)
    const property = unit && (await findProperty(db, unit.propertyId))
    if (unit && property && tenancyCovers(tenancy, civilOf(nowMs, property.zone).day)) return { tenancy, unit, property }
  }
  return null
}
