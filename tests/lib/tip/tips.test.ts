/** Tips: what to do and by when, once a day a tenant, stopped in one click; links prove themselves. */
import PostalMime from 'postal-mime'
import { beforeEach, describe, expect, it } from 'vitest'
import { findFeedback } from '#db/queries/feedback.ts'
import { findTenancy } from '#db/queries/tenancy.ts'
import type { Evaluation } from '#db/queries/evaluation.ts'
import { readToken, signToken } from '#lib/mail/link.server.ts'
import { followLink, readLink } from '#lib/tip/follow-link.server.ts'
import { sendTips } from '#lib/tip/send-tips.server.ts'
import { tipOf } from '#lib/tip/tip.ts'
import { NOW_MS } from '../../support/factories.ts'
import { CLOCKED, COLD, makeWorld, unitOf, type World } from '../../support/world.ts'

const DAY_MS = 86_400_000
let world: World
beforeEach(async () => {
  world = await makeWorld()
})
const send = (nowMs = NOW_MS) => sendTips(world.landlord, { propertyId: world.building.propertyId, nowMs })
const letters = () => world.db.selectFrom('message').where('kind', '=', 'tip').selectAll().execute()
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
    const headers = JSON.parse(letter.headers) as Record<string, string>
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
    expect(readLink(token, NOW_MS)).toEqual({ kind: 'feedback', day: '2026-12-02', verdict: 'cold' })
    expect(await findFeedback(world.landlord, unitOf(world, COLD).tenancyId, '2026-12-02')).toBeNull()
    await followLink(world.db, { token, nowMs: NOW_MS })
    expect(await findFeedback(world.landlord, unitOf(world, COLD).tenancyId, '2026-12-02')).toBe('cold')
  })
  it('stops the tips', async () => {
    await send()
    await followLink(world.db, { token: tokenIn((await letterTo(COLD)).text, 'Stop these mails'), nowMs: NOW_MS })
    expect((await findTenancy(world.landlord, unitOf(world, COLD).tenancyId))?.tips).toBe('never')
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

describe('tipOf', () => {
  it('says the evening before when the start falls there', () => {
    const need = {
      need: { readyByMin: 30, count: 1, minutesEach: 8, gapMin: 5, flowLPerMin: 7, useTemperatureC: 40 },
      status: 'ready',
      startByMin: -25,
      readyAtMin: 10,
      minutesWanted: 8,
      minutesServed: 8,
      nextBestReadyByMin: [],
    }
    const evaluation = { status: 'ready', outcome: { needs: [need], clockChange: null, reason: '' } } as unknown as Evaluation
    expect(tipOf({ evaluation, pressed: true, when: 'tomorrow, Wednesday' }).subject).toBe(
      'Press the timer by 23:35 the evening before tomorrow, Wednesday',
    )
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
