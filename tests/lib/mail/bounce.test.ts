/** Bounces that come back as mail. Report layout: RFC 3464, appendix D and section 2; statuses: RFC 3463. Addresses and hosts are invented. */
import { describe, expect, it } from 'vitest'
import { listSuppressions } from '#db/queries/suppression.ts'
import { deliverMail } from '#lib/mail/deliver.server.ts'
import { readDeliveryReport } from '#lib/mail/delivery-report.ts'
import { recordDeliveryReport } from '#lib/mail/record-bounce.server.ts'
import { freshDatabase } from '../../support/database.ts'
import { makeLandlord } from '../../support/factories.ts'
import { LETTER_AT_MS, queue, states } from '../../support/outbox.ts'

interface Failure {
  readonly messageId: string
  readonly action?: string
  readonly status?: string
  readonly returned?: 'message/rfc822' | 'text/rfc822-headers'
}

const report = ({ messageId, action = 'failed', status = '5.1.1', returned = 'message/rfc822' }: Failure): Buffer =>
  Buffer.from(
    [
      'Date: Tue, 3 Feb 2026 05:30:44 +0000',
      'From: Mail Delivery Subsystem <MAILER-DAEMON@mx.quill.example>',
      'Message-Id: <20260203.0530@mx.quill.example>',
      'To: <post@dwellhour.example>',
      'MIME-Version: 1.0',
      'Content-Type: multipart/report; report-type=delivery-status; boundary="b1/mx.quill.example"',
      'Subject: Returned mail',
      '',
      '--b1/mx.quill.example',
      '',
      'The message could not be delivered.',
      '',
      '--b1/mx.quill.example',
      'content-type: message/delivery-status',
      '',
      'Reporting-MTA: dns; mx.quill.example',
      'Arrival-Date: Tue, 3 Feb 2026 05:30:40 +0000',
      '',
      'Original-Recipient: rfc822;tenant@quill.example',
      'Final-Recipient: RFC822; tenant@quill.example',
      `Action: ${action}`,
      `Status: ${status}\r\n (as the mail system says)`,
      'Diagnostic-Code: smtp; 550 No such user',
      '',
      '--b1/mx.quill.example',
      `content-type: ${returned}`,
      '',
      'Received: from dwellhour.example by mx.quill.example',
      `Message-ID:\r\n ${messageId}`,
      'From: Dwellhour <post@dwellhour.example>',
      'To: tenant@quill.example',
      'Subject: Tomorrow: press the timer by 06:05',
      '',
      'Hot for two showers from 07:00.',
      '--b1/mx.quill.example--',
      '',
    ].join('\r\n'),
  )

async function sentLetter() {
  const db = await freshDatabase()
  const org = await makeLandlord(db)
  await queue(org)
  const transport = { send: () => Promise.resolve({ kind: 'sent' } as const), close: () => undefined }
  await deliverMail({ db, transport, holder: 'worker', now: () => LETTER_AT_MS, limit: 5 })
  const messageId = (await states(db))[0]?.message_id ?? ''
  const record = (failure: Partial<Failure> = {}) =>
    recordDeliveryReport(db, { source: report({ messageId, ...failure }), nowMs: LETTER_AT_MS + 1 })
  return { db, org, messageId, record, state: async () => (await states(db))[0]?.state }
}

describe('readDeliveryReport', () => {
  it('reads the letter’s own Message-ID, not the report’s, and each recipient’s action and status', async () => {
    for (const returned of ['message/rfc822', 'text/rfc822-headers'] as const)
      expect(await readDeliveryReport(report({ messageId: '<a@dwellhour.example>', returned }))).toEqual({
        kind: 'report',
        messageId: '<a@dwellhour.example>',
        recipients: [{ action: 'failed', status: '5.1.1' }],
      })
  })

  it('takes ordinary mail and noise for no report', async () => {
    expect(await readDeliveryReport('From: a@b.example\r\nSubject: Out of office\r\n\r\nBack on Monday.')).toMatchObject({
      kind: 'no-report',
    })
    expect(await readDeliveryReport('\u0000\u0001 nothing')).toMatchObject({ kind: 'no-report' })
  })
})

describe('recordDeliveryReport', () => {
  it('marks the letter as bounced and lets nothing more go to an address that does not exist', async () => {
    const { org, record, state } = await sentLetter()
    expect(await record()).toBe('recorded')
    expect(await state()).toBe('bounced')
    expect(await listSuppressions(org)).toMatchObject([{ email: 'tenant@quill.example', kind: '*', reason: 'bounce' }])
  })

  it('records a full mailbox or a policy without giving up the address', async () => {
    for (const status of ['5.2.2', '5.7.1', '4.4.7']) {
      const { org, record, state } = await sentLetter()
      expect(await record({ status })).toBe('recorded')
      expect(await state()).toBe('bounced')
      expect(await listSuppressions(org)).toEqual([])
    }
  })

  it('leaves a letter alone that is only delayed', async () => {
    const { record, state } = await sentLetter()
    expect(await record({ action: 'delayed', status: '4.4.1' })).toBe('not-a-failure')
    expect(await state()).toBe('sent')
  })

  it('records a report once, and none about somebody else’s letter', async () => {
    const { record } = await sentLetter()
    expect(await record({ messageId: '<other@elsewhere.example>' })).toBe('no-such-letter')
    expect(await record()).toBe('recorded')
    expect(await record()).toBe('already-recorded')
  })
})
