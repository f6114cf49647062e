/** Sends an electrician to a unit for its open flags: the visit, the audit and the mail in one transaction. */
import { type FlagId, parseFlagId, parsePersonId, parseUnitId, type VisitId } from '#db/ids.ts'
import { inTransaction, type OrgDb, type OrgTrx } from '#db/org-db.ts'
import { addAudit } from '#db/queries/audit.ts'
import { type Flag, findFlag, listPlannedVisits } from '#db/queries/flag.ts'
import { hasAccess, listMembers } from '#db/queries/organisation.ts'
import { findProperty } from '#db/queries/property.ts'
import { findUnit, type Unit } from '#db/queries/unit.ts'
import { addVisit, listVisitsOfProperty, type VisitProposal } from '#db/queries/visit.ts'
import { actingPerson, requireRole } from '#lib/auth/permission.ts'
import { processConfig } from '#lib/config.server.ts'
import { isClockCause } from '#lib/clock-round/round.ts'
import { MAINS_CAUTION } from '#lib/core/hardware/verdict.ts'
import { formatDay } from '#lib/format.ts'
import { AppError, invalid, notFound } from '#lib/http/app-error.ts'
import { parseInput } from '#lib/http/parse.ts'
import { letter } from '#lib/mail/letter.ts'
import { queueMessage } from '#lib/mail/queue-message.server.ts'
import { assignSchema } from './schemas.ts'

export interface AssignVisit {
  readonly input: unknown
  readonly organisationSlug: string
  readonly nowMs: number
}

export async function assignVisit(db: OrgDb, { input, organisationSlug, nowMs }: AssignVisit): Promise<VisitId> {
  requireRole(db, ['landlord'], 'send an electrician')
  const fields = parseInput(assignSchema, input)
  const unitId = parseUnitId(fields.unitId)
  const electricianId = parsePersonId(fields.electricianId)
  if (!unitId) throw notFound('unit')
  if (!electricianId) throw notFound('electrician')
  return inTransaction(db, async (trx) => {
    const unit = await findUnit(trx, unitId)
    const property = unit && (await findProperty(trx, unit.propertyId))
    if (!unit || !property) throw notFound('unit')
    const electrician = (await listMembers(trx)).find((member) => member.personId === electricianId && member.role === 'electrician')
    if (!electrician || !(await hasAccess(trx, { personId: electricianId, propertyId: property.id, role: 'electrician' })))
      throw notFound('electrician at this property')
    const flags = await openFlags(trx, fields.flagIds.map(parseFlagId), unitId)
    const planned = new Set((await listPlannedVisits(trx, property.id)).map((visit) => visit.flagId))
    if (flags.some((flag) => planned.has(flag.id)))
      throw new AppError('conflict', 'A visit is planned for this flag already. Nobody was told twice.')
    if (flags.some((flag) => flag.kind === 'clock-is-off') && (await clockVisitPlanned(trx, unit)))
      throw new AppError('conflict', 'A visit of the clock round is planned for this switch already. Nobody was told twice.')
    const proposal = proposalOf(flags)
    const dueDay = fields.dueDay || null
    const visitId = await addVisit(trx, {
      propertyId: property.id,
      unitId,
      flagIds: flags.map((flag) => flag.id),
      electricianId,
      dueDay,
      note: fields.note,
      proposal,
      createdBy: actingPerson(db),
      createdAtMs: nowMs,
    })
    const { text, html } = letter({
      title: `${unit.code}, ${property.name}${dueDay ? `, by ${formatDay(dueDay)}` : ''}`,
      paragraphs: [
        ...proposal.findings,
        ...(proposal.changes.length > 0 ? [`What would fix it: ${proposal.changes.join(' Or: ')}`] : []),
        ...(fields.note ? [`Note: ${fields.note}`] : []),
        property.address,
      ],
      actions: [{ label: 'Open the visit', url: `${processConfig().baseUrl}/o/${organisationSlug}/visits/${visitId}` }],
      footer: [MAINS_CAUTION, 'Never bypass a thermostat, high-limit or relief valve. Dwellhour screens; it does not certify.'],
    })
    await queueMessage(trx, {
      propertyId: property.id,
      unitId,
      personId: electricianId,
      toEmail: electrician.email,
      kind: 'visit-assigned',
      cause: visitId,
      subject: `Visit ${unit.code} at ${property.name}${dueDay ? ` by ${formatDay(dueDay)}` : ''}: ${flags[0]?.summary ?? ''}`.slice(
        0,
        150,
      ),
      text,
      html,
      nowMs,
    })
    await addAudit(trx, {
      atMs: nowMs,
      action: 'assign',
      subjectKind: 'visit',
      subjectId: visitId,
      after: { unitId, electricianId, dueDay },
    })
    return visitId
  })
}

/** A visit of a clock round carries no flag, and sets the same clock. */
const clockVisitPlanned = async (trx: OrgTrx, { id, propertyId }: Unit): Promise<boolean> =>
  (await listVisitsOfProperty(trx, propertyId)).some(
    (visit) => visit.unitId === id && visit.state === 'planned' && isClockCause(visit.proposal.cause),
  )

async function openFlags(trx: OrgTrx, ids: readonly (FlagId | null)[], unitId: string): Promise<readonly Flag[]> {
  const flags: Flag[] = []
  for (const id of ids) {
    const flag = id && (await findFlag(trx, id))
    if (!flag || flag.unitId !== unitId) throw notFound('flag of this unit')
    if (flag.closed) throw invalid([{ field: 'flagIds', message: 'This flag has closed meanwhile: nothing is left to do for it.' }])
    flags.push(flag)
  }
  return flags
}

/** Findings, their numbers and what would fix them as they stand in the flags, so that the electrician reads what the landlord read. */
const proposalOf = (flags: readonly Flag[]): VisitProposal => ({
  findings: flags.map((flag) => flag.summary),
  changes: flags.flatMap((flag) =>
    flag.evidence.lines.filter((line) => line.kind === 'fix').map((line) => `${line.label}: ${line.value}.`),
  ),
  evidence: flags.map((flag) => ({ summary: flag.summary, lines: flag.evidence.lines })),
})
