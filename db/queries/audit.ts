/** Writes audit entries: one for every change a person makes. */
import { newId } from '../ids.ts'
import { toJson } from '../json.ts'
import type { OrgTrx } from '../org-db.ts'

export interface AuditChange {
  readonly atMs: number
  readonly action: string
  readonly subjectKind: string
  readonly subjectId: string
  readonly before?: unknown
  readonly after?: unknown
}

export async function addAudit(db: OrgTrx, change: AuditChange): Promise<void> {
  const { actor } = db.scope
  await db
    .insertInto('audit_entry', {
      id: newId<string>(),
      at_ms: change.atMs,
      person_id: actor.kind === 'person' ? actor.personId : null,
      action: change.action,
      subject_kind: change.subjectKind,
      subject_id: change.subjectId,
      before: change.before === undefined ? null : toJson(change.before),
      after: change.after === undefined ? null : toJson(change.after),
    })
    .execute()
}
