/** Dismisses an open flag with a reason, until a day: until then the computation does not open it again. */
import { parseFlagId } from '#db/ids.ts'
import { inTransaction, type OrgDb } from '#db/org-db.ts'
import { addAudit } from '#db/queries/audit.ts'
import { closeFlag, findFlag } from '#db/queries/flag.ts'
import { findProperty } from '#db/queries/property.ts'
import { actingPerson, requireRole } from '#lib/auth/permission.ts'
import { addDays, civilOf } from '#lib/core/time/civil.ts'
import { AppError, invalid, notFound } from '#lib/http/app-error.ts'
import { parseInput } from '#lib/http/parse.ts'
import { DISMISSAL_DAYS, dismissSchema } from './schemas.ts'

export async function dismissFlag(db: OrgDb, { input, nowMs }: { readonly input: unknown; readonly nowMs: number }): Promise<void> {
  requireRole(db, ['landlord'], 'dismiss a flag')
  const { flagId, reason, untilDay } = parseInput(dismissSchema, input)
  const id = parseFlagId(flagId)
  await inTransaction(db, async (trx) => {
    const flag = id && (await findFlag(trx, id))
    const property = flag && (await findProperty(trx, flag.propertyId))
    if (!flag || !property) throw notFound('flag')
    if (flag.closed) throw new AppError('conflict', 'This flag is closed already. Nothing was changed; load the page again.')
    const today = civilOf(nowMs, property.zone).day
    const days = flag.severity === 'dangerous' ? DISMISSAL_DAYS.dangerous : DISMISSAL_DAYS.usual
    const lastDay = addDays(today, days)
    if (untilDay <= today) throw invalid([{ field: 'untilDay', message: `Choose a day after today, ${today}.` }])
    if (untilDay > lastDay) {
      const why = flag.severity === 'dangerous' ? 'A hazard' : 'A flag'
      throw invalid([{ field: 'untilDay', message: `${why} is dismissed for at most ${days} days: until ${lastDay}.` }])
    }
    await closeFlag(trx, flag.id, { atMs: nowMs, because: 'dismissed', byPersonId: actingPerson(trx), note: reason, untilDay })
    await addAudit(trx, {
      atMs: nowMs,
      action: 'flag.dismiss',
      subjectKind: 'flag',
      subjectId: flag.id,
      before: { kind: flag.kind, summary: flag.summary },
      after: { reason, untilDay },
    })
  })
}
