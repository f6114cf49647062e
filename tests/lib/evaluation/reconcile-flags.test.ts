/** A dismissal holds for what it was given for, and for nothing else of the same kind. */
import { beforeEach, describe, expect, it } from 'vitest'
import type { PropertyId, UnitId } from '#db/ids.ts'
import { inTransaction, type OrgDb } from '#db/org-db.ts'
import { closeFlag, type FlagSeverity, listOpenFlags, listStandingDismissals } from '#db/queries/flag.ts'
import { DEMO_BUILDINGS } from '#lib/demo/buildings.ts'
import type { Finding } from '#lib/evaluation/evidence.ts'
import { reconcileFlags } from '#lib/evaluation/reconcile-flags.server.ts'
import { makeBuilding } from '../../support/building.ts'
import { freshDatabase } from '../../support/database.ts'
import { makeLandlord, NOW_MS } from '../../support/factories.ts'

let db: OrgDb
let propertyId: PropertyId
let unitId: UnitId
beforeEach(async () => {
  db = await makeLandlord(await freshDatabase())
  const building = DEMO_BUILDINGS[0]!
  const made = await makeBuilding(db, { ...building, units: building.units.slice(0, 1) })
  propertyId = made.propertyId
  unitId = [...made.units.values()][0]!.unitId
})

const fails = (marks: readonly string[], severity: FlagSeverity = 'attention'): Finding => ({
  kind: 'hardware-fails',
  severity,
  summary: `fails ${marks.join(', ')}`,
  evidence: { shortfallMin: null, day: null, lines: [], marks },
})
const reconcile = (finding: Finding) =>
  inTransaction(db, async (trx) =>
    reconcileFlags(trx, {
      propertyId,
      subjects: [{ unitId, findings: [finding], keepOthers: false }],
      openFlags: await listOpenFlags(trx, { unitId }),
      dismissals: await listStandingDismissals(trx, propertyId, '2026-12-02'),
      nowMs: NOW_MS,
    }),
  )
const dismiss = async () => {
  const [flag] = await listOpenFlags(db, { unitId })
  await inTransaction(db, (trx) =>
    closeFlag(trx, flag!.id, { atMs: NOW_MS, because: 'dismissed', byPersonId: null, note: 'known', untilDay: '2026-12-20' }),
  )
}

describe('reconcileFlags', () => {
  it('does not open again what was dismissed, nor a part of it', async () => {
    await reconcile(fails(['contact-rating', 'isolator']))
    await dismiss()
    expect((await reconcile(fails(['contact-rating', 'isolator']))).opened).toBe(0)
    expect((await reconcile(fails(['isolator']))).opened).toBe(0)
  })
  it('opens another hazard of the same kind in spite of the dismissal', async () => {
    await reconcile(fails(['isolator']))
    await dismiss()
    expect((await reconcile(fails(['isolator', 'relief-valve']))).opened).toBe(1)
  })
  it('opens what has become more severe', async () => {
    await reconcile(fails(['isolator']))
    await dismiss()
    expect((await reconcile(fails(['isolator'], 'dangerous'))).opened).toBe(1)
  })
  it('opens a marked finding in spite of a dismissal from before flags had marks, which cannot say what it was given for', async () => {
    const unmarked = { shortfallMin: null, day: null, lines: [] }
    await reconcile({ ...fails(['isolator']), evidence: unmarked })
    await dismiss()
    expect((await reconcile(fails(['isolator']))).opened).toBe(1)
  })
})
