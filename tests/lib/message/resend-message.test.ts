/** Sending a letter again: a new letter, once, where it makes sense, on record. */
import { beforeEach, describe, expect, it } from 'vitest'
import type { MailState } from '#db/enums.ts'
import { inTransaction } from '#db/org-db.ts'
import { addSuppression } from '#db/queries/suppression.ts'
import { acceptInvitation } from '#lib/invitation/accept-invitation.server.ts'
import { invitePerson } from '#lib/invitation/invite-person.server.ts'
import { releaseAddress } from '#lib/message/release-address.server.ts'
import { resendMessage } from '#lib/message/resend-message.server.ts'
import { makeWorld, type World } from '../../support/world.ts'
import { NOW_MS } from '../../support/factories.ts'
import { asSent, queue } from '../../support/outbox.ts'

let world: World
beforeEach(async () => {
  world = await makeWorld()
})
const rows = () => world.db.selectFrom('message').selectAll().orderBy('queued_at_ms').orderBy('cause').execute()
const put = (state: MailState) => world.db.updateTable('message').set({ state }).execute()
const resend = (messageId: unknown, by = world.landlord, nowMs = NOW_MS + 1) =>
  resendMessage(by, { messageId, organisationName: 'Ours', nowMs })
const only = async () => (await rows())[0] ?? expect.fail('no letter')

describe('resendMessage', () => {
  it('queues a new letter of the same words with a cause and a Message-ID of its own, once however often it is pressed', async () => {
    await queue(world.landlord)
    await put('failed')
    const { id } = await only()
    await resend(id)
    await expect(resend(id)).rejects.toMatchObject({ code: 'conflict' })
    const [old, again, ...more] = await rows()
    expect(more).toEqual([])
    expect(old).toMatchObject({ id, state: 'failed' })
    expect(again).toMatchObject({ state: 'queued', attempts: 0, subject: old?.subject, text: old?.text, html: old?.html })
    expect(again?.message_id).not.toBe(old?.message_id)
    expect(again?.cause).not.toBe(old?.cause)
    const audit = await world.db.selectFrom('audit_entry').where('action', '=', 'resend').select('subject_id').execute()
    expect(audit).toEqual([{ subject_id: id }])
  })

  it('is refused for what has not left, what is out of date and what its address does not get', async () => {
    await queue(world.landlord, { expiresAtMs: NOW_MS + 10 })
    const { id, to_email: email } = await only()
    for (const state of ['queued', 'sending'] as const) {
      await put(state)
      await expect(resend(id)).rejects.toMatchObject({ code: 'conflict' })
    }
    await put('bounced')
    await inTransaction(world.landlord, (trx) => addSuppression(trx, { email, kind: '*', reason: 'bounce', detail: 'Gone.', atMs: 1 }))
    await expect(resend(id)).rejects.toMatchObject({ code: 'conflict' })
    await releaseAddress(world.landlord, { input: { email }, nowMs: NOW_MS })
    await expect(resend(id, world.landlord, NOW_MS + 10)).rejects.toMatchObject({ code: 'conflict' })
    await resend(id, world.landlord, NOW_MS + 9)
    expect(await rows()).toHaveLength(2)
  })

  it('gives an invitation a new link, and none once it was accepted', async () => {
    const input = { email: 'marek@people.example', name: 'Marek', role: 'landlord', propertyId: null, tenancyId: null }
    await invitePerson(world.landlord, { input, organisationName: 'Ours', nowMs: NOW_MS })
    const linkOf = (row: Awaited<ReturnType<typeof only>>) => /\/invitation\/([\w-]+)/.exec(asSent(row).text)?.[1] ?? ''
    const first = await only()
    const firstLink = linkOf(first)
    await put('sent')
    await resend(first.id)
    const again = (await rows())[1] ?? expect.fail('no second letter')
    expect(linkOf(again)).toMatch(/^[\w-]{43}$/)
    expect(linkOf(again)).not.toBe(firstLink)
    await acceptInvitation(world.db, {
      token: linkOf(again),
      signedIn: null,
      input: { name: 'Marek', password: 'three phases at night' },
      nowMs: NOW_MS + 2,
    })
    await put('sent')
    await expect(resend(again.id)).rejects.toMatchObject({ code: 'conflict' })
  })

  it('is the landlord’s alone, for their own letters', async () => {
    await queue(world.landlord)
    await put('failed')
    const { id } = await only()
    for (const person of [world.tenant, world.electrician, world.owner])
      await expect(resend(id, person)).rejects.toMatchObject({ code: 'forbidden' })
    await expect(resend(id, world.stranger)).rejects.toMatchObject({ code: 'not-found' })
    await expect(resend('NO ID')).rejects.toMatchObject({ code: 'not-found' })
  })
})

describe('releaseAddress', () => {
  const release = (email: string, by = world.landlord) => releaseAddress(by, { input: { email }, nowMs: NOW_MS })

  it('releases what bounced, not what its owner stopped, and nobody else’s', async () => {
    await inTransaction(world.landlord, async (trx) => {
      await addSuppression(trx, { email: 'gone@quill.example', kind: '*', reason: 'bounce', detail: 'Gone.', atMs: 1 })
      await addSuppression(trx, { email: 'owner@quill.example', kind: 'digest', reason: 'unsubscribe', detail: 'No more.', atMs: 1 })
    })
    await expect(release('gone@quill.example', world.stranger)).rejects.toMatchObject({ code: 'not-found' })
    await expect(release('gone@quill.example', world.owner)).rejects.toMatchObject({ code: 'forbidden' })
    await expect(release('owner@quill.example')).rejects.toMatchObject({ code: 'not-found' })
    await release('Gone@quill.example')
    await expect(release('gone@quill.example')).rejects.toMatchObject({ code: 'not-found' })
  })
})
