/** Drafting, accepting and undoing plans through the product's own verbs, on a real database. */
import { beforeEach, describe, expect, it } from 'vitest'
import { findEvaluation } from '#db/queries/evaluation.ts'
import { findProperty } from '#db/queries/property.ts'
import { inTransaction } from '#db/org-db.ts'
import { addPreference } from '#db/queries/preference.ts'
import { planRuns } from '#lib/core/plan/plan-runs.ts'
import { refreshStale } from '#lib/evaluation/refresh-stale.server.ts'
import { acceptPlan } from '#lib/plan/accept-plan.server.ts'
import { everyStart, figuresOf, movedRuns } from '#lib/plan/compare.ts'
import { draftPlan, type PlanDraft } from '#lib/plan/draft-plan.server.ts'
import { startMsOf, todayStarts } from '#lib/plan/types.ts'
import { undoPlan } from '#lib/plan/undo-plan.server.ts'
import { at, shower, week } from '#lib/demo/weeks.ts'
import { changeWords } from '#lib/plan/words.ts'
import { tipOf } from '#lib/tip/tip.ts'
import { NOW_MS } from '../../support/factories.ts'
import { asSent } from '../../support/outbox.ts'
import { makeWorld, unitOf, WARM, type World } from '../../support/world.ts'

/** Friday: in this building everybody wants the same hour, and one mains carries them all. */
const FRIDAY = { from: '2026-12-04', to: '2026-12-05' }
let world: World
beforeEach(async () => {
  world = await makeWorld()
})
const draft = (input: unknown = FRIDAY, over: { db?: World['landlord']; nowMs?: number } = {}) =>
  draftPlan(over.db ?? world.landlord, { propertyId: world.building.propertyId, input, nowMs: over.nowMs ?? NOW_MS })
const accept = (input: unknown, over: { db?: World['landlord']; nowMs?: number } = {}) =>
  acceptPlan(over.db ?? world.landlord, { propertyId: world.building.propertyId, input, nowMs: over.nowMs ?? NOW_MS })
const undo = (number: number, over: { db?: World['landlord']; nowMs?: number } = {}) =>
  undoPlan(over.db ?? world.landlord, { propertyId: world.building.propertyId, input: { number }, nowMs: over.nowMs ?? NOW_MS + 1_000 })

/** The planner's starts as a page would send them. */
function asked(question: PlanDraft, starts = plannedStarts(question)) {
  const slots = new Map(starts.map(({ runId, startSlot }) => [runId, startSlot]))
  return {
    from: question.fromDay,
    to: question.toDay,
    revision: question.revision,
    starts: question.runs.map((run) => ({
      id: run.id,
      seenMs: run.todayMs,
      startsAtMs: startMsOf(question.grid, run, slots.get(run.id) ?? -1),
    })),
  }
}
function plannedStarts(question: PlanDraft) {
  const outcome = planRuns(question.problem, { seed: 1, targetGapFraction: 0.001, effort: 1 })
  if (outcome.status !== 'planned') throw new Error(outcome.faults.map(({ where, message }) => `${where} ${message}`).join('; '))
  return everyStart(question, outcome.starts)
}
const runRows = () =>
  world.db
    .selectFrom('run')
    .select(['unit_id', 'day', 'starts_at_ms', 'ends_at_ms', 'longest_ends_at_ms'])
    .orderBy('unit_id')
    .orderBy('day')
    .orderBy('starts_at_ms')
    .execute()
const letters = async () =>
  (await world.db.selectFrom('message').where('kind', '=', 'schedule-changed').selectAll().orderBy('to_email').execute()).map((row) => ({
    ...row,
    ...asSent(row),
  }))
const evaluatedNow = async (nowMs = NOW_MS) =>
  refreshStale(world.landlord, { property: (await findProperty(world.landlord, world.building.propertyId))!, nowMs })

describe('draftPlan', () => {
  it('is a problem that the planner takes, with today’s starts inside their own windows and the peak over the limit', async () => {
    const question = await draft()
    expect(question.runs.length).toBeGreaterThan(3)
    const today = figuresOf(question, todayStarts(question))
    expect(today.notAllowed).toEqual([])
    expect(today.peakKw).toBeGreaterThan(today.limitKw)
    expect(question.problem.limits[0]?.limitKw).toBeCloseTo(23, 6) // 100 A, 230 V, one phase: BS 7671 sets no factor on continuous loads
  })
  it('leaves clocks, timers that may never stop and tenants without letters where they are, and says why', async () => {
    await world.db.updateTable('tenancy').set({ tips: 'never' }).where('id', '=', unitOf(world, WARM).tenancyId).execute()
    const { fixed, runs } = await draft()
    expect(new Set(fixed.filter(({ code }) => code === 'Flat 3').map(({ why }) => why))).toEqual(new Set(['switch']))
    expect(fixed.find(({ code }) => code === WARM)?.why).toBe('no-letters')
    expect(runs.map(({ code }) => code)).not.toContain(WARM)
  })
  it('keeps a pressed run to the hours in which its tenant is willing', async () => {
    const { tenancyId } = unitOf(world, WARM)
    const friday = [shower(at(19))]
    const asWanted = week({ weekdays: [], weekend: [], friday })
    await inTransaction(world.landlord, (trx) =>
      addPreference(trx, {
        tenancyId,
        week: asWanted,
        willing: [{ fromMinuteOfDay: at(16, 50), toMinuteOfDay: at(22) }],
        setBy: null,
        setAtMs: NOW_MS,
      }),
    )
    const question = await draft()
    const run = question.runs.find(({ code, readyByAtMs }) => code === WARM && readyByAtMs === Date.UTC(2026, 11, 4, 19))!
    const planned = plannedStarts(question).find(({ runId }) => runId === run.id)!
    expect(startMsOf(question.grid, run, planned.startSlot)).toBeGreaterThanOrEqual(Date.UTC(2026, 11, 4, 16, 50))
  })
  it("answers not found for another organisation's property, forbids other roles, and plans no day that is past or not computed", async () => {
    await expect(draft(FRIDAY, { db: world.stranger })).rejects.toMatchObject({ code: 'not-found' })
    for (const db of [world.tenant, world.electrician, world.owner])
      await expect(draft(FRIDAY, { db })).rejects.toMatchObject({ code: 'forbidden' })
    for (const days of [
      { from: '2026-12-01', to: '2026-12-02' },
      { from: '2026-12-08', to: '2026-12-10' },
      { from: '2026-12-05', to: '2026-12-05' },
    ])
      await expect(draft(days)).rejects.toMatchObject({ code: 'invalid' })
  })
})

describe('acceptPlan', () => {
  it('moves the runs, queues one letter for each who has to change and writes the audit, together', async () => {
    const question = await draft()
    const starts = plannedStarts(question)
    const moved = movedRuns(question, starts)
    expect(moved.length).toBeGreaterThan(0)
    await expect(accept(asked(question, starts))).resolves.toMatchObject({ number: 1, changed: moved.length })
    const rows = await runRows()
    for (const { run, startsAtMs } of moved)
      expect(rows.some((row) => row.unit_id === run.unitId && row.starts_at_ms === startsAtMs)).toBe(true)
    expect((await letters()).map(({ to_email }) => to_email)).toEqual(
      [...new Set(moved.map(({ run }) => `${run.code.toLowerCase().replace(' ', '-')}@tenants.example`))].sort(),
    )
    const [letter] = await letters()
    expect(letter?.text).toMatch(/press at \d\d:\d\d, not \d\d:\d\d/)
    expect(letter?.text).toContain('hot water is never withheld')
    expect(letter?.headers['List-Unsubscribe-Post']).toBe('List-Unsubscribe=One-Click')
    const audit = await world.db.selectFrom('audit_entry').where('subject_kind', '=', 'plan').selectAll().execute()
    expect(audit.map(({ action }) => action)).toEqual(['accept'])
  })
  it('brings the building under its limit: computed anew, the runs are where the plan has them and nobody is colder', async () => {
    const question = await draft()
    const cold = new Set(question.coldUnits)
    const starts = plannedStarts(question)
    await accept(asked(question, starts))
    const planned = await runRows()
    await evaluatedNow()
    expect(await runRows()).toEqual(planned)
    const after = await draft()
    expect(new Set(after.coldUnits)).toEqual(cold)
    const figures = figuresOf(after, todayStarts(after))
    expect(figures.peakKw).toBeLessThanOrEqual(figures.limitKw)
  })
  it('is what the next evaluation and the tenant’s tip say', async () => {
    const question = await draft({ from: '2026-12-02', to: '2026-12-03' })
    const run = question.runs.find(({ code }) => code === WARM)!
    const earlier = todayStarts(question).map((start) => (start.runId === run.id ? { ...start, startSlot: start.startSlot - 2 } : start))
    await accept(asked(question, earlier))
    await evaluatedNow()
    const evaluation = (await findEvaluation(world.landlord, run.unitId, '2026-12-02'))!
    const startsAtMs = startMsOf(question.grid, run, earlier.find(({ runId }) => runId === run.id)!.startSlot)
    expect(evaluation.status).toBe('ready')
    expect(tipOf({ evaluation, pressed: true, when: 'tomorrow' }).subject).toBe(
      // In December London's clocks show UTC.
      `Press the timer at ${new Date(startsAtMs).toISOString().slice(11, 16)} tomorrow`,
    )
  })
  it('writes nothing at all when one part of it fails', async () => {
    const question = await draft()
    const before = await runRows()
    await world.db.schema.alterTable('audit_entry').renameTo('audit_elsewhere').execute()
    await expect(accept(asked(question))).rejects.toThrow()
    expect(await runRows()).toEqual(before)
    expect(await letters()).toEqual([])
    expect(await world.db.selectFrom('plan').selectAll().execute()).toEqual([])
  })
  it('tells the second of two landlords what the first has accepted, and takes theirs once they have seen it', async () => {
    const [first, second] = [await draft(), await draft()]
    await accept(asked(first))
    const refused = await accept(asked(second), { nowMs: NOW_MS + 1 }).catch((error: unknown) => error)
    expect(refused).toMatchObject({ code: 'conflict' })
    const { details } = refused as { details: { fields: { message: string }[] } }
    expect(details.fields[0]?.message).toMatch(/Person \d+ accepted plan 1 on Tuesday 1 December, 12:00/)
    expect(details.fields.length).toBe(1 + movedRuns(first, plannedStarts(first)).length)
    expect(await world.db.selectFrom('plan').select('number').execute()).toHaveLength(1)
    const again = await draft()
    const back = todayStarts(second)
    await expect(
      accept({
        ...asked(again),
        starts: again.runs.map((run) => ({
          id: run.id,
          seenMs: run.todayMs,
          startsAtMs: startMsOf(
            second.grid,
            second.runs.find(({ id }) => id === run.id)!,
            back.find(({ runId }) => runId === run.id)!.startSlot,
          ),
        })),
      }),
    ).rejects.toMatchObject({
      // What stood before passes the limit, and now nothing does.
      code: 'invalid',
    })
  })
  it('is told of a tenant who changed their showers meanwhile', async () => {
    const question = await draft()
    const { tenancyId } = unitOf(world, WARM)
    await inTransaction(world.landlord, (trx) =>
      addPreference(trx, {
        tenancyId,
        week: week({ weekdays: [], weekend: [], friday: [shower(at(20))] }),
        willing: [],
        setBy: null,
        setAtMs: NOW_MS + 1,
      }),
    )
    await expect(accept(asked(question))).rejects.toMatchObject({ code: 'conflict' })
  })
  it('takes no start that makes a unit cold, and none that passes the limit by more', async () => {
    const question = await draft()
    const late = asked(
      question,
      todayStarts(question).map((start, index) => (index === 0 ? { ...start, startSlot: start.startSlot + 3 } : start)),
    )
    await expect(accept(late)).rejects.toMatchObject({
      code: 'invalid',
      details: { fields: [{ message: expect.stringMatching(/too late to be warm/) }] },
    })
    await expect(
      accept({ ...late, starts: late.starts.map((start) => ({ ...start, startsAtMs: start.startsAtMs - 61_000 })) }),
    ).rejects.toMatchObject({ code: 'invalid' })
    expect(await world.db.selectFrom('plan').selectAll().execute()).toEqual([])
  })
  it('withholds nothing where the service is full: whoever has no room keeps their start, with the reason and the smallest change', async () => {
    await world.db.updateTable('property').set({ service_rating_a: 26 }).execute()
    const question = await draft()
    const outcome = planRuns(question.problem, { seed: 1, targetGapFraction: 0.001, effort: 1 })
    if (outcome.status !== 'planned') throw new Error('invalid')
    expect(outcome.unserved.length).toBeGreaterThan(0)
    const starts = everyStart(question, outcome.starts)
    expect(starts).toHaveLength(question.runs.length)
    for (const { needId, reason, changes } of outcome.unserved) {
      const run = question.runs.find(({ id }) => id === needId)!
      expect(startMsOf(question.grid, run, starts.find(({ runId }) => runId === needId)!.startSlot)).toBe(run.todayMs)
      expect(['service-full', 'too-large-alone']).toContain(reason)
      for (const change of changes) expect(changeWords(change, { grid: question.grid, run, zone: question.zone })).toMatch(/\d/)
    }
    const needs = (await findEvaluation(world.landlord, question.runs[0]!.unitId, FRIDAY.from))!.outcome.needs.length
    await accept(asked(question, starts))
    await evaluatedNow()
    expect((await findEvaluation(world.landlord, question.runs[0]!.unitId, FRIDAY.from))!.outcome.runs).toHaveLength(needs)
  })
  it("answers not found for another organisation's property, and forbids other roles", async () => {
    const input = asked(await draft())
    await expect(accept(input, { db: world.stranger })).rejects.toMatchObject({ code: 'not-found' })
    for (const db of [world.tenant, world.electrician, world.owner])
      await expect(accept(input, { db })).rejects.toMatchObject({ code: 'forbidden' })
  })
})

describe('undoPlan', () => {
  it('restores every run, and tells exactly those who were told', async () => {
    const before = await runRows()
    const question = await draft()
    await accept(asked(question))
    const told = (await letters()).map(({ to_email }) => to_email)
    await expect(undo(1)).resolves.toEqual({ number: 1, told: told.length })
    expect(await runRows()).toEqual(before)
    const undone = (await letters()).filter(({ cause }) => cause.startsWith('plan undone'))
    expect(undone.map(({ to_email }) => to_email)).toEqual(told)
    expect(undone[0]?.subject).toMatch(/^As before: press the timer at \d\d:\d\d on Friday 4 December$/)
    await evaluatedNow(NOW_MS + 2_000)
    expect(await runRows()).toEqual(before)
  })
  it('restores the plan before it, where there was one', async () => {
    const first = await draft()
    await accept(asked(first))
    const stood = await runRows()
    const second = await draft()
    const run = second.runs.find((one) => one.todayMs - one.earliestMs > 1_800_000)!
    const moved = todayStarts(second).map((start) => (start.runId === run.id ? { ...start, startSlot: start.startSlot - 1 } : start))
    await accept(asked(second, moved))
    await expect(undo(1)).rejects.toMatchObject({ code: 'conflict', message: expect.stringContaining('Undo that one first') })
    await expect(undo(2)).resolves.toEqual({ number: 2, told: 1 })
    expect(await runRows()).toEqual(stood)
    await evaluatedNow(NOW_MS + 2_000)
    expect(await runRows()).toEqual(stood)
  })
  it('happens once, tells nobody twice, and not after its days', async () => {
    await accept(asked(await draft()))
    await undo(1)
    const count = (await letters()).length
    await expect(undo(1)).rejects.toMatchObject({ code: 'conflict' })
    expect(await letters()).toHaveLength(count)
    await accept(asked(await draft()))
    await expect(undo(2, { nowMs: Date.UTC(2026, 11, 6, 12) })).rejects.toMatchObject({ code: 'invalid' })
  })
  it("answers not found for another organisation's plan, and forbids other roles", async () => {
    await accept(asked(await draft()))
    await expect(undo(1, { db: world.stranger })).rejects.toMatchObject({ code: 'not-found' })
    await expect(undo(7)).rejects.toMatchObject({ code: 'not-found' })
    for (const db of [world.tenant, world.electrician, world.owner])
      await expect(undo(1, { db })).rejects.toMatchObject({ code: 'forbidden' })
  })
})
