/** What is kept about a tenant: theirs to read, to take along and to delete. Laws of our own; no source. */
import { beforeEach, describe, expect, it } from 'vitest'
import { inTransaction } from '#db/org-db.ts'
import { listUnitEvaluations } from '#db/queries/evaluation.ts'
import { findPreference } from '#db/queries/preference.ts'
import { changeTenancyEnd } from '#db/queries/tenancy.ts'
import { at, shower, week } from '#lib/demo/weeks.ts'
import { evaluateProperty } from '#lib/evaluation/evaluate-property.server.ts'
import { giveFeedback } from '#lib/feedback/give-feedback.server.ts'
import { renewFeed } from '#lib/feed/renew-feed.server.ts'
import { eraseEntries } from '#lib/kept/erase-entries.server.ts'
import { exportKept, loadKept } from '#lib/kept/load-kept.server.ts'
import { setPreference } from '#lib/preference/set-preference.server.ts'
import { sendTips } from '#lib/tip/send-tips.server.ts'
import { NOW_MS } from '../../support/factories.ts'
import { COLD, makeWorld, personOf, unitOf, WARM, type World } from '../../support/world.ts'

const DAY_MS = 86_400_000
let world: World
beforeEach(async () => {
  world = await makeWorld()
})
const mine = () => unitOf(world, COLD)

/** Enters what nobody else does, so that a trace of it can be looked for: a shower at 05:17. */
async function enterEverything(): Promise<void> {
  const { tenancyId } = mine()
  const early = [shower(at(5, 17), 2, 9)]
  await setPreference(world.tenant, {
    tenancyId,
    input: { week: week({ weekdays: early, weekend: early }), willing: [] },
    nowMs: NOW_MS + 1,
  })
  await sendTips(world.landlord, { propertyId: world.building.propertyId, nowMs: NOW_MS })
  await giveFeedback(world.tenant, { tenancyId, input: { day: '2026-12-01', verdict: 'cold' }, nowMs: NOW_MS })
  await renewFeed(world.tenant, { tenancyId, nowMs: NOW_MS })
  await evaluateProperty(world.landlord, { propertyId: world.building.propertyId, nowMs: NOW_MS + DAY_MS })
}

/** Every cell of every table in which the time, in words or in minutes, is still found. */
async function tracesOfTime(): Promise<readonly string[]> {
  const tables = ['preference', 'feedback', 'evaluation', 'flag', 'message', 'run', 'audit_entry', 'calendar_feed', 'tenancy'] as const
  const found: string[] = []
  for (const table of tables) {
    for (const row of await world.db.selectFrom(table).selectAll().execute()) {
      for (const [column, value] of Object.entries(row)) {
        if (/05:17|"(readyByMin|readyByMinuteOfDay)":317\b/.test(String(value)) || (column === 'ready_by_min' && value === 317)) {
          found.push(`${table}.${column}`)
        }
      }
    }
  }
  return [...new Set(found)].sort()
}
const counts = async () => (await loadKept(world.tenant, NOW_MS + DAY_MS))[0]

describe('loadKept and exportKept', () => {
  it('count and hand out everything that was entered, computed and sent', async () => {
    await enterEverything()
    expect(await counts()).toMatchObject({ weeks: 2, answers: 1, mails: 1, calendar: true, home: { unit: { code: COLD } } })
    const { tenancies, account } = await exportKept(world.tenant, NOW_MS + DAY_MS)
    expect(account).toEqual({ name: 'tenant', email: expect.stringContaining('@people.example'), roles: ['tenant'] })
    expect(tenancies).toHaveLength(1)
    expect(tenancies[0]).toMatchObject({
      unit: COLD,
      answers: [{ day: '2026-12-01', verdict: 'cold' }],
      weeks: [{ setBy: 'you' }, { setBy: 'whoever runs the building' }],
    })
    expect(tenancies[0]?.computedDays[0]?.showers[0]).toMatchObject({ at: '05:17', count: 2, minutesEach: 9 })
  })
  it('hold nothing of another unit, and nothing that opens the calendar', async () => {
    await enterEverything()
    const text = JSON.stringify(await exportKept(world.tenant, NOW_MS + DAY_MS))
    const { id } = await world.db.selectFrom('calendar_feed').select('id').executeTakeFirstOrThrow()
    expect(text).not.toContain(id)
    for (const code of world.building.units.keys()) if (code !== COLD) expect(text).not.toContain(`"${code}"`)
  })
  it('are forbidden to whoever is no tenant here', async () => {
    for (const db of [world.electrician, world.owner, world.landlord, world.stranger]) {
      await expect(loadKept(db, NOW_MS)).rejects.toMatchObject({ code: 'forbidden' })
      await expect(exportKept(db, NOW_MS)).rejects.toMatchObject({ code: 'forbidden' })
    }
  })
})

describe('eraseEntries', () => {
  it('leaves no trace of a shower time anywhere, and closes what stood on it', async () => {
    await enterEverything()
    expect(await tracesOfTime()).toEqual(expect.arrayContaining(['evaluation.outcome', 'message.text', 'preference.week']))
    await eraseEntries(world.tenant, { tenancyId: mine().tenancyId, nowMs: NOW_MS + DAY_MS })
    expect(await tracesOfTime()).toEqual([])
    expect(await counts()).toMatchObject({ weeks: 0, answers: 0, mails: 0, days: 0, calendar: false })
    const open = await world.db
      .selectFrom('flag')
      .where('unit_id', '=', mine().unitId)
      .where('closed_at_ms', 'is', null)
      .selectAll()
      .execute()
    expect(open.map((flag) => flag.kind)).not.toContain('misses-recovery')
  })
  it('keeps the energy and the cost of past days, which the owner was told', async () => {
    await enterEverything()
    const past = async () => (await listUnitEvaluations(world.landlord, mine().unitId, '2026-12-01', '2026-12-02'))[0]
    const before = await past()
    await eraseEntries(world.tenant, { tenancyId: mine().tenancyId, nowMs: NOW_MS + DAY_MS })
    const { status, energyInKwh, costMinor } = before ?? {}
    expect(before?.outcome.needs.length).toBeGreaterThan(0)
    expect(await past()).toMatchObject({ status, energyInKwh, costMinor, outcome: { needs: [], runs: [] } })
  })
  it("leaves the neighbours' entries as they are", async () => {
    await enterEverything()
    const kept = await findPreference(world.landlord, unitOf(world, WARM).tenancyId)
    const mails = await world.db.selectFrom('message').where('unit_id', '!=', mine().unitId).selectAll().execute()
    await eraseEntries(world.tenant, { tenancyId: mine().tenancyId, nowMs: NOW_MS + DAY_MS })
    expect(await findPreference(world.landlord, unitOf(world, WARM).tenancyId)).toEqual(kept)
    expect(await world.db.selectFrom('message').where('unit_id', '!=', mine().unitId).selectAll().execute()).toEqual(mails)
  })
  it('is open to the landlord on request and to nobody else', async () => {
    const ask = (db: World['tenant'], code = COLD) => eraseEntries(db, { tenancyId: unitOf(world, code).tenancyId, nowMs: NOW_MS })
    await expect(ask(world.tenant, WARM)).rejects.toMatchObject({ code: 'not-found' })
    await expect(ask(world.stranger)).rejects.toMatchObject({ code: 'not-found' })
    await expect(ask(world.electrician)).rejects.toMatchObject({ code: 'forbidden' })
    await expect(ask(world.owner)).rejects.toMatchObject({ code: 'forbidden' })
    await ask(world.landlord)
    expect(await findPreference(world.landlord, mine().tenancyId)).toBeNull()
  })
  it('says that it was done in the audit', async () => {
    await eraseEntries(world.tenant, { tenancyId: mine().tenancyId, nowMs: NOW_MS })
    const entry = await world.db.selectFrom('audit_entry').where('action', '=', 'erase').selectAll().executeTakeFirstOrThrow()
    expect(entry).toMatchObject({ subject_id: mine().tenancyId, person_id: personOf(world.tenant), before: null, after: null })
  })
  it('is there for a tenancy that is over, which is still shown', async () => {
    await enterEverything()
    await inTransaction(world.landlord, (trx) => changeTenancyEnd(trx, mine().tenancyId, '2026-12-02'))
    expect(await counts()).toMatchObject({ weeks: 2, home: { unit: { code: COLD } } })
    await eraseEntries(world.tenant, { tenancyId: mine().tenancyId, nowMs: NOW_MS + DAY_MS })
    expect(await tracesOfTime()).toEqual([])
  })
})
