/**
 * Queues tomorrow's tips of a property: one letter a tenancy and day, whatever how often it is called. Needs no role: it is the
 * job's, and it tells each tenant only their own day.
 */
import type { PropertyId } from '#db/ids.ts'
import { inTransaction, type OrgDb } from '#db/org-db.ts'
import { type Evaluation, listEvaluations } from '#db/queries/evaluation.ts'
import { type HardwareRecord, listCurrentHardware } from '#db/queries/hardware.ts'
import { findProperty, type Property } from '#db/queries/property.ts'
import { listTenanciesOn, type Tenancy } from '#db/queries/tenancy.ts'
import { listUnits } from '#db/queries/unit.ts'
import { addDays, civilOf, weekdayOf } from '#lib/core/time/civil.ts'
import { notFound } from '#lib/http/app-error.ts'
import { queueMessage } from '#lib/mail/queue-message.server.ts'
import { tipLetter } from './tip-letter.server.ts'

export interface TipCounts {
  readonly due: number
  readonly queued: number
  readonly alreadyQueued: number
}

const CHANGE_MIN = 5
const MONDAY = 0

export async function sendTips(
  db: OrgDb,
  { propertyId, nowMs }: { readonly propertyId: PropertyId; readonly nowMs: number },
): Promise<TipCounts> {
  const property = await findProperty(db, propertyId)
  if (!property) throw notFound('property')
  const today = civilOf(nowMs, property.zone).day
  const day = addDays(today, 1)
  const evaluations = await listEvaluations(db, propertyId, today, addDays(day, 1))
  const on = (wanted: string) => new Map(evaluations.filter((one) => one.day === wanted).map((one) => [one.unitId, one]))
  const [before, after] = [on(today), on(day)]
  const hardware = await listCurrentHardware(db, propertyId)
  const codes = new Map((await listUnits(db, propertyId)).map((unit) => [unit.id, unit.code]))
  const counts = { due: 0, queued: 0, alreadyQueued: 0 }
  for (const tenancy of await listTenanciesOn(db, propertyId, day)) {
    const evaluation = after.get(tenancy.unitId)
    const record = hardware.get(tenancy.unitId)
    if (!evaluation || !record || !isDue(tenancy, { day, before: before.get(tenancy.unitId), evaluation })) continue
    counts.due++
    const queued = await queueTip(db, { property, tenancy, evaluation, record, unitCode: codes.get(tenancy.unitId) ?? '', nowMs })
    if (queued === 'queued') counts.queued++
    else counts.alreadyQueued++
  }
  return counts
}

interface Days {
  readonly day: string
  readonly before: Evaluation | undefined
  readonly evaluation: Evaluation
}

function isDue(tenancy: Tenancy, { day, before, evaluation }: Days): boolean {
  if (evaluation.outcome.needs.length === 0) return false
  switch (tenancy.tips) {
    case 'daily':
      return true
    case 'weekly':
      return weekdayOf(day) === MONDAY
    case 'on-change':
      return (
        !before || before.status !== evaluation.status || Math.abs((before.startByMin ?? 0) - (evaluation.startByMin ?? 0)) >= CHANGE_MIN
      )
    case 'never':
      return false
  }
}

export interface TipFor {
  readonly property: Property
  readonly tenancy: Tenancy
  readonly evaluation: Evaluation
  readonly record: HardwareRecord
  readonly unitCode: string
  readonly nowMs: number
}

async function queueTip(db: OrgDb, tip: TipFor) {
  const { property, tenancy, evaluation, nowMs } = tip
  const letter = await tipLetter(tip, db.scope.organisationId)
  return inTransaction(db, (trx) =>
    queueMessage(trx, {
      propertyId: property.id,
      unitId: tenancy.unitId,
      personId: tenancy.personId,
      toEmail: tenancy.email,
      kind: 'tip',
      cause: `${tenancy.id}:${evaluation.day}`,
      ...letter,
      nowMs,
    }),
  )
}
