/** What a landlord reads in the post, and nobody else. */
import { describe, expect, it } from 'vitest'
import { newId, type MessageId } from '#db/ids.ts'
import { loadMessages } from '#lib/message/load-messages.server.ts'
import { stateWords } from '#lib/message/view.ts'
import { freshDatabase } from '../../support/database.ts'
import { makeLandlord, makePerson, scopeFor } from '../../support/factories.ts'
import { queue } from '../../support/outbox.ts'

describe('loadMessages', () => {
  it('lists the organisation’s letters with their state and opens one with its images in place', async () => {
    const db = await freshDatabase()
    const org = await makeLandlord(db)
    await queue(org, {
      html: '<img src="cid:strip">',
      attachments: [{ contentId: 'strip', filename: 'strip.png', contentType: 'image/png', base64: 'AAAA' }],
    })
    const { messages, counts, total } = await loadMessages(org, { messageId: null })
    expect(messages).toMatchObject([{ toEmail: 'tenant@quill.example', state: 'queued', kind: 'tip' }])
    expect({ counts, total }).toEqual({ counts: { queued: 1 }, total: 1 })
    const { opened } = await loadMessages(org, { messageId: messages[0]?.id ?? '' })
    expect(opened?.html).toBe('<img src="data:image/png;base64,AAAA">')
  })

  it('answers not found for another organisation’s letter and for what is no id', async () => {
    const db = await freshDatabase()
    const [org, other] = [await makeLandlord(db), await makeLandlord(db)]
    await queue(other)
    const theirs = (await loadMessages(other, { messageId: null })).messages[0]?.id ?? ''
    expect((await loadMessages(org, { messageId: null })).messages).toEqual([])
    for (const messageId of [theirs, newId<MessageId>(), 'NO ID'])
      await expect(loadMessages(org, { messageId })).rejects.toMatchObject({ code: 'not-found' })
  })

  it('is for landlords only', async () => {
    const db = await freshDatabase()
    const org = await makeLandlord(db)
    const personId = await makePerson(db)
    const tenant = await scopeFor(db, { organisationId: org.scope.organisationId, personId, roles: ['tenant', 'owner', 'electrician'] })
    await expect(loadMessages(tenant, { messageId: null })).rejects.toMatchObject({ code: 'forbidden' })
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
