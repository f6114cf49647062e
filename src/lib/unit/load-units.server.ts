/** The units of a property with tomorrow's answer, for the table; a handful of statements whatever their number. */
import type { OrgDb } from '#db/org-db.ts'
import { type Evaluation, listEvaluations } from '#db/queries/evaluation.ts'
import { type Flag, listOpenFlags } from '#db/queries/flag.ts'
import { listCurrentHardware } from '#db/queries/hardware.ts'
import type { Property } from '#db/queries/property.ts'
import { listTenanciesOn } from '#db/queries/tenancy.ts'
import { listUnits } from '#db/queries/unit.ts'
import { requireRole } from '#lib/auth/permission.ts'
import { describeController } from '#lib/core/controller/describe.ts'
import { addDays, civilOf } from '#lib/core/time/civil.ts'
import { KIND_WORDS } from '#lib/flag/view.ts'
import { clockWords } from '#lib/strip/clock.ts'
import { stripDayOf } from './strip-day.ts'
import { stateWords, type UnitLine, type UnitsPage } from './view.ts'

export interface UnitsAsked {
  readonly property: Property
  readonly organisationSlug: string
  readonly nowMs: number
}

export async function loadUnits(db: OrgDb, { property, organisationSlug, nowMs }: UnitsAsked): Promise<UnitsPage> {
  requireRole(db, ['landlord'], 'see the units')
  const day = addDays(civilOf(nowMs, property.zone).day, 1)
  const hardware = await listCurrentHardware(db, property.id)
  const tenancies = new Map((await listTenanciesOn(db, property.id, day)).map((tenancy) => [tenancy.unitId, tenancy]))
  const evaluations = new Map((await listEvaluations(db, property.id, day, addDays(day, 1))).map((one) => [one.unitId, one]))
  const flags = await listOpenFlags(db, { propertyId: property.id })
  const dangerous = new Map(flags.filter((flag) => flag.severity === 'dangerous').map((flag) => [flag.unitId, flag]))
  const units = (await listUnits(db, property.id)).map((unit): UnitLine => {
    const record = hardware.get(unit.id)
    return {
      code: unit.code,
      href: `/o/${organisationSlug}/p/${property.slug}/units/${encodeURIComponent(unit.code)}`,
      floor: unit.floor,
      tenant: tenancies.get(unit.id)?.name ?? '',
      controller: record ? describeController(record.installation.controller) : 'no record',
      ...stateOf(evaluations.get(unit.id), dangerous.get(unit.id)),
    }
  })
  return { day, units }
}

/** Why nothing is known says more than that nothing is. */
const wordsOf = (evaluation: Evaluation): string => (evaluation.status === 'unknown' && evaluation.outcome.reason) || stateWords(evaluation)

function stateOf(
  evaluation: Evaluation | undefined,
  danger: Flag | undefined,
): Pick<UnitLine, 'startByMin' | 'readyBy' | 'startBy' | 'state' | 'urgency' | 'strip'> {
  const change = evaluation?.outcome.clockChange ?? null
  const clock = (minute: number | null | undefined) => (minute === null || minute === undefined ? '' : clockWords(minute, change))
  const urgency = danger ? 0 : evaluation ? { short: 1, impossible: 1, unknown: 2, ready: 3, 'no-need': 4 }[evaluation.status] : 2
  return {
    startByMin: evaluation?.startByMin ?? null,
    readyBy: clock(evaluation?.readyByMin),
    startBy: clock(evaluation?.startByMin),
    state: danger ? KIND_WORDS[danger.kind] : evaluation ? wordsOf(evaluation) : 'not evaluated',
    urgency,
    strip: evaluation && evaluation.outcome.runs.length + evaluation.outcome.needs.length > 0 ? stripDayOf(evaluation) : null,
  }
}
