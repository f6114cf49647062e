/** Delivery over real SMTP conversations, read back by an independent parser. Reply codes: RFC 5321 4.2. */
import { describe, expect, it } from 'vitest'
import { deliverMail, MAX_ATTEMPTS } from '#lib/mail/deliver.server.ts'
import { smtpTransport } from '#lib/mail/transport.server.ts'
import { freshDatabase } from '../../support/database.ts'
import { makeLandlord } from '../../support/factories.ts'
import { LETTER_AT_MS, queue, states } from '../../support/outbox.ts'
import { fakeSmtp, type SmtpRecipe } from '../../support/smtp.ts'

/** A one-pixel PNG, https://www.w3.org/TR/png-3/ . */
const PIXEL = 'iVBORw0KGgoAAAANSUhEUgAAAAEAAAABCAYAAAAfFcSJAAAADUlEQVR42mNk+M9QDwADhgGAWjR9awAAAABJRU5ErkJggg=='

async function bench(recipe: SmtpRecipe = {}) {
  const db = await freshDatabase()
  const org = await makeLandlord(db)
  const smtp = await fakeSmtp(recipe)
  const transport = smtpTransport(smtp.url, 'Dwellhour <post@dwellhour.example>', 2_000)
  const round = (nowMs = LETTER_AT_MS) => deliverMail({ db, transport, holder: 'worker', now: () => nowMs, limit: 50 })
  return { db, org, smtp, round, end: () => smtp.close() }
}

describe('deliverMail', () => {
  it('sends text, HTML and the inline image with a stable Message-ID, the date of queuing and Auto-Submitted', async () => {
    const { db, org, smtp, round, end } = await bench()
    await queue(org, {
      html: '<p>Warm <img src="cid:strip@dwellhour" alt="a run from 05:10 to 06:50"></p>',
      headers: { 'List-Unsubscribe': '<https://dwellhour.example/u/1>' },
      attachments: [{ contentId: 'strip@dwellhour', filename: 'strip.png', contentType: 'image/png', base64: PIXEL }],
    })
    expect(await round()).toEqual({ sent: 1, retried: 0, failed: 0, bounced: 0, ambiguous: 0, suppressed: 0, expired: 0 })
    const [mail] = await smtp.parsed()
    const [row] = await states(db)
    expect(row).toMatchObject({ state: 'sent', error: null })
    expect(mail?.messageId).toBe(row?.message_id)
    expect(Date.parse(mail?.date ?? '')).toBe(LETTER_AT_MS)
    expect(mail?.from?.address).toBe('post@dwellhour.example')
    expect(mail?.to?.[0]?.address).toBe('tenant@quill.example')
    expect(mail?.subject).toBe('Tomorrow: press the timer by 06:05')
    expect(mail?.text).toContain('Hot for two showers from 07:00.')
    expect(mail?.html).toContain('cid:strip@dwellhour')
    expect(mail?.headers).toContainEqual(expect.objectContaining({ key: 'auto-submitted', value: 'auto-generated' }))
    expect(mail?.headers).toContainEqual(expect.objectContaining({ key: 'list-unsubscribe', value: '<https://dwellhour.example/u/1>' }))
    expect(mail?.attachments[0]).toMatchObject({ contentId: '<strip@dwellhour>', mimeType: 'image/png', disposition: 'inline' })
    expect(Buffer.from(mail?.attachments[0]?.content as ArrayBuffer).toString('base64')).toBe(PIXEL)
    await end()
  })

  it('sends a letter of one recipient, kind and cause once, however often it is queued and delivered', async () => {
    const { org, smtp, round, end } = await bench()
    expect(await queue(org)).toBe('queued')
    expect(await queue(org, { toEmail: 'Tenant@Quill.example' })).toBe('already-queued')
    await round()
    await round()
    expect(await queue(org)).toBe('already-queued')
    await round()
    expect(smtp.accepted).toHaveLength(1)
    await end()
  })

  it('tries a 4xx again with growing pauses and gives up after the last', async () => {
    const { db, org, smtp, round, end } = await bench({ refuseRecipient: () => 450 })
    await queue(org)
    let nowMs = LETTER_AT_MS
    const pausesMin: number[] = []
    for (let tries = 1; tries < MAX_ATTEMPTS; tries++) {
      expect(await round(nowMs)).toMatchObject({ retried: 1 })
      const nextMs = (await states(db))[0]?.next_attempt_at_ms ?? 0
      pausesMin.push((nextMs - nowMs) / 60_000)
      expect(await round(nextMs - 1)).toMatchObject({ retried: 0 })
      nowMs = nextMs
    }
    expect(pausesMin).toEqual([1, 5, 25, 125, 625])
    expect(await round(nowMs)).toMatchObject({ failed: 1 })
    expect((await states(db))[0]).toMatchObject({ state: 'failed', error: 'Given up after 6 tries. The mail server answered 450.' })
    expect(smtp.accepted).toHaveLength(0)
    await end()
  })

  it('takes a 5xx about the message as failed, about the recipient as bounced, both for good', async () => {
    const { db, org, round, end } = await bench({
      refuseRecipient: (address) => (address.startsWith('gone') ? 550 : null),
      refuseMessage: (source) => (source.includes('big@') ? 552 : null),
    })
    await queue(org, { toEmail: 'gone@quill.example' })
    await queue(org, { toEmail: 'big@quill.example' })
    expect(await round()).toMatchObject({ failed: 1, bounced: 1, sent: 0 })
    expect((await states(db)).map((row) => [row.state, row.error])).toEqual([
      ['failed', 'The mail server answered 552.'],
      ['bounced', 'The mail server answered 550.'],
    ])
    await end()
  })

  it('tries again when nobody listens', async () => {
    const { db, org, round, end } = await bench()
    await end()
    await queue(org)
    expect(await round()).toMatchObject({ retried: 1 })
    expect((await states(db))[0]).toMatchObject({ state: 'queued', attempts: 1 })
  })

  it('tries again when the connection breaks before the message was handed over', async () => {
    const { db, org, smtp, round, end } = await bench({ dropAt: 'recipient' })
    await queue(org)
    expect(await round()).toMatchObject({ retried: 1 })
    expect((await states(db))[0]?.state).toBe('queued')
    expect(smtp.accepted).toHaveLength(0)
    await end()
  })

  it('shows as ambiguous, and never repeats, a letter whose reply was lost after it was handed over', async () => {
    const { db, org, smtp, round, end } = await bench({ dropAt: 'after-message' })
    await queue(org)
    expect(await round()).toMatchObject({ ambiguous: 1 })
    expect((await states(db))[0]?.state).toBe('ambiguous')
    await round(LETTER_AT_MS + 86_400_000)
    expect(smtp.accepted).toHaveLength(1)
    await end()
  })

  it('turns a letter found in sending into ambiguous', async () => {
    const { db, org, smtp, round, end } = await bench()
    await queue(org)
    await db.updateTable('message').set({ state: 'sending' }).execute()
    expect(await round()).toMatchObject({ ambiguous: 1, sent: 0 })
    expect(smtp.accepted).toHaveLength(0)
    await end()
  })

  it('leaves the outbox alone while another host delivers', async () => {
    const { db, org, round, end } = await bench()
    await queue(org)
    await db
      .insertInto('job_lease')
      .values({
        job: 'mail',
        scope: 'outbox',
        period: 'one at a time',
        organisation_id: null,
        holder: 'elsewhere|1|x',
        lease_until_ms: LETTER_AT_MS + 1,
        attempts: 1,
        done_at_ms: null,
      })
      .execute()
    expect(await round()).toMatchObject({ sent: 0 })
    expect(await round(LETTER_AT_MS + 1)).toMatchObject({ sent: 1 })
    await end()
  })
})
