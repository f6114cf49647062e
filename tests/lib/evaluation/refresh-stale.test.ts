/** Figures that stand for the present records, or none. */
import { sql } from 'kysely'
import { beforeEach, describe, expect, it } from 'vitest'
import { inTransaction } from '#db/org-db.ts'
import { findEvaluation, listUnitEvaluations } from '#db/queries/evaluation.ts'
import { addHardwareRevision, currentHardware } from '#db/queries/hardware.ts'
import { findProperty } from '#db/queries/property.ts'
import { listExpectedRuns } from '#db/queries/run.ts'
import { dial } from '#lib/demo/installations.ts'
import { evaluateProperty } from '#lib/evaluation/evaluate-property.server.ts'
import { evaluateUnit } from '#lib/evaluation/evaluate-unit.server.ts'
import { refreshStale } from '#lib/evaluation/refresh-stale.server.ts'
import { sendTips } from '#lib/tip/send-tips.server.ts'
import { NOW_MS } from '../../support/factories.ts'
import { COLD, makeWorld, unitOf, WARM, type World } from '../../support/world.ts'

let world: World
beforeEach(async () => {
  world = await makeWorld()
})
const refresh = async (nowMs = NOW_MS) => {
  const property = await findProperty(world.landlord, world.building.propertyId)
  return refreshStale(world.landlord, { property: property ?? expect.fail('no property'), nowMs })
}
/** Changes the record behind the back of whoever evaluates, as a crash between the two would. */
const revise = async (code: string, change: (installation: Record<string, never>) => object) => {
  const { unitId } = unitOf(world, code)
  const record = await currentHardware(world.landlord, unitId)
  const installation = change(structuredClone(record?.installation) as never) as never
  await inTransaction(world.landlord, (trx) =>
    addHardwareRevision(trx, { unitId, installation, reason: 'as found', visitId: null, recordedBy: null, recordedAtMs: NOW_MS }),
  )
  return unitId
}
const tips = () => sendTips(world.landlord, { propertyId: world.building.propertyId, nowMs: NOW_MS })

describe('refreshStale', () => {
  it('computes nothing again while nothing has changed, whichever way a unit was evaluated', async () => {
    expect((await refresh()).refreshed).toBe(0)
    await evaluateUnit(world.landlord, { unitId: unitOf(world, WARM).unitId, nowMs: NOW_MS })
    expect((await refresh()).refreshed).toBe(0)
  })

  it('computes again what was computed from an older record, from another rate or on an earlier day', async () => {
    const unitId = await revise(WARM, (installation) => ({
      ...installation,
      controller: dial(5),
    }))
    const before = await findEvaluation(world.landlord, unitId, '2026-12-02')
    expect((await refresh()).refreshed).toBe(1)
    const after = await findEvaluation(world.landlord, unitId, '2026-12-02')
    expect(after?.chosenMin).toBeLessThan(before?.chosenMin ?? 0)
    expect((await refresh()).refreshed).toBe(0)
    const units = world.building.units.size
    expect((await refresh(NOW_MS + 86_400_000)).refreshed).toBe(units)
    await world.db.updateTable('property').set({ supply_voltage_v: 110 }).execute()
    expect((await refresh(NOW_MS + 86_400_000)).refreshed).toBe(units)
  })
})

describe('a unit that cannot be computed', () => {
  const broken = () => revise(COLD, (installation) => ({ ...installation, load: null }))

  it('keeps no day ahead and no expected run from before, and raises a flag', async () => {
    const unitId = await broken()
    const counts = await evaluateProperty(world.landlord, { propertyId: world.building.propertyId, nowMs: NOW_MS })
    expect(counts).toMatchObject({ failed: 1, evaluated: world.building.units.size - 1 })
    expect(await listUnitEvaluations(world.landlord, unitId, '2026-12-01', '2026-12-09')).toEqual([])
    const runs = await listExpectedRuns(world.landlord, world.building.propertyId, NOW_MS, NOW_MS + 8 * 86_400_000)
    expect(runs.filter((run) => run.unitId === unitId)).toEqual([])
    expect(
      await world.db.selectFrom('flag').where('unit_id', '=', unitId).where('kind', '=', 'not-evaluated').select('id').execute(),
    ).toHaveLength(1)
  })

  it('is one whose figures are no numbers, too', async () => {
    const unitId = await revise(COLD, (installation) => ({ ...installation, controller: { ...dial(5), scaleMaxMin: undefined } }))
    const counts = await evaluateProperty(world.landlord, { propertyId: world.building.propertyId, nowMs: NOW_MS })
    expect(counts).toMatchObject({ failed: 1, evaluated: world.building.units.size - 1 })
    expect(await listUnitEvaluations(world.landlord, unitId, '2026-12-01', '2026-12-09')).toEqual([])
  })

  it('stops no other when its figures cannot be stored', async () => {
    await sql`create trigger refuse before insert on evaluation when new.unit_id = ${sql.lit(unitOf(world, COLD).unitId)}
      begin select raise(abort, 'refused by the test'); end`.execute(world.db)
    await world.db.deleteFrom('evaluation').execute()
    const counts = await evaluateProperty(world.landlord, { propertyId: world.building.propertyId, nowMs: NOW_MS })
    expect(counts).toMatchObject({ failed: 1, evaluated: world.building.units.size - 1 })
    expect(await world.db.selectFrom('flag').where('kind', '=', 'not-evaluated').select('unit_id').execute()).toEqual([
      { unit_id: unitOf(world, COLD).unitId },
    ])
  })

  it('gets no tip from yesterday’s figures, and the others get theirs', async () => {
    await broken()
    expect(await tips()).toMatchObject({ due: 7, queued: 7, notCurrent: 1, failed: 0 })
  })
})

describe('a tip', () => {
  it('tells of the record as it is now, though nobody evaluated since', async () => {
    const unitId = await revise(WARM, (installation) => ({
      ...installation,
      controller: dial(5),
    }))
    await tips()
    const mail = await world.db
      .selectFrom('message')
      .where('unit_id', '=', unitId)
      .where('kind', '=', 'tip')
      .select('subject')
      .executeTakeFirst()
    expect(mail?.subject).toMatch(/short|No hot water/)
  })
})
