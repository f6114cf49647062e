/** A tenant's coming week, day by day and in a line for days that ask for the same; only days of their own tenancy. */
import type { OrgDb } from '#db/org-db.ts'
import { listUnitEvaluations } from '#db/queries/evaluation.ts'
import { listOpenFlags } from '#db/queries/flag.ts'
import { currentHardware } from '#db/queries/hardware.ts'
import { tenancyCovers } from '#db/queries/tenancy.ts'
import { addDays, weekdayOf } from '#lib/core/time/civil.ts'
import { formatDay } from '#lib/format.ts'
import { stripDayOf } from '#lib/unit/strip-day.ts'
import { cautionsFor, isPressed } from './cautions.ts'
import { openTenancy, type TenancyChoice } from './own-tenancy.server.ts'
import { tipOf } from './tip.ts'
import { weekLines } from './week-lines.ts'
import { landlordsOf } from './whom-to-call.server.ts'

const DAYS = 7

export async function loadWeek(db: OrgDb, choice: TenancyChoice) {
  const { tenancy, unit, property, today, cardQuery } = await openTenancy(db, choice)
  const record = await currentHardware(db, unit.id)
  const pressed = isPressed(record?.installation)
  const evaluations = (await listUnitEvaluations(db, unit.id, today, addDays(today, DAYS))).filter(({ day }) => tenancyCovers(tenancy, day))
  return {
    tenancyId: tenancy.id,
    unitCode: unit.code,
    property: { name: property.name, zone: property.zone },
    cardQuery,
    pressed,
    days: evaluations.map((evaluation) => ({
      day: evaluation.day,
      label: evaluation.day === today ? `Today, ${formatDay(evaluation.day, 'EEEE')}` : formatDay(evaluation.day),
      tip: tipOf({ evaluation, pressed, when: '' }),
      strip: stripDayOf(evaluation),
    })),
    // A line names its days in the order of the week, whatever day it is today.
    lines: weekLines(
      [...evaluations].sort((one, other) => weekdayOf(one.day) - weekdayOf(other.day)),
      pressed,
    ),
    cautions: cautionsFor({ installation: record?.installation ?? null, flags: await listOpenFlags(db, { unitId: unit.id }) }),
    landlords: await landlordsOf(db),
  }
}
export type Week = Awaited<ReturnType<typeof loadWeek>>
