/** Signs a visit off: the hardware as left becomes a revision, the landlord is told, the unit is evaluated at once. Sent twice, done once. */
import { inTransaction, type OrgDb } from '#db/org-db.ts'
import { addAudit } from '#db/queries/audit.ts'
import { listMembers } from '#db/queries/organisation.ts'
import { completeVisit } from '#db/queries/visit.ts'
import { actingPerson } from '#lib/auth/permission.ts'
import { processConfig } from '#lib/config.server.ts'
import { evaluateUnit, type UnitEvaluation } from '#lib/evaluation/evaluate-unit.server.ts'
import { AppError } from '#lib/http/app-error.ts'
import { writeRevision } from '#lib/hardware/record-hardware.server.ts'
import { letter } from '#lib/mail/letter.ts'
import { queueMessage } from '#lib/mail/queue-message.server.ts'
import { openVisit } from './open-visit.server.ts'

export interface SignOff {
  readonly visitId: unknown
  readonly input: unknown
  readonly organisationSlug: string
  readonly nowMs: number
}

export async function signOffVisit(
  db: OrgDb,
  { visitId, input, organisationSlug, nowMs }: SignOff,
): Promise<{ readonly revision: number; readonly evaluation: UnitEvaluation }> {
  const visit = await openVisit(db, visitId)
  const revision = await inTransaction(db, async (trx) => {
    const written = await writeRevision(trx, { unitId: visit.unitId, input, visitId: visit.id, nowMs })
    if (!(await completeVisit(trx, visit.id, { doneBy: actingPerson(db), doneAtMs: nowMs, report: input }))) {
      throw new AppError('conflict', 'This visit has been signed off already. Nothing was recorded twice.')
    }
    const members = await listMembers(trx)
    const electrician = members.find((member) => member.personId === actingPerson(db))
    const { text, html } = letter({
      title: `${visit.unitCode} is done.`,
      paragraphs: [
        `${electrician?.name ?? 'The electrician'} has signed off the visit at ${visit.unitCode}, ${visit.propertyName}, and recorded revision ${written.revision}. The unit is evaluated again; a flag that is no longer found closes by itself.`,
      ],
      actions: [
        {
          label: 'See the unit',
          url: `${processConfig().baseUrl}/o/${organisationSlug}/p/${visit.propertySlug}/units/${encodeURIComponent(visit.unitCode)}`,
        },
      ],
      footer: ['You get this because you run this building.'],
    })
    for (const landlord of members.filter((member) => member.role === 'landlord')) {
      await queueMessage(trx, {
        propertyId: visit.propertyId,
        unitId: visit.unitId,
        personId: landlord.personId,
        toEmail: landlord.email,
        kind: 'visit-done',
        cause: visit.id,
        subject: `Read what was done at ${visit.unitCode}, ${visit.propertyName}: the visit is signed off`,
        text,
        html,
        nowMs,
      })
    }
    await addAudit(trx, {
      atMs: nowMs,
      action: 'sign-off',
      subjectKind: 'visit',
      subjectId: visit.id,
      after: { revision: written.revision },
    })
    return written.revision
  })
  return { revision, evaluation: await evaluateUnit(db, { unitId: visit.unitId, nowMs }) }
}
