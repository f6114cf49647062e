/** A tenant hears of a changed timer once, and of nothing else that was recorded. */
import { beforeEach, describe, expect, it } from 'vitest'
import type { Controller } from '#lib/core/controller/types.ts'
import { currentHardware } from '#db/queries/hardware.ts'
import { dial, timeSwitch } from '#lib/demo/installations.ts'
import { recordHardware } from '#lib/hardware/record-hardware.server.ts'
import { NOW_MS } from '../../support/factories.ts'
import { asSent } from '../../support/outbox.ts'
import { COLD, makeWorld, unitOf, type World } from '../../support/world.ts'

let world: World
beforeEach(async () => {
  world = await makeWorld()
})
const record = async (controller: Controller, nowMs = NOW_MS) => {
  const { unitId } = unitOf(world, COLD)
  const now = await currentHardware(world.landlord, unitId)
  const input = {
    installation: { ...now?.installation, controller },
    reason: 'Set anew',
    measuredMin: null,
    expectedRevision: now?.revision,
  }
  return recordHardware(world.landlord, { unitId, input, visitId: null, nowMs })
}
const letters = async () =>
  (await world.db.selectFrom('message').where('kind', '=', 'schedule-changed').selectAll().orderBy('queued_at_ms').execute()).map(
    (row) => ({
      ...row,
      ...asSent(row),
    }),
  )

describe('tellTenant', () => {
  it('says what the timer did until now and does from now on, with the zone and the way out', async () => {
    await record(dial(120))
    const [letter, ...more] = await letters()
    expect(more).toEqual([])
    expect(letter?.to_email).toBe('flat-5@tenants.example')
    expect(letter?.subject).toBe('Look when to start from now on: the timer of Flat 5 was changed')
    expect(letter?.text).toContain('From now on: Dial set to 120 min.')
    expect(letter?.text).toContain('12:00; times are local (London)')
    expect(letter?.headers['List-Unsubscribe-Post']).toBe('List-Unsubscribe=One-Click')
    await record(timeSwitch([{ weekday: null, onMin: 300, offMin: 420 }]), NOW_MS + 1)
    expect((await letters())[1]?.text).toContain('Until now: Dial set to 120 min.')
  })

  it('says nothing when the timer stays as it was', async () => {
    await record(dial(120))
    await record({ ...dial(120), toleranceFraction: 0.08 } as Controller, NOW_MS + 1)
    expect(await letters()).toHaveLength(1)
  })

  it('says nothing to whoever wants no tips', async () => {
    await world.db.updateTable('tenancy').set({ tips: 'never' }).execute()
    await record(dial(120))
    expect(await letters()).toEqual([])
  })
})
