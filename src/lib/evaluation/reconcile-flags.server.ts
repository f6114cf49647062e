/** Brings the open flags of some subjects in line with what was found: opens, refreshes, and closes what is no longer so. */
import { type FlagId, newId, type PropertyId, type UnitId } from '#db/ids.ts'
import type { OrgTrx } from '#db/org-db.ts'
import { addFlag, closeFlag, type Flag, refreshFlag } from '#db/queries/flag.ts'
import type { Finding } from './evidence.ts'

export interface FlagSubject {
  /** `null`: the property as a whole. */
  readonly unitId: UnitId | null
  readonly findings: readonly Finding[]
  /** Nothing is known about kinds that were not found: they stay as they are. */
  readonly keepOthers: boolean
}
export interface Reconciliation {
  readonly propertyId: PropertyId
  readonly subjects: readonly FlagSubject[]
  /** All open flags of these subjects; others are left alone. */
  readonly openFlags: readonly Flag[]
  /** Dismissals that still hold: what they dismissed is not opened again for that subject; another hazard of the same kind is. */
  readonly dismissals: readonly Flag[]
  readonly nowMs: number
}
export interface FlagChanges {
  readonly opened: number
  readonly refreshed: number
  readonly closed: number
}

export const CLOSED_NOTE = 'The computation no longer finds it.'

export async function reconcileFlags(
  trx: OrgTrx,
  { propertyId, subjects, openFlags, dismissals, nowMs }: Reconciliation,
): Promise<FlagChanges> {
  const key = (flag: { readonly unitId: UnitId | null; readonly kind: string }) => `${flag.unitId ?? ''} ${flag.kind}`
  const open = new Map(openFlags.map((flag) => [key(flag), flag]))
  const isDismissed = (unitId: UnitId | null, finding: Finding) =>
    dismissals.some((one) => key(one) === key({ unitId, kind: finding.kind }) && covers(one, finding))
  const changes = { opened: 0, refreshed: 0, closed: 0 }
  for (const { unitId, findings, keepOthers } of subjects) {
    const foundKinds = new Set(findings.map((finding) => finding.kind))
    for (const finding of findings) {
      const known = open.get(key({ unitId, kind: finding.kind }))
      if (known) {
        await refreshFlag(trx, known.id, { ...finding, seenAtMs: nowMs })
        changes.refreshed++
      } else if (!isDismissed(unitId, finding)) {
        await addFlag(trx, { id: newId<FlagId>(), propertyId, unitId, ...finding, openedAtMs: nowMs })
        changes.opened++
      }
    }
    if (keepOthers) continue
    for (const flag of openFlags.filter((one) => one.unitId === unitId && !foundKinds.has(one.kind))) {
      await closeFlag(trx, flag.id, { atMs: nowMs, because: 'computation', byPersonId: null, note: CLOSED_NOTE, untilDay: null })
      changes.closed++
    }
  }
  return changes
}

const WORSE: readonly Flag['severity'][] = ['attention', 'cold', 'dangerous']

/**
 * A dismissal covers what it was given for: no mark that it did not have, and nothing more severe. One from before flags had marks
 * says of nothing marked what it was given for, so the finding is raised again.
 */
const covers = (dismissed: Flag, { severity, evidence }: Finding): boolean =>
  WORSE.indexOf(severity) <= WORSE.indexOf(dismissed.severity) &&
  (evidence.marks ?? []).every((mark) => dismissed.evidence.marks?.includes(mark) ?? false)

export const addChanges = (one: FlagChanges, other: FlagChanges): FlagChanges => ({
  opened: one.opened + other.opened,
  refreshed: one.refreshed + other.refreshed,
  closed: one.closed + other.closed,
})
