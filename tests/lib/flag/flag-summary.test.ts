/** The daily list of flags: once a day, when something changed, the worst first, with links; the way out of RFC 8058. */
import { beforeEach, describe, expect, it } from 'vitest'
import { type FlagId, newId } from '#db/ids.ts'
import { inTransaction } from '#db/org-db.ts'
import { addFlag, closeFlag, listOpenFlags } from '#db/queries/flag.ts'
import { listSuppressions } from '#db/queries/suppression.ts'
import { sendFlagSummary } from '#lib/flag/send-flag-summary.server.ts'
import { followLink, readLink } from '#lib/tip/follow-link.server.ts'
import { NOW_MS } from '../../support/factories.ts'
import { asSent } from '../../support/outbox.ts'
import { COLD, makeWorld, unitOf, type World } from '../../support/world.ts'

const DAY_MS = 86_400_000
let world: World
beforeEach(async () => {
  world = await makeWorld()
})
const dayAt = (days: number) => new Date(NOW_MS + days * DAY_MS).toISOString().slice(0, 10)
const send = (days = 0, by = world.landlord) =>
  sendFlagSummary(by, { propertyId: world.building.propertyId, day: dayAt(days), nowMs: NOW_MS + days * DAY_MS })
const letters = async () =>
  (await world.db.selectFrom('message').where('kind', '=', 'flag-summary').selectAll().orderBy('queued_at_ms').execute()).map((row) => ({
    ...row,
    ...asSent(row),
  }))
const raise = (summary: string, severity: 'dangerous' | 'cold' | 'attention', atMs = NOW_MS) =>
  inTransaction(world.landlord, (trx) =>
    addFlag(trx, {
      id: newId<FlagId>(),
      propertyId: world.building.propertyId,
      unitId: unitOf(world, COLD).unitId,
      kind: severity === 'dangerous' ? 'may-never-stop' : 'growth-range',
      severity,
      summary,
      evidence: { lines: [], shortfallMin: null, day: null },
      openedAtMs: atMs,
    }),
  )
const closeAll = (atMs: number) =>
  inTransaction(world.landlord, async (trx) => {
    for (const { id } of await listOpenFlags(trx, {}))
      await closeFlag(trx, id, { atMs, because: 'computation', byPersonId: null, note: null, untilDay: null })
  })

describe('sendFlagSummary', () => {
  it('names what to do in the subject, the worst first, each flag with its unit’s address, the time with its zone', async () => {
    await raise('nothing ends it', 'dangerous')
    const { open } = await send()
    const [letter] = await letters()
    expect(letter?.subject).toMatch(new RegExp(`^See to \\d+ dangerous flags? at .+ \\(${open} open\\)$`))
    expect(letter?.text.indexOf('Dangerous')).toBeLessThan(letter?.text.indexOf('Runs cold') ?? 0)
    expect(letter?.text).toContain('nothing ends it')
    expect(letter?.text).toMatch(/\/p\/[\w-]+\/units\/Flat%205/)
    expect(letter?.text).toContain('Tuesday 1 December, 12:00 (London)')
    expect(letter?.html).toContain('<ul')
    expect(letter?.headers['List-Unsubscribe-Post']).toBe('List-Unsubscribe=One-Click')
  })

  it('comes once a day, and not again while the same flags are open as severe as they were', async () => {
    expect(await send()).toMatchObject({ queued: 1 })
    expect(await send()).toMatchObject({ queued: 0, unchanged: 1 })
    expect(await send(1)).toMatchObject({ queued: 0, unchanged: 1 })
    await world.db
      .updateTable('flag')
      .set({ summary: '3 min shorter', seen_at_ms: NOW_MS + 1 })
      .execute()
    expect(await send(2)).toMatchObject({ queued: 0 })
  })

  it('comes again when a flag opens, grows worse or closes, and says what is new', async () => {
    await send()
    await raise('warm for hours', 'attention', NOW_MS + DAY_MS)
    expect(await send(1)).toMatchObject({ queued: 1 })
    expect((await letters())[1]?.text).toMatch(/warm for hours \(new\)/)
    await world.db.updateTable('flag').set({ severity: 'dangerous' }).where('kind', '=', 'growth-range').execute()
    expect(await send(2)).toMatchObject({ queued: 1 })
    await closeAll(NOW_MS + 2.5 * DAY_MS)
    expect(await send(3)).toMatchObject({ queued: 1, open: 0 })
    const last = (await letters())[3]
    expect(last?.subject).toMatch(/^Nothing to see to at /)
    expect(last?.text).toMatch(/\d+ flags closed since you were last told\./)
    expect(await send(4)).toMatchObject({ queued: 0 })
  })

  it('tells again what a letter that never left would have told', async () => {
    await send()
    await world.db.updateTable('message').set({ state: 'expired' }).execute()
    expect(await send(1)).toMatchObject({ queued: 1 })
  })

  it('says nothing to a landlord of a building without flags who was never told any', async () => {
    await closeAll(NOW_MS - 1)
    expect(await send()).toMatchObject({ queued: 0, unchanged: 1 })
  })

  it('is stopped by one POST of its own link, for its reader and for this kind', async () => {
    await send()
    const url = (await letters())[0]?.headers['List-Unsubscribe'] ?? ''
    const token = /\/t\/([^>]+)>/.exec(url)?.[1] ?? ''
    expect(readLink(token, NOW_MS)).toEqual({ kind: 'unsubscribe', letters: 'flag-summary' })
    await followLink(world.db, { token, nowMs: NOW_MS })
    expect(await listSuppressions(world.landlord)).toMatchObject([{ kind: 'flag-summary', reason: 'unsubscribe' }])
    await raise('later', 'dangerous', NOW_MS + DAY_MS)
    expect(await send(1)).toMatchObject({ queued: 0, unchanged: 0 })
  })

  it('is not for other roles, nor about another organisation’s property', async () => {
    for (const person of [world.tenant, world.electrician, world.owner])
      await expect(send(0, person)).rejects.toMatchObject({ code: 'forbidden' })
    await expect(send(0, world.stranger)).rejects.toMatchObject({ code: 'not-found' })
  })
})
