/** Hardware as revisions: never overwritten, never doubled, only by those who may reach the unit. */
import { beforeEach, describe, expect, it } from 'vitest'
import { listOpenFlags } from '#db/queries/flag.ts'
import { currentHardware, listHardware } from '#db/queries/hardware.ts'
import { inTransaction } from '#db/org-db.ts'
import { deleteAccess } from '#db/queries/organisation.ts'
import { british, dial } from '#lib/demo/installations.ts'
import { recordHardware } from '#lib/hardware/record-hardware.server.ts'
import { differences } from '#lib/hardware/view.ts'
import { NOW_MS } from '../../support/factories.ts'
import { COLD, makeWorld, personOf, unitOf, type World } from '../../support/world.ts'

const LONGER = { installation: british(dial(150), 120), reason: 'Dial set longer', measuredMin: null, expectedRevision: 1 }

let world: World
beforeEach(async () => {
  world = await makeWorld()
})
const record = (input: unknown, db = world.electrician) =>
  recordHardware(db, { unitId: unitOf(world, COLD).unitId, input, visitId: null, nowMs: NOW_MS + 1 })

describe('recordHardware', () => {
  it('closes the flag that the change mends, at once', async () => {
    const { unitId } = unitOf(world, COLD)
    expect((await listOpenFlags(world.landlord, { unitId })).map((flag) => flag.kind)).toContain('misses-recovery')
    const { revision, evaluation } = await record(LONGER)
    expect(revision).toBe(2)
    expect(evaluation.closed).toContain('misses-recovery')
  })
  it('keeps the revision before', async () => {
    await record(LONGER)
    const [now, before] = await listHardware(world.landlord, unitOf(world, COLD).unitId)
    expect(now?.installation.controller).toMatchObject({ settingMin: 150 })
    expect(before?.installation.controller).toMatchObject({ settingMin: 35 })
    expect(differences(before?.installation ?? null, LONGER.installation)).toContain('Timed by: Dial set to 35 min → Dial set to 150 min')
  })
  it('refuses a change of a revision that somebody has replaced meanwhile, and records nothing', async () => {
    await record(LONGER)
    await expect(record(LONGER)).rejects.toMatchObject({ code: 'conflict' })
    expect(await listHardware(world.landlord, unitOf(world, COLD).unitId)).toHaveLength(2)
  })
  it('keeps a stop-watch reading for as long as the controller stays the same', async () => {
    const { unitId } = unitOf(world, COLD)
    await record({ ...LONGER, measuredMin: 141 })
    expect((await currentHardware(world.landlord, unitId))?.measured).toMatchObject([{ durationMin: 141 }])
    await record({ ...LONGER, expectedRevision: 2, reason: 'Wrote down the breaker' })
    expect((await currentHardware(world.landlord, unitId))?.measured).toHaveLength(1)
    await record({ ...LONGER, expectedRevision: 3, installation: british(dial(90), 120) })
    expect((await currentHardware(world.landlord, unitId))?.measured).toEqual([])
  })
  it('names the field that is out of range', async () => {
    const tank = { ...LONGER.installation.load.tank, setPointC: 300 }
    await expect(
      record({ ...LONGER, installation: { ...LONGER.installation, load: { kind: 'storage-heater', tank } } }),
    ).rejects.toMatchObject({
      code: 'invalid',
      details: { fields: [{ field: 'installation.load.tank.setPointC' }] },
    })
  })
  it('is forbidden to tenants and owners', async () => {
    await expect(record(LONGER, world.tenant)).rejects.toMatchObject({ code: 'forbidden' })
    await expect(record(LONGER, world.owner)).rejects.toMatchObject({ code: 'forbidden' })
  })
  it("answers not found for another organisation's unit, and for an electrician without access", async () => {
    await expect(record(LONGER, world.stranger)).rejects.toMatchObject({ code: 'not-found' })
    const access = { personId: personOf(world.electrician), propertyId: world.building.propertyId, role: 'electrician' } as const
    await inTransaction(world.landlord, (trx) => deleteAccess(trx, access))
    await expect(record(LONGER)).rejects.toMatchObject({ code: 'not-found' })
  })
  it('is refused by the database itself when somebody overwrites a revision', async () => {
    await expect(world.db.updateTable('hardware_record').set({ reason: 'rewritten' }).execute()).rejects.toThrow(/never overwritten/)
  })
})
