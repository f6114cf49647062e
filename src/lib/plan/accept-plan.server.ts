/**
 * Accepts a plan: its starts, the runs, the audit and the letters to those who have to change, in one transaction. Everything is
 * checked again against the records as they are; whoever has not seen the newest of them is told what changed, and nothing is written.
 */
import type { PropertyId } from '#db/ids.ts'
import { inTransaction, type OrgDb, type OrgTrx } from '#db/org-db.ts'
import { findOrganisationSlug } from '#db/queries/address.ts'
import { addAudit } from '#db/queries/audit.ts'
import { addPlan, type PlanFigures, type PlanStart } from '#db/queries/plan.ts'
import { findProperty, type Property } from '#db/queries/property.ts'
import { moveExpectedRun } from '#db/queries/run.ts'
import { actingPerson, requireRole } from '#lib/auth/permission.ts'
import type { PlannedRun } from '#lib/core/plan/types.ts'
import { refreshStale } from '#lib/evaluation/refresh-stale.server.ts'
import { invalid, notFound } from '#lib/http/app-error.ts'
import { parseInput } from '#lib/http/parse.ts'
import { landlordsOf } from '#lib/tip/whom-to-call.server.ts'
import { type Figures, figuresOf, type Moved, movedRuns, passesMore } from './compare.ts'
import { byTenancy, type Gathered, gatherPlan } from './gather-plan.server.ts'
import { movedOn } from './moved-on.server.ts'
import { queueAccepted } from './plan-letter.server.ts'
import { type AcceptPlanInput, acceptPlanSchema } from './schemas.ts'
import { slotAt, slotFrom, todayStarts } from './types.ts'
import { instantWords, refusals } from './words.ts'

export interface AcceptPlan {
  readonly propertyId: PropertyId
  readonly input: unknown
  readonly nowMs: number
}

export async function acceptPlan(
  db: OrgDb,
  { propertyId, input, nowMs }: AcceptPlan,
): Promise<{ readonly number: number; readonly changed: number; readonly told: number }> {
  requireRole(db, ['landlord'], 'accept plans')
  const wanted = parseInput(acceptPlanSchema, input)
  const known = await findProperty(db, propertyId)
  if (!known) throw notFound('property')
  await refreshStale(db, { property: known, nowMs })
  return inTransaction(db, async (trx) => {
    const property = await findProperty(trx, propertyId)
    if (!property) throw notFound('property')
    const gathered = await gatherPlan(trx, { property, fromDay: wanted.from, toDay: wanted.to, nowMs })
    const conflict = await movedOn(trx, { property, gathered, wanted })
    if (conflict) throw conflict
    const { moved, before, after } = checked(gathered, wanted, property)
    const starts = startsOf(gathered, moved)
    const changed = starts.filter(({ startsAtMs, beforeAtMs }) => startsAtMs !== beforeAtMs)
    const number = gathered.plans.length + 1
    const figures = storedFigures(before, after)
    const fields = { propertyId, number, fromDay: wanted.from, toDay: wanted.to, figures }
    const planId = await addPlan(trx, { ...fields, acceptedAtMs: nowMs, acceptedBy: actingPerson(trx) }, starts)
    for (const start of changed) await moveExpectedRun(trx, start, start.startsAtMs)
    const told = await tell(trx, { gathered, property, planId, starts: changed, nowMs })
    const summary = { number, fromDay: wanted.from, toDay: wanted.to, changed: changed.length, told, ...figures }
    await addAudit(trx, { atMs: nowMs, action: 'accept', subjectKind: 'plan', subjectId: planId, after: summary })
    return { number, changed: changed.length, told }
  })
}

interface Checked {
  readonly moved: readonly Moved[]
  readonly before: Figures
  readonly after: Figures
}

/** The client's figures are never taken: the starts are laid on the current problem and evaluated here. */
function checked({ question }: Gathered, { starts }: AcceptPlanInput, property: Property): Checked {
  const { grid } = question
  const runs = new Map(question.runs.map((run) => [run.id, run]))
  const planned = starts.map(({ id, startsAtMs }): PlannedRun => {
    const run = runs.get(id)
    const isOnGrid = run?.todayMs === startsAtMs || slotAt(grid, startsAtMs) === slotFrom(grid, startsAtMs)
    // Off the grid it is no start that was ever offered.
    return { runId: id, startSlot: isOnGrid ? slotAt(grid, startsAtMs) : -1 }
  })
  const moved = movedRuns(question, planned)
  const before = figuresOf(question, todayStarts(question))
  const after = figuresOf(question, planned)
  const movedIds = new Set(moved.map(({ run }) => run.id))
  // A start that stands already may break a rule; it is not this plan that breaks it.
  const refused = after.notAllowed.filter((id) => movedIds.has(id)).flatMap((id) => moved.filter(({ run }) => run.id === id))
  if (refused.length > 0) throw invalid(refusals(refused, property.zone).map((message) => ({ field: 'starts', message })))
  if (moved.length === 0) throw invalid([{ field: 'starts', message: 'Nobody’s start changes: there is nothing to accept.' }])
  if (passesMore(before, after)) {
    const peak = `${after.peakKw.toFixed(1)} kW at ${instantWords(grid.originMs + after.peakSlot * grid.slotMin * 60_000, property.zone)}`
    throw invalid([
      { field: 'starts', message: `These starts reach ${peak}, over the limit of ${after.limitKw.toFixed(1)} kW. Move one of them away.` },
    ])
  }
  return { moved, before, after }
}

const storedFigures = (before: Figures, after: Figures): PlanFigures => ({
  beforeCostMinor: before.costMinor === null ? null : Math.round(before.costMinor),
  costMinor: after.costMinor === null ? null : Math.round(after.costMinor),
  beforePeakKw: before.peakKw,
  peakKw: after.peakKw,
  limitKw: after.limitKw,
})

/**
 * Those that keep their start agree to it as well: the model would move them by minutes with every change of their unit's day. A run
 * that may be moved has somebody to tell, or it would not be one.
 */
function startsOf({ question, tenancyOn }: Gathered, moved: readonly Moved[]): readonly PlanStart[] {
  const movedTo = new Map(moved.map(({ run, startsAtMs }) => [run.id, startsAtMs]))
  return question.runs.flatMap(({ id, unitId, day, readyByAtMs, todayMs }): PlanStart[] => {
    const tenancy = tenancyOn(unitId, day)
    return tenancy ? [{ unitId, tenancyId: tenancy.id, day, readyByAtMs, startsAtMs: movedTo.get(id) ?? todayMs, beforeAtMs: todayMs }] : []
  })
}

interface Told {
  readonly gathered: Gathered
  readonly property: Property
  readonly planId: Parameters<typeof queueAccepted>[1]['planId']
  readonly starts: readonly PlanStart[]
  readonly nowMs: number
}

async function tell(trx: OrgTrx, { gathered, property, planId, starts, nowMs }: Told): Promise<number> {
  const slug = (await findOrganisationSlug(trx, property.id)) ?? ''
  const landlords = await landlordsOf(trx)
  const codes = new Map(gathered.question.runs.map((run) => [run.unitId, run.code]))
  const concerned = byTenancy(starts)
  for (const own of concerned.values()) {
    const [first] = own
    const tenancy = first && gathered.tenancyOn(first.unitId, first.day)
    if (!tenancy) continue
    const unitCode = codes.get(tenancy.unitId) ?? ''
    await queueAccepted(trx, { property, slug, landlords, planId, tenancy, unitCode, starts: own, nowMs })
  }
  return concerned.size
}
