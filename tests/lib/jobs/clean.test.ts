/** What is removed with age and what stays; limits as in `RETENTION_DAYS`. */
import { beforeEach, describe, expect, it } from 'vitest'
import { inTransaction } from '#db/org-db.ts'
import { putFeedback } from '#db/queries/feedback.ts'
import { addPreference } from '#db/queries/preference.ts'
import { changeTenancyEnd } from '#db/queries/tenancy.ts'
import { cleanUp } from '#lib/jobs/clean.server.ts'
import { RETENTION_DAYS } from '#lib/jobs/retention.ts'
import { NOW_MS } from '../../support/factories.ts'
import { queue } from '../../support/outbox.ts'
import { COLD, makeWorld, personOf, unitOf, WARM, type World } from '../../support/world.ts'

const DAY_MS = 86_400_000
const dayOf = (ms: number): string => new Date(ms).toISOString().slice(0, 10)
/** A moment that has been kept for longer than `kept`, and one that has not. */
const older = (kept: keyof typeof RETENTION_DAYS): number => NOW_MS - (RETENTION_DAYS[kept] + 2) * DAY_MS
const younger = (kept: keyof typeof RETENTION_DAYS): number => NOW_MS - (RETENTION_DAYS[kept] - 2) * DAY_MS

let world: World
beforeEach(async () => {
  world = await makeWorld()
})
const clean = () => cleanUp(world.db, NOW_MS)

describe('cleanUp', () => {
  it('ends sessions and one-use tokens at the instant they expire', async () => {
    const person_id = personOf(world.tenant)
    for (const [id, expires_at_ms] of [
      ['over', NOW_MS],
      ['runs', NOW_MS + 1],
    ] as const) {
      await world.db.insertInto('session').values({ id, person_id, expires_at_ms, created_at_ms: 1 }).execute()
      await world.db
        .insertInto('account_token')
        .values({ token_hash: id, person_id, purpose: 'reset', expires_at_ms, used_at_ms: null, created_at_ms: 1 })
        .execute()
    }
    expect(await clean()).toMatchObject({ sessions: 1, tokens: 1 })
    expect((await world.db.selectFrom('session').select('id').execute()).map(({ id }) => id)).toEqual(['runs'])
  })

  it('empties old letters, keeps that they were sent, and forgets them later; what waits is left alone', async () => {
    await queue(world.landlord, { cause: 'forgotten', nowMs: older('letters') })
    await queue(world.landlord, { cause: 'emptied', nowMs: older('letterBodies') })
    await queue(world.landlord, { cause: 'kept', nowMs: younger('letterBodies') })
    await world.db.updateTable('message').set({ state: 'sent' }).execute()
    await queue(world.landlord, { cause: 'waits', nowMs: older('letters') })
    expect(await clean()).toMatchObject({ letters: 1, letterBodies: 1 })
    expect(await clean()).toMatchObject({ letters: 0, letterBodies: 0 })
    const rows = await world.db
      .selectFrom('message')
      .select(['cause', 'text', 'html', 'attachments', 'headers', 'subject'])
      .orderBy('cause')
      .execute()
    expect(rows.map(({ cause, text }) => [cause, text === ''])).toEqual([
      ['emptied', true],
      ['kept', false],
      ['waits', false],
    ])
    expect(rows[0]).toMatchObject({ html: '', attachments: '[]', headers: '{}' })
    expect(rows[0]?.subject).not.toBe('')
  })

  it('forgets the showers and the words of whoever moved out, and of nobody who lives here', async () => {
    const [gone, stays] = [unitOf(world, COLD).tenancyId, unitOf(world, WARM).tenancyId]
    const end = (day: string) => inTransaction(world.landlord, (trx) => changeTenancyEnd(trx, gone, day))
    await inTransaction(world.landlord, async (trx) => {
      for (const tenancyId of [gone, stays]) await putFeedback(trx, { tenancyId, day: '2026-01-05', verdict: 'cold' }, 1)
    })
    const left = async () => ({
      weeks: (await world.db.selectFrom('preference').select('tenancy_id').execute()).filter((row) =>
        [gone, stays].includes(row.tenancy_id),
      ).length,
      words: (await world.db.selectFrom('feedback').select('tenancy_id').execute()).length,
    })
    await end(dayOf(younger('showerWeeks')))
    await clean()
    expect(await left()).toEqual({ weeks: 2, words: 2 })
    await end(dayOf(older('showerWeeks')))
    expect(await clean()).toMatchObject({ showerWeeks: 1, feedback: 0 })
    expect(await left()).toEqual({ weeks: 1, words: 2 })
    await world.db
      .updateTable('tenancy')
      .set({ from_day: '2020-01-01', to_day: dayOf(older('feedback')) })
      .where('id', '=', gone)
      .execute()
    expect(await clean()).toMatchObject({ feedback: 1 })
    expect(await left()).toEqual({ weeks: 1, words: 1 })
  })

  it('forgets a week of showers some time after a newer one replaced it', async () => {
    const { tenancyId } = unitOf(world, WARM)
    const week = [[], [], [], [], [], [], []]
    const count = async () => (await world.db.selectFrom('preference').where('tenancy_id', '=', tenancyId).select('id').execute()).length
    const add = (setAtMs: number) =>
      inTransaction(world.landlord, (trx) => addPreference(trx, { tenancyId, week, willing: [], setBy: null, setAtMs }))
    await world.db.deleteFrom('preference').where('tenancy_id', '=', tenancyId).execute()
    await add(older('showerWeeks') - 2)
    await add(older('showerWeeks') - 1)
    await add(younger('showerWeeks'))
    await clean()
    expect(await count()).toBe(2)
  })

  it('forgets finished leases, old runs of jobs, closed invitations and days long past', async () => {
    const organisation_id = world.landlord.scope.organisationId
    for (const [period, done_at_ms] of [
      ['old', older('finishedLeases')],
      ['new', younger('finishedLeases')],
      ['open', null],
    ] as const)
      await world.db
        .insertInto('job_lease')
        .values({ job: 'x', scope: 'y', period, organisation_id, holder: '', lease_until_ms: 1, attempts: 1, done_at_ms })
        .execute()
    await world.db
      .updateTable('evaluation')
      .set({ day: dayOf(older('evaluations')) })
      .where('day', '=', '2026-12-01')
      .execute()
    const days = await world.db.selectFrom('evaluation').select('id').execute()
    expect(await clean()).toMatchObject({ leases: 1, evaluations: days.length / 8 })
    expect((await world.db.selectFrom('job_lease').select('period').orderBy('period').execute()).map(({ period }) => period)).toEqual([
      'new',
      'open',
    ])
  })
})
