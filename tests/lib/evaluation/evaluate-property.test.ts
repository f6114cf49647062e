/** The nightly evaluation on an invented building: what it writes, what it flags, and what it must never do. */
import type { Kysely } from 'kysely'
import { beforeEach, describe, expect, it } from 'vitest'
import { inTransaction, type OrgDb } from '#db/org-db.ts'
import { findEvaluation, listEvaluations } from '#db/queries/evaluation.ts'
import { closeFlag, type Flag, listClosedFlags, listOpenFlags } from '#db/queries/flag.ts'
import { addHardwareRevision } from '#db/queries/hardware.ts'
import { listExpectedRuns, listUnitRuns } from '#db/queries/run.ts'
import type { Database } from '#db/schema.ts'
import type { DemoBuilding } from '#lib/demo/buildings.ts'
import { british, dial, ONE_SHOT_THAT_MAY_NEVER_STOP, timeSwitch, daily } from '#lib/demo/installations.ts'
import { WEXHOLT_RATE } from '#lib/demo/rates.ts'
import { at, shower, week } from '#lib/demo/weeks.ts'
import { evaluateProperty } from '#lib/evaluation/evaluate-property.server.ts'
import { evaluateUnit } from '#lib/evaluation/evaluate-unit.server.ts'
import { type MadeBuilding, makeBuilding } from '../../support/building.ts'
import { freshDatabase } from '../../support/database.ts'
import { makeLandlord, NOW_MS } from '../../support/factories.ts'

const morning = week({ weekdays: [shower(at(7))], weekend: [shower(at(8))] })
const DAY_MS = 86_400_000

const building: DemoBuilding = {
  slug: 'thimble-row',
  name: 'Thimble Row',
  address: '1 Thimble Row, Wexholt',
  zone: 'Europe/London',
  country: 'GB',
  currency: 'GBP',
  ruleProfile: 'gb-bs7671',
  supplyVoltageV: 230,
  phases: 1,
  serviceRatingA: 100,
  baseLoadW: 1_000,
  climate: { kind: 'climate', meanAirC: 10.4, swingAirK: 13, hemisphere: 'north' },
  rate: { name: 'Three-rate', record: WEXHOLT_RATE },
  units: [
    { code: 'well', floor: 0, stack: 'A', installation: british(dial(120), 120), week: morning },
    { code: 'cold', floor: 0, stack: 'B', installation: british(dial(20), 120), week: morning },
    { code: 'endless', floor: 1, stack: 'A', installation: british(ONE_SHOT_THAT_MAY_NEVER_STOP, 120), week: morning },
    { code: 'empty', floor: 1, stack: 'B', installation: british(dial(60), 120), week: null },
    { code: 'clock', floor: 2, stack: 'A', installation: british(timeSwitch([daily(at(5), at(7))], 55), 120), week: morning },
  ],
}

let connection: Kysely<Database>
let db: OrgDb
let made: MadeBuilding
const unitId = (code: string) => made.units.get(code)?.unitId ?? ('' as never)
const evaluate = (nowMs = NOW_MS) => evaluateProperty(db, { propertyId: made.propertyId, nowMs })
const openKinds = async (code: string) => (await listOpenFlags(db, { unitId: unitId(code) })).map((flag) => flag.kind)

beforeEach(async () => {
  connection = await freshDatabase()
  db = await makeLandlord(connection)
  made = await makeBuilding(db, building)
})

describe('evaluateProperty', () => {
  it('writes one evaluation a unit for today and the seven days after it', async () => {
    const counts = await evaluate()
    expect(counts).toMatchObject({ units: 5, evaluated: 5, failed: 0, cold: 1 })
    const rows = await listEvaluations(db, made.propertyId, '2026-12-01', '2027-01-01')
    expect(rows).toHaveLength(5 * 8)
    expect([rows[0]?.day, rows.at(-1)?.day]).toEqual(['2026-12-01', '2026-12-08'])
  })
  it('says no-need with its reason where nobody lives', async () => {
    await evaluate()
    const empty = await findEvaluation(db, unitId('empty'), '2026-12-02')
    expect(empty).toMatchObject({ status: 'no-need', energyInKwh: 0, outcome: { reason: 'Nobody lives here on this day.' } })
  })
  it('books the energy of a day: in is delivered and lost, to a rounding of the settled state', async () => {
    await evaluate()
    const day = await findEvaluation(db, unitId('well'), '2026-12-02')
    // The state repeats within 0.05 K a node of 108 L of water: 108 × 4.15 kJ × 0.05 K = 0.006 kWh.
    expect(Math.abs((day?.energyInKwh ?? 0) - (day?.energyDeliveredKwh ?? 0) - (day?.energyLostKwh ?? 0))).toBeLessThan(0.007)
    expect(day?.baselineEnergyKwh).toBeGreaterThan(day?.energyInKwh ?? Infinity)
  })
  it('writes the expected run before the shower, inside its window, in instants', async () => {
    await evaluate()
    const [run] = await listUnitRuns(db, unitId('well'), '2026-12-02', '2026-12-03')
    const sevenMs = Date.UTC(2026, 11, 2, 7)
    expect(run).toMatchObject({ readyByAtMs: sevenMs, short: false, powerW: 3_000 })
    expect(run?.startsAtMs).toBeLessThan(sevenMs)
    expect(run?.windowStartsAtMs).toBeLessThanOrEqual(run?.startsAtMs ?? 0)
    expect(run?.windowEndsAtMs).toBeGreaterThanOrEqual(run?.longestEndsAtMs ?? 0)
  })
  it('counts a clock’s run once, on the day on which it starts', async () => {
    await evaluate()
    const runs = await listUnitRuns(db, unitId('clock'), '2026-12-01', '2026-12-09')
    expect(new Set(runs.map((run) => run.startsAtMs)).size).toBe(runs.length)
    expect(runs).toHaveLength(8)
    // 55 minutes fast: 05:00 by its clock is 04:05.
    expect(runs[1]?.startsAtMs).toBe(Date.UTC(2026, 11, 2, 4, 5))
  })
  it('raises misses-recovery with the shortfall, the numbers and a change that works', async () => {
    await evaluate()
    const [flag] = (await listOpenFlags(db, { unitId: unitId('cold') })).filter((one) => one.kind === 'misses-recovery')
    const day = await findEvaluation(db, unitId('cold'), flag?.evidence.day ?? '')
    expect(flag?.severity).toBe('cold')
    expect(flag?.evidence.shortfallMin).toBe(day?.shortfallMin)
    expect(day?.shortfallMin).toBe(Math.ceil((day?.requiredMin ?? 0) - (day?.chosenMin ?? 0)))
    const settingMin = Number(/Set the dial to (\d+) min/.exec(flag?.evidence.lines.find((line) => line.kind === 'fix')?.label ?? '')?.[1])
    expect(await statusWithDial(settingMin)).toBe(true)
    expect(await statusWithDial(settingMin - 5)).toBe(false)
  })
  it('raises may-never-stop as dangerous and never for a timer that stops', async () => {
    await evaluate()
    expect((await listOpenFlags(db, { unitId: unitId('endless') })).find((flag) => flag.kind === 'may-never-stop')?.severity).toBe(
      'dangerous',
    )
    expect(await openKinds('well')).not.toContain('may-never-stop')
  })
  it('raises clock-is-off for a switch that is 55 minutes fast', async () => {
    await evaluate()
    expect(await openKinds('clock')).toContain('clock-is-off')
  })
  it('changes nothing but freshness when it runs again', async () => {
    await evaluate()
    const flags = await listOpenFlags(db, { propertyId: made.propertyId })
    const runs = await listExpectedRuns(db, made.propertyId, NOW_MS - DAY_MS, NOW_MS + 9 * DAY_MS)
    const counts = await evaluate(NOW_MS + 60_000)
    expect(counts).toMatchObject({ flagsOpened: 0, flagsClosed: 0, flagsRefreshed: flags.length })
    const again = await listOpenFlags(db, { propertyId: made.propertyId })
    expect(again.map((flag) => [flag.id, flag.openedAtMs])).toEqual(flags.map((flag) => [flag.id, flag.openedAtMs]))
    expect(again[0]?.seenAtMs).toBe(NOW_MS + 60_000)
    expect(await listExpectedRuns(db, made.propertyId, NOW_MS - DAY_MS, NOW_MS + 9 * DAY_MS)).toHaveLength(runs.length)
  })
  it('flags a unit whose record cannot be computed and still evaluates the rest', async () => {
    const broken = { ...british(dial(60), 120), load: { kind: 'storage-heater', tank: null } }
    await addRevision('well', broken as never)
    const counts = await evaluate()
    expect(counts).toMatchObject({ units: 5, evaluated: 4, failed: 1 })
    expect(await openKinds('well')).toEqual(['not-evaluated'])
    expect(await openKinds('cold')).toContain('misses-recovery')
    await addRevision('well', british(dial(120), 120))
    await evaluate()
    expect(await openKinds('well')).not.toContain('not-evaluated')
  })
  it("answers not found for another organisation's property", async () => {
    const theirs = await makeLandlord(connection)
    await expect(evaluateProperty(theirs, { propertyId: made.propertyId, nowMs: NOW_MS })).rejects.toMatchObject({ code: 'not-found' })
  })
  it('opens a dismissed flag again only from its day on', async () => {
    await evaluate()
    const flag = (await listOpenFlags(db, { unitId: unitId('cold') })).find((one) => one.kind === 'misses-recovery') as Flag
    await inTransaction(db, (trx) =>
      closeFlag(trx, flag.id, { atMs: NOW_MS, because: 'dismissed', byPersonId: null, note: 'known', untilDay: '2026-12-05' }),
    )
    await evaluate(Date.UTC(2026, 11, 4, 12))
    expect(await openKinds('cold')).not.toContain('misses-recovery')
    await evaluate(Date.UTC(2026, 11, 5, 12))
    expect(await openKinds('cold')).toContain('misses-recovery')
  })
})

describe('evaluateUnit', () => {
  it('closes the flag by itself, and says so, once the dial is long enough', async () => {
    await evaluate()
    await addRevision('cold', british(dial(120), 120))
    const result = await evaluateUnit(db, { unitId: unitId('cold'), nowMs: NOW_MS + 1_000 })
    expect(result.closed).toContain('misses-recovery')
    expect(result.days.every((day) => day.status === 'ready')).toBe(true)
    const closed = await listClosedFlags(db, { propertyId: made.propertyId, limit: 10 })
    expect(closed[0]?.closed).toMatchObject({ because: 'computation', note: 'The computation no longer finds it.' })
  })
  it('leaves the other units as they are', async () => {
    await evaluate()
    const before = await listOpenFlags(db, { unitId: unitId('endless') })
    await evaluateUnit(db, { unitId: unitId('cold'), nowMs: NOW_MS + 1_000 })
    expect(await listOpenFlags(db, { unitId: unitId('endless') })).toEqual(before)
  })
  it("answers not found for another organisation's unit", async () => {
    const theirs = await makeLandlord(connection)
    await expect(evaluateUnit(theirs, { unitId: unitId('cold'), nowMs: NOW_MS })).rejects.toMatchObject({ code: 'not-found' })
  })
})

const addRevision = (code: string, installation: ReturnType<typeof british>) =>
  inTransaction(db, (trx) =>
    addHardwareRevision(trx, {
      unitId: unitId(code),
      installation,
      reason: 'changed',
      visitId: null,
      recordedBy: null,
      recordedAtMs: NOW_MS,
    }),
  )

async function statusWithDial(settingMin: number): Promise<boolean> {
  await addRevision('cold', british(dial(settingMin), 120))
  const { days } = await evaluateUnit(db, { unitId: unitId('cold'), nowMs: NOW_MS })
  return days.every((day) => day.status === 'ready')
}
