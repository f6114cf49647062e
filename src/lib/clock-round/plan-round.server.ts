/** Plans the visits of a clock change: one a unit and change however often it is sent, one letter with all of them, in one transaction. */
import { type FlagId, parsePersonId, type VisitId } from '#db/ids.ts'
import { inTransaction, type OrgDb, type OrgTrx } from '#db/org-db.ts'
import { addAudit } from '#db/queries/audit.ts'
import { listOpenFlags, listPlannedVisits } from '#db/queries/flag.ts'
import { findPropertyBySlug, type Property } from '#db/queries/property.ts'
import { addVisit, listVisitsOfProperty } from '#db/queries/visit.ts'
import { actingPerson, requireRole } from '#lib/auth/permission.ts'
import { AppError, notFound } from '#lib/http/app-error.ts'
import { parseInput } from '#lib/http/parse.ts'
import { queueMessage } from '#lib/mail/queue-message.server.ts'
import { type Electrician, electriciansOf } from '#lib/visit/electricians-of.server.ts'
import { roundUnits, visitsFor } from './load-round.server.ts'
import { causeOf, type Round, type RoundVisit, roundsOf } from './round.ts'
import { type PlannedVisit, roundLetter } from './round-letter.server.ts'
import { planRoundSchema } from './schemas.ts'
import { changeDay, changeWords, meansWords, offWords, taskWords } from './view.ts'

export interface PlanRound {
  readonly input: unknown
  readonly organisationSlug: string
  readonly nowMs: number
}
export interface PlannedRound {
  readonly planned: number
  /** Units of the round that had their visit already. */
  readonly already: number
}

export async function planRound(db: OrgDb, { input, organisationSlug, nowMs }: PlanRound): Promise<PlannedRound> {
  requireRole(db, ['landlord'], 'send an electrician')
  const fields = parseInput(planRoundSchema, input)
  const electricianId = parsePersonId(fields.electricianId)
  return inTransaction(db, async (trx) => {
    const property = await findPropertyBySlug(trx, fields.property)
    if (!property) throw notFound('property')
    const electrician = (await electriciansOf(trx, property.id)).find((one) => one.personId === electricianId)
    if (!electrician) throw notFound('electrician at this property')
    const rounds = roundsOf((await roundUnits(trx, property)).units, { zone: property.zone, nowMs })
    const round = rounds.find((one) => one.change.atMs === fields.changeAtMs)
    if (!round)
      throw new AppError('conflict', 'This clock change is not one of the next two any more. Nothing was planned: reload the page.')
    const { open, already } = await stillToPlan(trx, property, round)
    const planned: PlannedVisit[] = []
    for (const one of open) planned.push({ visit: one.visit, visitId: await planOne(trx, { ...one, property, round, electrician, nowMs }) })
    const [first] = planned
    if (first) {
      const letter = roundLetter({ property, round, planned, organisationSlug })
      await queueMessage(trx, {
        propertyId: property.id,
        unitId: null,
        personId: electrician.personId,
        toEmail: electrician.email,
        kind: 'visit-assigned',
        cause: first.visitId,
        ...letter,
        nowMs,
      })
    }
    return { planned: planned.length, already }
  })
}

/** Who still needs a visit, with the open flag it answers too. A planned visit for that flag on or after the day does for both. */
async function stillToPlan(
  trx: OrgTrx,
  property: Property,
  round: Round,
): Promise<{ readonly open: readonly OpenVisit[]; readonly already: number }> {
  const ofCause = visitsFor(await listVisitsOfProperty(trx, property.id), causeOf(round.change))
  const flags = new Map(
    (await listOpenFlags(trx, { propertyId: property.id }))
      .filter((flag) => flag.kind === 'clock-is-off')
      .map((flag) => [flag.unitId, flag.id]),
  )
  const ofFlag = new Map((await listPlannedVisits(trx, property.id)).map((visit) => [visit.flagId, visit]))
  const open: OpenVisit[] = []
  for (const visit of round.visits) {
    const flagId = flags.get(visit.unit.unitId) ?? null
    const other = flagId && ofFlag.get(flagId)
    const fromDay = visit.side === 'before' ? visit.dueDay : changeDay(round.change, property.zone)
    if (ofCause.has(visit.unit.unitId) || (other?.dueDay && other.dueDay >= fromDay)) continue
    open.push({ visit, flagIds: flagId && !other ? [flagId] : [] })
  }
  return { open, already: round.visits.length - open.length }
}

interface OpenVisit {
  readonly visit: RoundVisit
  readonly flagIds: readonly FlagId[]
}

interface OneVisit extends OpenVisit {
  readonly property: Property
  readonly round: Round
  readonly electrician: Electrician
  readonly nowMs: number
}

async function planOne(trx: OrgTrx, { property, round, visit, flagIds, electrician, nowMs }: OneVisit): Promise<VisitId> {
  const { unit, aheadMin, dueDay } = visit
  const createdBy = actingPerson(trx)
  const visitId = await addVisit(trx, {
    propertyId: property.id,
    unitId: unit.unitId,
    flagIds,
    electricianId: electrician.personId,
    dueDay,
    note: '',
    proposal: {
      cause: causeOf(round.change),
      findings: [
        `Clock change on ${changeWords(round.change, property.zone)}. Its switch does not follow and then runs ${offWords(aheadMin)}: ${meansWords(aheadMin)}`,
      ],
      changes: [taskWords(visit, round.change, property.zone)],
    },
    createdBy,
    createdAtMs: nowMs,
  })
  await addAudit(trx, {
    atMs: nowMs,
    action: 'assign',
    subjectKind: 'visit',
    subjectId: visitId,
    after: { unitId: unit.unitId, electricianId: electrician.personId, dueDay },
  })
  return visitId
}
