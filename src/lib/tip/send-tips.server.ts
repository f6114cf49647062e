/**
 * Queues tomorrow's tips of a property: one letter a tenancy and day, however often it is called, told only from figures that stand
 * for the present records. One tenant's letter that fails stops no other's. It is the job's, or a landlord's, and it tells each
 * tenant only their own days.
 */
import type { PropertyId, UnitId } from '#db/ids.ts'
import { inTransaction, type OrgDb } from '#db/org-db.ts'
import { type Evaluation, listEvaluations } from '#db/queries/evaluation.ts'
import { type Flag, listOpenFlags } from '#db/queries/flag.ts'
import { type HardwareRecord, listCurrentHardware } from '#db/queries/hardware.ts'
import { findProperty, type Property } from '#db/queries/property.ts'
import { listTenanciesOn, type Tenancy } from '#db/queries/tenancy.ts'
import { findLastTip, tipCause } from '#db/queries/tip.ts'
import { listUnits } from '#db/queries/unit.ts'
import { requireRole } from '#lib/auth/permission.ts'
import { addDays, civilOf, weekdayOf } from '#lib/core/time/civil.ts'
import { refreshStale } from '#lib/evaluation/refresh-stale.server.ts'
import { formatDay } from '#lib/format.ts'
import { notFound } from '#lib/http/app-error.ts'
import { log, loggedError } from '#lib/log.server.ts'
import { queueMessage } from '#lib/mail/queue-message.server.ts'
import { isPressed } from './cautions.ts'
import { saysTheSame, tipOf } from './tip.ts'
import { tipLetter } from './tip-letter.server.ts'
import { type Landlord, landlordsOf } from './whom-to-call.server.ts'

export interface TipCounts {
  readonly due: number
  readonly queued: number
  readonly alreadyQueued: number
  /** Tenancies whose unit has no figures for its present records: they are told nothing. */
  readonly notCurrent: number
  readonly failed: number
}
export interface TipFor {
  readonly property: Property
  readonly landlords: readonly Landlord[]
  readonly tenancy: Tenancy
  readonly unitCode: string
  readonly record: HardwareRecord
  readonly flags: readonly Flag[]
  /** Of the day told about. */
  readonly evaluation: Evaluation
  /** The days after it that a weekly letter tells as well. */
  readonly later: readonly Evaluation[]
  readonly nowMs: number
}

/** A transaction holds the one connection and waits for the disk once. */
const TIPS_A_TRANSACTION = 50
const MONDAY = 0
const DAYS_IN_WEEK = 7

export async function sendTips(
  db: OrgDb,
  { propertyId, nowMs }: { readonly propertyId: PropertyId; readonly nowMs: number },
): Promise<TipCounts> {
  requireRole(db, ['landlord'], 'send tips')
  const property = await findProperty(db, propertyId)
  if (!property) throw notFound('property')
  const day = addDays(civilOf(nowMs, property.zone).day, 1)
  const untilDay = addDays(day, weekdayOf(day) === MONDAY ? DAYS_IN_WEEK : 1)
  const { hashes } = await refreshStale(db, { property, nowMs })
  const current = (await listEvaluations(db, propertyId, day, untilDay)).filter((one) => one.inputsHash === hashes.get(one.unitId))
  const evaluations = byUnit(current)
  const flags = byUnit(await listOpenFlags(db, { propertyId }))
  const hardware = await listCurrentHardware(db, propertyId)
  const codes = new Map((await listUnits(db, propertyId)).map((unit) => [unit.id, unit.code]))
  const landlords = await landlordsOf(db)
  const counts = { due: 0, queued: 0, alreadyQueued: 0, notCurrent: 0, failed: 0 }
  let batch: QueuedTip[] = []
  for (const tenancy of await listTenanciesOn(db, propertyId, day)) {
    try {
      const [evaluation, ...later] = ownDays(tenancy, evaluations.get(tenancy.unitId) ?? [])
      const record = hardware.get(tenancy.unitId)
      if (evaluation?.day !== day) counts.notCurrent++
      if (!record || evaluation?.day !== day || !(await isDue(db, { tenancy, evaluation, record }))) continue
      counts.due++
      const unit = { unitCode: codes.get(tenancy.unitId) ?? '', record, flags: flags.get(tenancy.unitId) ?? [] }
      const tip = { property, landlords, tenancy, ...unit, evaluation, later: tenancy.tips === 'weekly' ? later : [], nowMs }
      batch.push({ tip, letter: await tipLetter(tip, db.scope.organisationId) })
    } catch (error) {
      log.error({ tenancyId: tenancy.id, err: loggedError(error) }, 'a tip could not be written')
      counts.failed++
    }
    if (batch.length < TIPS_A_TRANSACTION) continue
    add(counts, await queueTips(db, batch))
    batch = []
  }
  add(counts, await queueTips(db, batch))
  return counts
}

type Queuing = Pick<TipCounts, 'queued' | 'alreadyQueued'>
const add = (counts: { -readonly [K in keyof Queuing]: number }, more: Queuing): void => {
  counts.queued += more.queued
  counts.alreadyQueued += more.alreadyQueued
}

function byUnit<T extends { readonly unitId: UnitId | null }>(rows: readonly T[]): ReadonlyMap<UnitId, readonly T[]> {
  const found = new Map<UnitId, T[]>()
  for (const row of rows) {
    if (row.unitId) found.set(row.unitId, [...(found.get(row.unitId) ?? []), row])
  }
  return found
}

/** A day after the tenancy's end is somebody else's. */
const ownDays = ({ toDay }: Tenancy, days: readonly Evaluation[]): readonly Evaluation[] =>
  days.filter(({ day }) => toDay === null || day < toDay)

interface DueCase {
  readonly tenancy: Tenancy
  readonly evaluation: Evaluation
  readonly record: HardwareRecord
}

async function isDue(db: OrgDb, { tenancy, evaluation, record }: DueCase): Promise<boolean> {
  if (evaluation.outcome.needs.length === 0) return false
  switch (tenancy.tips) {
    case 'daily':
      return true
    case 'weekly':
      return weekdayOf(evaluation.day) === MONDAY
    case 'on-change': {
      // What was told last is what counts, not yesterday's figures: those are computed again when the heater changes.
      const last = await findLastTip(db, tenancy, evaluation.day)
      if (!last) return true
      const again = tipOf({ evaluation, pressed: isPressed(record.installation), when: tomorrowWords(last.day) })
      return !saysTheSame(last.subject, again.subject)
    }
    case 'never':
      return false
  }
}

export const tomorrowWords = (day: string): string => `tomorrow, ${formatDay(day, 'EEEE')}`

interface QueuedTip {
  readonly tip: TipFor
  readonly letter: Awaited<ReturnType<typeof tipLetter>>
}

const queueTips = (db: OrgDb, tips: readonly QueuedTip[]): Promise<Queuing> =>
  inTransaction(db, async (trx) => {
    const counts = { queued: 0, alreadyQueued: 0 }
    for (const { tip, letter } of tips) {
      const { property, tenancy, evaluation, nowMs } = tip
      const queued = await queueMessage(trx, {
        propertyId: property.id,
        unitId: tenancy.unitId,
        personId: tenancy.personId,
        tenancyId: tenancy.id,
        toEmail: tenancy.email,
        kind: 'tip',
        cause: tipCause(tenancy.id, evaluation.day),
        ...letter,
        nowMs,
      })
      counts[queued === 'queued' ? 'queued' : 'alreadyQueued']++
    }
    return counts
  })
