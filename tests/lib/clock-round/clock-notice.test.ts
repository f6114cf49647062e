/** The letter before a clock change: once a change, whom to visit by when. Change of 28 March 2027: IANA tz database 2025b, Europe/London. */
import { beforeEach, describe, expect, it } from 'vitest'
import { sendClockNotice } from '#lib/clock-round/send-notice.server.ts'
import { asSent } from '../../support/outbox.ts'
import { makeWorld, type World } from '../../support/world.ts'

/** Ten days before. */
const NOTICE_AT_MS = Date.UTC(2027, 2, 18, 9)
let world: World
beforeEach(async () => {
  world = await makeWorld()
})
const send = (nowMs = NOTICE_AT_MS, by = world.landlord) => sendClockNotice(by, { propertyId: world.building.propertyId, nowMs })
const letters = async () =>
  (await world.db.selectFrom('message').where('kind', '=', 'clock-change').selectAll().orderBy('queued_at_ms').execute()).map((row) => ({
    ...row,
    ...asSent(row),
  }))

describe('sendClockNotice', () => {
  it('names the change, the switches that do not follow, and by when to set them', async () => {
    const { off } = await send()
    expect(off).toBeGreaterThan(0)
    const [letter] = await letters()
    expect(letter?.subject).toMatch(/^Have \d+ time switch(es)? set at .+: the clocks change on Sunday 28 March$/)
    expect(letter?.text).toContain('Sunday 28 March 2027: 01:00 becomes 02:00 (Europe/London)')
    expect(letter?.text.match(/unset it runs 1 h late/g)).toHaveLength(off)
    expect(letter?.text).toMatch(/\/clock-change/)
    expect(letter?.expires_at_ms).toBe(Date.UTC(2027, 2, 28, 1))
    expect(letter?.headers['List-Unsubscribe-Post']).toBe('List-Unsubscribe=One-Click')
  })

  it('comes once a change, however often it is asked for, and again before the next', async () => {
    expect(await send()).toMatchObject({ queued: 1 })
    expect(await send(NOTICE_AT_MS + 86_400_000)).toMatchObject({ queued: 0 })
    expect(await letters()).toHaveLength(1)
    // A switch that nobody set in spring comes right by itself in autumn, so the next letter is of a later change or none.
    await send(Date.UTC(2027, 9, 21, 9))
    expect((await letters()).map(({ cause }) => cause).filter((cause) => cause.includes('2027-03-28'))).toHaveLength(1)
  })

  it('is not written where no switch goes off and no supplier is to be asked', async () => {
    await world.db.updateTable('property').set({ zone: 'Africa/Nairobi' }).execute()
    expect(await send()).toEqual({ off: 0, queued: 0 })
  })

  it('is not for other roles, nor about another organisation’s property', async () => {
    for (const person of [world.tenant, world.electrician, world.owner])
      await expect(send(NOTICE_AT_MS, person)).rejects.toMatchObject({ code: 'forbidden' })
    await expect(send(NOTICE_AT_MS, world.stranger)).rejects.toMatchObject({ code: 'not-found' })
  })
})
