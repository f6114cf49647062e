/** What a landlord reads in the post, and nobody else. */
import { describe, expect, it } from 'vitest'
import { newId, type MessageId } from '#db/ids.ts'
import { inTransaction } from '#db/org-db.ts'
import { queueMessage } from '#lib/mail/queue-message.server.ts'
import { loadMessages } from '#lib/message/load-messages.server.ts'
import { stateWords } from '#lib/message/view.ts'
import { freshDatabase } from '../../support/database.ts'
import { makeLandlord, makePerson, NOW_MS, scopeFor } from '../../support/factories.ts'
import { queue, tipLetter } from '../../support/outbox.ts'
import { COLD, makeWorld, unitOf } from '../../support/world.ts'

const asked = (messageId: string | null = null, query: Readonly<Record<string, string>> = {}) => ({ messageId, query, nowMs: NOW_MS })

describe('loadMessages', () => {
  it('lists the organisation’s letters with their state and opens one with its images in place', async () => {
    const db = await freshDatabase()
    const org = await makeLandlord(db)
    await queue(org, {
      html: '<img src="cid:strip">',
      attachments: [{ contentId: 'strip', filename: 'strip.png', contentType: 'image/png', base64: 'AAAA' }],
    })
    const { messages, counts, found } = await loadMessages(org, asked())
    expect(messages).toMatchObject([{ toEmail: 'tenant@quill.example', state: 'queued', kind: 'tip' }])
    expect({ counts, found }).toEqual({ counts: { queued: 1 }, found: 1 })
    const { opened } = await loadMessages(org, asked(messages[0]?.id ?? ''))
    expect(opened?.html).toBe('<img src="data:image/png;base64,AAAA">')
  })

  it('narrows by state, group of states, kind, property and unit, and counts what it found', async () => {
    const { landlord, building, db } = await makeWorld()
    const place = { propertyId: building.propertyId, unitId: unitOf({ building }, COLD).unitId }
    await queue(landlord, { cause: 'one', ...place })
    await queue(landlord, { cause: 'two', kind: 'digest', propertyId: building.propertyId })
    await queue(landlord, { cause: 'three', kind: 'invitation' })
    await db.updateTable('message').set({ state: 'bounced' }).where('cause', '=', 'three').execute()
    const found = async (query: Readonly<Record<string, string>>) => {
      const page = await loadMessages(landlord, asked(null, query))
      return page.messages.map(({ kind }) => kind).sort()
    }
    expect(await found({ state: 'look' })).toEqual(['invitation'])
    expect(await found({ state: 'waiting' })).toEqual(['digest', 'tip'])
    expect(await found({ kind: 'digest' })).toEqual(['digest'])
    expect(await found({ unit: COLD.toLowerCase() })).toEqual(['tip'])
    expect(await found({ unit: 'nowhere' })).toEqual([])
    const property = (await loadMessages(landlord, asked())).properties[0]?.slug ?? ''
    expect(await found({ property })).toEqual(['digest', 'tip'])
    expect(await found({ state: 'nonsense', kind: '', page: 'x' })).toHaveLength(3)
  })

  it('never shows what only the recipient may read', async () => {
    const db = await freshDatabase()
    const org = await makeLandlord(db)
    const token = 'k3JvTn0mR5bq-8sWcYxZ'
    await inTransaction(org, (trx) =>
      queueMessage(trx, {
        ...tipLetter(),
        text: `Accept: http://localhost/invitation/${token}`,
        html: `<a href="http://localhost/invitation/${token}">Accept</a>`,
        headers: { 'List-Unsubscribe': `<http://localhost/t/${token}>` },
        secrets: [{ token }],
      }),
    )
    const [message] = (await loadMessages(org, asked())).messages
    const { opened } = await loadMessages(org, asked(message?.id ?? ''))
    expect(JSON.stringify(opened)).not.toContain(token)
    expect(opened).toMatchObject({ text: 'Accept: http://localhost/invitation/…', hasPrivateLinks: true })
  })

  it('answers not found for another organisation’s letter and for what is no id', async () => {
    const db = await freshDatabase()
    const [org, other] = [await makeLandlord(db), await makeLandlord(db)]
    await queue(other)
    const theirs = (await loadMessages(other, asked())).messages[0]?.id ?? ''
    expect((await loadMessages(org, asked())).messages).toEqual([])
    for (const messageId of [theirs, newId<MessageId>(), 'NO ID'])
      await expect(loadMessages(org, asked(messageId))).rejects.toMatchObject({ code: 'not-found' })
  })

  it('is for landlords only', async () => {
    const db = await freshDatabase()
    const org = await makeLandlord(db)
    const personId = await makePerson(db)
    const tenant = await scopeFor(db, { organisationId: org.scope.organisationId, personId, roles: ['tenant', 'owner', 'electrician'] })
    await expect(loadMessages(tenant, asked())).rejects.toMatchObject({ code: 'forbidden' })
  })
})

describe('stateWords', () => {
  const letter = { state: 'queued', attempts: 0, nextAttemptAtMs: Date.UTC(2026, 1, 2, 17, 5), error: null, property: null } as const

  it('says that a letter of a paused property is held', () => {
    expect(stateWords({ ...letter, property: { zone: 'Europe/London', sendingPausedAtMs: 1 } }).word).toBe('Held')
  })

  it('says why and when a letter is tried again, in the property’s time', () => {
    const words = stateWords({
      ...letter,
      attempts: 1,
      error: 'The mail server answered 450.',
      property: { zone: 'America/Chicago', sendingPausedAtMs: null },
    })
    expect(words.more).toBe('The mail server answered 450. Next try 2 Feb 2026, 11:05 (Chicago).')
  })

  it('says of an ambiguous letter that it is not sent again', () => {
    expect(stateWords({ ...letter, state: 'ambiguous', error: 'Sending was interrupted.' })).toMatchObject({
      more: 'Sending was interrupted. It is not sent again.',
      needsLooking: true,
    })
  })
})
