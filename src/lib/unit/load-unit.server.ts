/** Everything a unit's page shows: today and tomorrow, flags with their numbers, hardware with checks and history, tenancies. */
import type { PersonId } from '#db/ids.ts'
import type { OrgDb } from '#db/org-db.ts'
import { listUnitEvaluations } from '#db/queries/evaluation.ts'
import { listOpenFlags } from '#db/queries/flag.ts'
import { type HardwareRecord, listHardware, listRecorders } from '#db/queries/hardware.ts'
import type { Property } from '#db/queries/property.ts'
import { listTenancies } from '#db/queries/tenancy.ts'
import { findUnitByCode } from '#db/queries/unit.ts'
import { requireRole } from '#lib/auth/permission.ts'
import { describeController } from '#lib/core/controller/describe.ts'
import { runDuration } from '#lib/core/controller/run-duration.ts'
import { checkHardware, PROFILES } from '#lib/core/hardware/check-hardware.ts'
import { pasteurisingRun } from '#lib/core/hygiene/pasteurise.ts'
import { assessScald } from '#lib/core/hygiene/scald.ts'
import { addDays, civilOf } from '#lib/core/time/civil.ts'
import { notFound } from '#lib/http/app-error.ts'
import { describeInstallation, differences } from '#lib/hardware/view.ts'
import { loadUnitModel } from './load-unit-model.server.ts'
import { answerOf } from './model.ts'
import { stripDayOf } from './strip-day.ts'

export async function loadUnit(
  db: OrgDb,
  { property, code, nowMs }: { readonly property: Property; readonly code: string; readonly nowMs: number },
) {
  requireRole(db, ['landlord'], 'see a unit')
  const unit = await findUnitByCode(db, property.id, code)
  if (!unit) throw notFound('unit')
  const today = civilOf(nowMs, property.zone).day
  const days = await listUnitEvaluations(db, unit.id, today, addDays(today, 8))
  const records = await listHardware(db, unit.id)
  const current = records[0] ?? null
  const recorders = await listRecorders(db, unit.id)
  const model = await loadUnitModel(db, { property, unit, nowMs })
  return {
    unit,
    today,
    model,
    answer: model && answerOf(model),
    pasteurising: model && pasteurisingRun(model.days[0]!.unit),
    days: days.map((evaluation) => ({ ...evaluation, strip: stripDayOf(evaluation) })),
    flags: await listOpenFlags(db, { unitId: unit.id }),
    tenancies: await listTenancies(db, unit.id),
    profile: PROFILES[property.ruleProfile].name,
    defers: PROFILES[property.ruleProfile].defers,
    hardware: current && {
      revision: current.revision,
      controller: describeController(current.installation.controller),
      duration: runDuration(current.installation.controller, current.measured),
      measured: current.measured,
      lines: describeInstallation(current.installation),
      checks: checkHardware(current.installation, property.ruleProfile),
      scald: assessScald(current.installation.load.tank.setPointC, current.installation.load.tank.mixingValveC),
      history: records.map((record, index) => ({
        revision: record.revision,
        recordedBy: recordedBy(record, recorders),
        recordedAtMs: record.recordedAtMs,
        reason: record.reason,
        changes: differences(records[index + 1]?.installation ?? null, record.installation),
      })),
    },
  }
}
const recordedBy = (record: HardwareRecord, names: ReadonlyMap<PersonId, string>): string | null =>
  record.recordedBy && (names.get(record.recordedBy) ?? null)

export type UnitPage = Awaited<ReturnType<typeof loadUnit>>
