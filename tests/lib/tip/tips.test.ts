/** Tips: what to do and by when, once a day a tenant, stopped in one click; links prove themselves. */
import PostalMime from 'postal-mime'
import { beforeEach, describe, expect, it } from 'vitest'
import { findFeedback } from '#db/queries/feedback.ts'
import { inTransaction } from '#db/org-db.ts'
import { findEvaluation } from '#db/queries/evaluation.ts'
import { findPreference } from '#db/queries/preference.ts'
import { changeTenancyEnd, changeTenancyTips, findTenancy } from '#db/queries/tenancy.ts'
import { evaluateProperty } from '#lib/evaluation/evaluate-property.server.ts'
import { readToken, signToken } from '#lib/mail/link.server.ts'
import { setPreference } from '#lib/preference/set-preference.server.ts'
import { followLink, readLink } from '#lib/tip/follow-link.server.ts'
import { sendTips } from '#lib/tip/send-tips.server.ts'
import { NOW_MS } from '../../support/factories.ts'
import { asSent } from '../../support/outbox.ts'
import { CLOCKED, COLD, makeWorld, unitOf, type World } from '../../support/world.ts'

const DAY_MS = 86_400_000
let world: World
beforeEach(async () => {
  world = await makeWorld()
})
const send = (nowMs = NOW_MS) => sendTips(world.landlord, { propertyId: world.building.propertyId, nowMs })
const letters = async () =>
  (await world.db.selectFrom('message').where('kind', '=', 'tip').selectAll().execute()).map((row) => ({ ...row, ...asSent(row) }))
const letterTo = async (code: string) => {
  const { tenancyId } = unitOf(world, code)
  const letter = (await letters()).find((one) => one.cause.startsWith(tenancyId))
  if (!letter) throw new Error(`no letter for ${code}`)
  return letter
}
const tokenIn = (text: string, label: string) => new RegExp(`${label}: \\S+/t/(\\S+)`).exec(text)?.[1] ?? ''

describe('sendTips', () => {
  it('queues one letter a tenant and none the second time', async () => {
    const first = await send()
    expect(first.queued).toBe(first.due)
    expect(first.due).toBe(8)
    expect(await send()).toMatchObject({ due: 8, queued: 0, alreadyQueued: 8 })
    expect(await letters()).toHaveLength(8)
  })
  it('says by when to press, in the subject, with the zone in the text', async () => {
    await send()
    const letter = await letterTo('Flat 1')
    expect(letter.subject).toMatch(/^Press the timer by \d\d:\d\d tomorrow, Wednesday$/)
    expect(letter.text).toContain('(London)')
    expect(letter.text).toMatch(/Hot from \d\d:\d\d for a shower of 8 minutes, until \d\d:\d\d\./)
  })
  it('tells a unit on a clock that there is nothing to press', async () => {
    await send()
    expect((await letterTo(CLOCKED)).subject).toContain('nothing to press')
  })
  it('says plainly that the water will be short', async () => {
    await send()
    const letter = await letterTo(COLD)
    expect(letter.subject).toContain('the water will be short')
  })
  it('carries the strip with words for whoever does not see it, and one-click headers (RFC 8058)', async () => {
    await send()
    const letter = await letterTo('Flat 1')
    const { headers } = letter
    expect(headers['List-Unsubscribe']).toMatch(/^<http\S+\/t\/\S+>$/)
    expect(headers['List-Unsubscribe-Post']).toBe('List-Unsubscribe=One-Click')
    expect(letter.html).toMatch(/<img src="cid:day-strip" alt="[^"]{20,}"/)
    const [strip] = JSON.parse(letter.attachments) as { base64: string }[]
    expect(
      Buffer.from(strip?.base64 ?? '', 'base64')
        .subarray(1, 4)
        .toString(),
    ).toBe('PNG')
  })
  it('tells whoever wants to hear of changes only when what was told last no longer holds', async () => {
    const { tenancyId, unitId } = unitOf(world, 'Flat 1')
    await inTransaction(world.landlord, (trx) => changeTenancyTips(trx, tenancyId, 'on-change'))
    const told = async () => (await letters()).filter((one) => one.cause.startsWith(tenancyId)).length
    await send()
    expect(await told()).toBe(1)
    await evaluateProperty(world.landlord, { propertyId: world.building.propertyId, nowMs: NOW_MS + DAY_MS })
    await send(NOW_MS + DAY_MS)
    expect(await told()).toBe(1)
    // An hour earlier from now on; today's figures are computed again with it, and yet tomorrow's tip is news.
    const week = (await findPreference(world.landlord, tenancyId))?.week ?? []
    const earlier = week.map((day) => day.map((shower) => ({ ...shower, readyByMinuteOfDay: shower.readyByMinuteOfDay - 60 })))
    await setPreference(world.landlord, { tenancyId, input: { week: earlier, willing: [] }, nowMs: NOW_MS + DAY_MS })
    await send(NOW_MS + DAY_MS)
    expect(await told()).toBe(2)
    expect((await findEvaluation(world.landlord, unitId, '2026-12-03'))?.startByMin).toBeLessThan(6 * 60)
  })
  it('tells the week to whoever wants one letter a week, on the evening before its Monday', async () => {
    const { tenancyId } = unitOf(world, 'Flat 1')
    await inTransaction(world.landlord, (trx) => changeTenancyTips(trx, tenancyId, 'weekly'))
    const told = async () => (await letters()).filter((one) => one.cause.startsWith(tenancyId))
    await send()
    expect(await told()).toEqual([])
    // Sunday 6 December.
    const sundayMs = NOW_MS + 5 * DAY_MS
    await evaluateProperty(world.landlord, { propertyId: world.building.propertyId, nowMs: sundayMs })
    await send(sundayMs)
    const [letter] = await told()
    expect(letter?.subject).toContain('tomorrow, Monday')
    expect(letter?.text).toMatch(/Tuesday to Thursday: press by \d\d:\d\d\.\n\nFriday: press by \d\d:\d\d and \d\d:\d\d\./)
    expect(letter?.text).toMatch(/Saturday and Sunday: press by \d\d:\d\d/)
  })
  it('is told to nobody whose tenancy ends tomorrow', async () => {
    const { tenancyId } = unitOf(world, 'Flat 1')
    await inTransaction(world.landlord, (trx) => changeTenancyEnd(trx, tenancyId, '2026-12-02'))
    await send()
    expect((await letters()).some((one) => one.cause.startsWith(tenancyId))).toBe(false)
  })
  it("answers not found for another organisation's property, and is forbidden to tenants", async () => {
    const { propertyId } = world.building
    await expect(sendTips(world.stranger, { propertyId, nowMs: NOW_MS })).rejects.toMatchObject({ code: 'not-found' })
    await expect(sendTips(world.tenant, { propertyId, nowMs: NOW_MS })).rejects.toMatchObject({ code: 'forbidden' })
    expect(await letters()).toEqual([])
  })
  it('leaves out whoever wants none', async () => {
    await send()
    await followLink(world.db, { token: tokenIn((await letterTo(COLD)).text, 'Stop these mails'), nowMs: NOW_MS })
    expect((await send(NOW_MS + DAY_MS)).due).toBe(7)
  })
})

describe('followLink', () => {
  it('notes hot or cold for the one day and tenancy it names', async () => {
    await send()
    const token = tokenIn((await letterTo(COLD)).text, 'It was cold')
    expect(readLink(token, NOW_MS)).toEqual({
      kind: 'feedback',
      day: '2026-12-02',
      verdict: 'cold',
      opensAtMs: Date.UTC(2026, 11, 2),
    })
    expect(await findFeedback(world.landlord, unitOf(world, COLD).tenancyId, '2026-12-02')).toBeNull()
    await followLink(world.db, { token, nowMs: NOW_MS + DAY_MS })
    expect(await findFeedback(world.landlord, unitOf(world, COLD).tenancyId, '2026-12-02')).toBe('cold')
  })
  it('notes nothing about a day that is yet to come', async () => {
    await send()
    const token = tokenIn((await letterTo(COLD)).text, 'It was cold')
    await expect(followLink(world.db, { token, nowMs: Date.UTC(2026, 11, 2) - 1 })).rejects.toMatchObject({ code: 'invalid' })
    expect(await findFeedback(world.landlord, unitOf(world, COLD).tenancyId, '2026-12-02')).toBeNull()
  })
  it('stops the tips, and says so in the audit', async () => {
    await send()
    await followLink(world.db, { token: tokenIn((await letterTo(COLD)).text, 'Stop these mails'), nowMs: NOW_MS })
    expect((await findTenancy(world.landlord, unitOf(world, COLD).tenancyId))?.tips).toBe('never')
    const entry = await world.db.selectFrom('audit_entry').where('action', '=', 'unsubscribe').selectAll().executeTakeFirstOrThrow()
    expect(entry).toMatchObject({ subject_id: unitOf(world, COLD).tenancyId, after: '{"tips":"never"}' })
  })
  it('refuses a touched, a foreign and an old link', async () => {
    await send()
    const token = tokenIn((await letterTo(COLD)).text, 'It was hot')
    const [body = '', mac = ''] = token.split('.')
    for (const bad of [`${body.slice(0, -2)}AA.${mac}`, `${body}.${mac.slice(0, -2)}AA`, body, 'x.y', '']) {
      await expect(followLink(world.db, { token: bad, nowMs: NOW_MS })).rejects.toMatchObject({ code: 'expired' })
    }
    await expect(followLink(world.db, { token, nowMs: NOW_MS + 30 * DAY_MS })).rejects.toMatchObject({ code: 'expired' })
  })
})

describe('signToken and readToken', () => {
  const claims = { purpose: 'x', expiresAtMs: NOW_MS, subject: { a: 'b' } }
  it('ends at its expiry, exclusive, and under another key', () => {
    const token = signToken(claims, 'k'.repeat(40))
    expect(readToken(token, { secret: 'k'.repeat(40), nowMs: NOW_MS - 1 })).toEqual(claims)
    expect(readToken(token, { secret: 'k'.repeat(40), nowMs: NOW_MS })).toBeNull()
    expect(readToken(token, { secret: 'j'.repeat(40), nowMs: NOW_MS - 1 })).toBeNull()
  })
})

describe('the letter', () => {
  it('is read by an independent parser with both parts', async () => {
    await send()
    const { html, text } = await letterTo('Flat 1')
    const parsed = await PostalMime.parse(`Content-Type: text/html; charset=utf-8\r\n\r\n${html}`)
    expect(parsed.html).toContain('It was hot')
    expect(text).toContain('It was hot: http')
  })
})
