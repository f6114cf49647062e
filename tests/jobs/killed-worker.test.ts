/** A worker killed at any moment loses no letter and sends none twice; what nobody can know is shown as ambiguous. */
import { existsSync, mkdirSync, mkdtempSync, rmSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import type { Kysely } from 'kysely'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import type { Database } from '#db/schema.ts'
import { freshDatabase } from '../support/database.ts'
import { makeLandlord } from '../support/factories.ts'
import { queue, states } from '../support/outbox.ts'
import { type FakeSmtp, fakeSmtp } from '../support/smtp.ts'
import { bundleMailWorker, bundleWorker, ended, isReady, startJobs } from '../support/worker.ts'

/** Of the moments; which letter each hits still depends on the machine. */
const SEED = 7
const KILLS = 100
const STARTED_AHEAD = 2
const KILLS_OF_THE_PROGRAM = 4
/** More than the kills let through; the worker that is not killed sends the rest. */
const LETTERS = 170
/** Two letters' worth or more: the server greets after 100 ms and replies to a message after REPLY_AFTER_MS. */
const LONGEST_MS = 300
/** Long enough that kills fall between the message and its reply too. */
const REPLY_AFTER_MS = 40

let dataDir = ''
beforeAll(() => {
  // A kill ends the process and not the machine, so memory is as good as a disk here, and a commit does not wait for one.
  dataDir = mkdtempSync(join(existsSync('/dev/shm') ? '/dev/shm' : tmpdir(), 'dwellhour-killed-'))
})
afterAll(() => rmSync(dataDir, { recursive: true }))

/** Uniform in [0, 1): the linear congruential generator of ISO/IEC 9899:2011, 7.22.2.2, modulo 2^31. */
function* moments(seed: number): Generator<number, never> {
  for (let state = seed; ;) {
    state = (state * 1_103_515_245 + 12_345) % 2_147_483_648
    yield state / 2_147_483_648
  }
}

async function outbox(name: string, letters: number) {
  const file = join(dataDir, name)
  mkdirSync(file)
  const db = await freshDatabase(join(file, 'dwellhour.sqlite'))
  const org = await makeLandlord(db)
  for (let index = 0; index < letters; index++) await queue(org, { toEmail: `tenant${index}@quill.example`, nowMs: Date.now() })
  return { db, dataDir: file }
}

/** Adds the letters found in a dialogue; one stays there until a worker lives long enough to look. */
async function addInDialogue(db: Kysely<Database>, killed: Set<string>): Promise<void> {
  const rows = await db.selectFrom('message').where('state', '=', 'sending').select('message_id').execute()
  for (const row of rows) killed.add(row.message_id)
}

/** Every letter is there once, in the one place or in doubt. */
async function expectNoneLostOrTwice(db: Kysely<Database>, { smtp, letters, killedInDialogue }: Account) {
  const rows = await states(db)
  const arrivals = new Map<string, number>()
  for (const mail of await smtp.parsed()) arrivals.set(mail.messageId ?? '', (arrivals.get(mail.messageId ?? '') ?? 0) + 1)
  expect(rows).toHaveLength(letters)
  expect([...arrivals.values()].filter((count) => count > 1)).toEqual([])
  expect([...arrivals.keys()].filter((id) => !rows.some((row) => row.message_id === id))).toEqual([])
  expect(rows.filter((row) => row.state === 'sent' && arrivals.get(row.message_id) !== 1)).toEqual([])
  expect(rows.filter((row) => row.state !== 'sent' && row.state !== 'ambiguous')).toEqual([])
  // Every letter in doubt comes from a kill in its dialogue, and the kills did hit dialogues.
  expect(rows.filter((row) => row.state === 'ambiguous')).toHaveLength(killedInDialogue.size)
  expect(killedInDialogue.size).toBeGreaterThan(0)
}
interface Account {
  readonly smtp: FakeSmtp
  readonly letters: number
  readonly killedInDialogue: ReadonlySet<string>
}

describe('the mail worker', () => {
  it(`sends each letter at most once and loses none when it is killed ${KILLS} times`, { timeout: 600_000 }, async () => {
    const { db, dataDir: folder } = await outbox('often', LETTERS)
    const smtp = await fakeSmtp({ replyAfterMs: REPLY_AFTER_MS })
    const place = { file: await bundleMailWorker(), dataDir: folder, smtpUrl: smtp.url }
    const moment = moments(SEED)
    const start = () => {
      const worker = startJobs(place, [])
      return { worker, ready: isReady(worker) }
    }
    const killedInDialogue = new Set<string>()
    let killedWhileLettersWaited = 0
    // Started in advance, as many as there are cores to start them.
    const waiting = Array.from({ length: STARTED_AHEAD }, start)
    const next = () => waiting.shift() ?? start()
    for (let kill = 0; kill < KILLS; kill++) {
      const { worker, ready } = next()
      if (kill + STARTED_AHEAD <= KILLS) waiting.push(start())
      await ready
      worker.stdin?.write('go\n')
      // Half of the moments are counted from its beginning, half from a message that the server has and has not yet answered:
      // on a busy machine hardly one of the first kind would fall there.
      const seen = smtp.accepted.length
      const fromMessage = moment.next().value < 0.5
      while (fromMessage && smtp.accepted.length === seen && worker.exitCode === null) await pause(1)
      await pause(moment.next().value * (fromMessage ? REPLY_AFTER_MS : LONGEST_MS))
      worker.kill('SIGKILL')
      await ended(worker)
      await addInDialogue(db, killedInDialogue)
      const waits = await db.selectFrom('message').where('state', '=', 'queued').select('message_id').limit(1).executeTakeFirst()
      if (waits) killedWhileLettersWaited++
    }
    const { worker, ready } = next()
    await ready
    worker.stdin?.write('go\n')
    expect(await ended(worker)).toBe(0)
    expect(waiting).toEqual([])
    expect(killedWhileLettersWaited).toBe(KILLS)
    await expectNoneLostOrTwice(db, { smtp, letters: LETTERS, killedInDialogue })
    const arrived = smtp.accepted.length
    // Of those in doubt some had arrived and some had not: neither could have been said.
    expect(arrived).toBeGreaterThan(LETTERS - killedInDialogue.size)
    expect(arrived).toBeLessThan(LETTERS)
    console.log(
      `${KILLS} kills from seed ${SEED}: ${killedInDialogue.size} in a dialogue, ${arrived} of ${LETTERS} letters arrived, none twice`,
    )
    await smtp.close()
    await db.destroy()
  })
})

describe('npm run jobs -- --once mail', () => {
  it(`does so too when the whole program is killed, ${KILLS_OF_THE_PROGRAM} times`, { timeout: 120_000 }, async () => {
    const letters = 60
    const { db, dataDir: folder } = await outbox('program', letters)
    // Slow enough that a kill falls into a dialogue and not only between two.
    const smtp = await fakeSmtp({ replyAfterMs: 40 })
    const place = { file: await bundleWorker(), dataDir: folder, smtpUrl: smtp.url }
    const moment = moments(SEED)
    const killedInDialogue = new Set<string>()
    for (let kill = 0; kill < KILLS_OF_THE_PROGRAM; kill++) {
      const seen = smtp.accepted.length
      const worker = startJobs(place, ['--once', 'mail'])
      // Counted from its first letter, so that kills fall into its work and not into its start.
      while (smtp.accepted.length === seen && worker.exitCode === null) await pause(2)
      await pause(moment.next().value * 120)
      worker.kill('SIGKILL')
      await ended(worker)
      await addInDialogue(db, killedInDialogue)
    }
    expect(await ended(startJobs(place, ['--once', 'mail']))).toBe(0)
    await expectNoneLostOrTwice(db, { smtp, letters, killedInDialogue })
    await smtp.close()
    await db.destroy()
  })
})

const pause = (ms: number): Promise<void> => new Promise((resolve) => setTimeout(resolve, ms))
