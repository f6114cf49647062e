/** Letters that must not leave: out of date, of a paused property, to an address that refused or whose owner said no more. */
import { describe, expect, it } from 'vitest'
import { inTransaction } from '#db/org-db.ts'
import { addSuppression, listSuppressions, removeSuppression } from '#db/queries/suppression.ts'
import { changeTenancyTips } from '#db/queries/tenancy.ts'
import { deliverMail } from '#lib/mail/deliver.server.ts'
import { queueMessage } from '#lib/mail/queue-message.server.ts'
import { smtpTransport } from '#lib/mail/transport.server.ts'
import { pauseSending } from '#lib/message/pause-sending.server.ts'
import { freshDatabase } from '../../support/database.ts'
import { makeLandlord } from '../../support/factories.ts'
import { LETTER_AT_MS, queue, states, tipLetter } from '../../support/outbox.ts'
import { fakeSmtp, type SmtpRecipe } from '../../support/smtp.ts'
import { makeWorld, unitOf, WARM } from '../../support/world.ts'

const MIN_MS = 60_000

async function postOf(db: Awaited<ReturnType<typeof freshDatabase>>, recipe: SmtpRecipe = {}) {
  const smtp = await fakeSmtp(recipe)
  const transport = smtpTransport(smtp.url, 'Dwellhour <post@dwellhour.example>', 2_000)
  const round = (nowMs = LETTER_AT_MS) => deliverMail({ db, transport, holder: 'worker', now: () => nowMs, limit: 50 })
  return { smtp, round }
}
async function bench(recipe: SmtpRecipe = {}) {
  const db = await freshDatabase()
  return { db, org: await makeLandlord(db), ...(await postOf(db, recipe)) }
}

describe('a letter with an end', () => {
  it('leaves before it and not from its first instant on', async () => {
    const { db, org, smtp, round } = await bench()
    await queue(org, { toEmail: 'in-time@quill.example', expiresAtMs: LETTER_AT_MS + 1 })
    await queue(org, { toEmail: 'late@quill.example', expiresAtMs: LETTER_AT_MS })
    expect(await round()).toMatchObject({ sent: 1, expired: 1 })
    expect((await states(db)).map(({ to_email, state }) => [to_email, state])).toEqual([
      ['in-time@quill.example', 'sent'],
      ['late@quill.example', 'expired'],
    ])
    await smtp.close()
  })

  it('is not sent after an outage of the mail server that outlasted it', async () => {
    let down = true
    const { db, org, smtp, round } = await bench({ refuseRecipient: () => (down ? 450 : null) })
    await queue(org, { expiresAtMs: LETTER_AT_MS + 60 * MIN_MS })
    expect(await round()).toMatchObject({ retried: 1 })
    down = false
    expect(await round(LETTER_AT_MS + 61 * MIN_MS)).toMatchObject({ sent: 0, expired: 1 })
    expect(smtp.accepted).toHaveLength(0)
    expect((await states(db))[0]?.state).toBe('expired')
    await smtp.close()
  })
})

describe('a letter whose links are private', () => {
  it('leaves with its links, the same at every attempt, and keeps no token once it has left', async () => {
    let refusals = 1
    const { db, org, smtp, round } = await bench({ refuseMessage: () => (refusals-- > 0 ? 451 : null) })
    const token = 'c0ffee_c0ffee-c0ffee_c0ffee'
    const claims = { purpose: 'unsubscribe', expiresAtMs: LETTER_AT_MS + 1e9, subject: { tenancyId: 't' } }
    const { signToken, signingSecret } = await import('#lib/mail/link.server.ts')
    const signed = signToken(claims, signingSecret())
    await inTransaction(org, (trx) =>
      queueMessage(trx, {
        ...tipLetter(),
        text: `Accept http://localhost/invitation/${token} or stop http://localhost/t/${signed}`,
        html: `<a href="http://localhost/invitation/${token}">Accept</a>`,
        headers: { 'List-Unsubscribe': `<http://localhost/t/${signed}>` },
        secrets: [{ token }, { token: signed, claims }],
      }),
    )
    const stored = async () => JSON.stringify(await db.selectFrom('message').selectAll().execute())
    expect(await stored()).not.toContain(signed)
    expect(await round()).toMatchObject({ retried: 1 })
    expect(await stored()).toContain(token)
    expect(await round(LETTER_AT_MS + MIN_MS)).toMatchObject({ sent: 1 })
    expect(await stored()).not.toContain(token)
    const [mail] = await smtp.parsed()
    expect(mail?.text).toContain(`Accept http://localhost/invitation/${token} or stop http://localhost/t/${signed}`)
    expect(mail?.html).toContain(`/invitation/${token}"`)
    expect(mail?.headers.find(({ key }) => key === 'list-unsubscribe')?.value.replaceAll(/\s/g, '')).toBe(`<http://localhost/t/${signed}>`)
    await smtp.close()
  })

  it('keeps no token either when it was interrupted, refused or went out of date', async () => {
    const { db, org, smtp, round } = await bench({ refuseMessage: (source) => (source.includes('refused@') ? 554 : null) })
    const token = 'c0ffee_c0ffee-c0ffee_c0ffee'
    for (const [toEmail, expiresAtMs] of [
      ['interrupted@quill.example', undefined],
      ['refused@quill.example', undefined],
      ['late@quill.example', LETTER_AT_MS],
    ] as const)
      await inTransaction(org, (trx) =>
        queueMessage(trx, {
          ...tipLetter(),
          toEmail,
          text: `/confirm/${token}`,
          secrets: [{ token }],
          ...(expiresAtMs ? { expiresAtMs } : {}),
        }),
      )
    await db.updateTable('message').set({ state: 'sending' }).where('to_email', '=', 'interrupted@quill.example').execute()
    await round()
    expect((await states(db)).map(({ state }) => state)).toEqual(['ambiguous', 'expired', 'failed'])
    expect(JSON.stringify(await db.selectFrom('message').selectAll().execute())).not.toContain(token)
    await smtp.close()
  })
})

describe('an address that gets nothing', () => {
  it('is one that a mail server has refused for good, until it is released', async () => {
    const { db, org, smtp, round } = await bench({ refuseRecipient: () => 550 })
    await queue(org, { cause: 'first' })
    expect(await round()).toMatchObject({ bounced: 1 })
    expect(await listSuppressions(org)).toMatchObject([{ email: 'tenant@quill.example', kind: '*', reason: 'bounce', atMs: LETTER_AT_MS }])
    await queue(org, { cause: 'second', toEmail: 'Tenant@quill.example' })
    expect(await round()).toMatchObject({ suppressed: 1, bounced: 0 })
    await inTransaction(org, (trx) => removeSuppression(trx, { email: 'tenant@quill.example', kind: '*', reason: 'bounce' }))
    await queue(org, { cause: 'third' })
    expect(await round()).toMatchObject({ bounced: 1 })
    expect((await states(db)).map(({ state }) => state).sort()).toEqual(['bounced', 'bounced', 'suppressed'])
    await smtp.close()
  })

  it('is given up for no reason that another letter may not meet (RFC 3463: 5.7.1 is policy, 5.2.2 a full mailbox)', async () => {
    for (const words of ['5.7.1 refused by policy', '5.2.2 mailbox full']) {
      const { org, smtp, round } = await bench({ refuseRecipient: () => 550, refusalWords: words })
      await queue(org)
      expect(await round()).toMatchObject({ bounced: 1 })
      expect(await listSuppressions(org)).toEqual([])
      await smtp.close()
    }
  })

  it('is no concern of another organisation', async () => {
    const { db, org, smtp, round } = await bench()
    const other = await makeLandlord(db)
    await inTransaction(org, (trx) =>
      addSuppression(trx, { email: 'tenant@quill.example', kind: '*', reason: 'bounce', detail: 'It bounced.', atMs: 1 }),
    )
    await queue(org)
    await queue(other)
    expect(await round()).toMatchObject({ sent: 1, suppressed: 1 })
    expect(await listSuppressions(other)).toEqual([])
    await smtp.close()
  })

  it('gets the other kinds when its owner stopped one', async () => {
    const { org, smtp, round } = await bench()
    await inTransaction(org, (trx) =>
      addSuppression(trx, { email: 'tenant@quill.example', kind: 'digest', reason: 'unsubscribe', detail: 'No more.', atMs: 1 }),
    )
    await queue(org, { kind: 'digest' })
    await queue(org, { kind: 'visit-done' })
    expect(await round()).toMatchObject({ sent: 1, suppressed: 1 })
    await smtp.close()
  })

  it('is a tenant’s for what waits of that tenancy, as soon as they want no more, and not for their other one', async () => {
    const world = await makeWorld()
    const { smtp, round } = await postOf(world.db)
    const { tenancyId } = unitOf(world, WARM)
    await queue(world.landlord, { cause: 'a', tenancyId })
    await queue(world.landlord, { cause: 'b', tenancyId: unitOf(world, 'Flat 5').tenancyId })
    await inTransaction(world.landlord, (trx) => changeTenancyTips(trx, tenancyId, 'never'))
    expect(await round()).toMatchObject({ sent: 1, suppressed: 1 })
    await smtp.close()
  })
})

describe('pauseSending', () => {
  it('holds what its property sends, lets it go afterwards, drops what went out of date, and is on record', async () => {
    const world = await makeWorld()
    const { smtp, round } = await postOf(world.db)
    const { propertyId } = world.building
    const { slug } = await world.db.selectFrom('property').where('id', '=', propertyId).select('slug').executeTakeFirstOrThrow()
    const set = (sending: string) => pauseSending(world.landlord, { input: { property: slug, sending }, nowMs: LETTER_AT_MS })
    await set('pause')
    await queue(world.landlord, { cause: 'stays', propertyId })
    await queue(world.landlord, { cause: 'ends', propertyId, expiresAtMs: LETTER_AT_MS + 5 })
    await queue(world.landlord, { cause: 'elsewhere' })
    expect(await round()).toMatchObject({ sent: 1 })
    expect(await round(LETTER_AT_MS + 5)).toMatchObject({ sent: 0, expired: 1 })
    await set('resume')
    await set('resume')
    expect(await round(LETTER_AT_MS + 6)).toMatchObject({ sent: 1 })
    const audit = await world.db.selectFrom('audit_entry').where('subject_kind', '=', 'sending').select('action').execute()
    expect(audit.map(({ action }) => action).sort()).toEqual(['pause', 'resume'])
    await smtp.close()
  })

  it('is the landlord’s alone, for their own properties', async () => {
    const world = await makeWorld()
    const input = { property: 'nowhere', sending: 'pause' }
    for (const person of [world.tenant, world.electrician, world.owner])
      await expect(pauseSending(person, { input, nowMs: 1 })).rejects.toMatchObject({ code: 'forbidden' })
    const { slug } = await world.db.selectFrom('property').select('slug').executeTakeFirstOrThrow()
    for (const property of [slug, 'nowhere'])
      await expect(pauseSending(world.stranger, { input: { property, sending: 'pause' }, nowMs: 1 })).rejects.toMatchObject({
        code: 'not-found',
      })
  })
})
