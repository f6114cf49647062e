/** A worker killed at any moment loses no letter and sends none twice; what nobody can know is shown as ambiguous. */
import { mkdtempSync, rmSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { freshDatabase } from '../support/database.ts'
import { makeLandlord } from '../support/factories.ts'
import { queue, states } from '../support/outbox.ts'
import { fakeSmtp } from '../support/smtp.ts'
import { bundleWorker, ended, startJobs } from '../support/worker.ts'

const KILLS = 20
const LETTERS = 120

let file = ''
let dataDir = ''
beforeAll(async () => {
  file = await bundleWorker()
  dataDir = mkdtempSync(join(tmpdir(), 'dwellhour-killed-'))
})
afterAll(() => rmSync(dataDir, { recursive: true }))

/** A repeatable spread of moments; which letter each hits still depends on the machine. */
function* moments(seed: number): Generator<number, never> {
  for (let state = seed; ;) {
    state = (state * 1_103_515_245 + 12_345) % 2_147_483_648
    yield state / 2_147_483_648
  }
}

describe('npm run jobs -- --once mail', () => {
  it('sends each letter at most once and loses none when it is killed twenty times', { timeout: 180_000 }, async () => {
    const db = await freshDatabase(join(dataDir, 'dwellhour.sqlite'))
    const org = await makeLandlord(db)
    // Slow enough that a kill falls into a dialogue and not only between two.
    const smtp = await fakeSmtp({ replyAfterMs: 15 })
    for (let index = 0; index < LETTERS; index++) await queue(org, { toEmail: `tenant${index}@quill.example`, nowMs: Date.now() })
    const place = { file, dataDir, smtpUrl: smtp.url }
    const moment = moments(7)
    let killedInDialogue = 0
    for (let kill = 0; kill < KILLS; kill++) {
      const seen = smtp.accepted.length
      const worker = startJobs(place, ['--once', 'mail'])
      // Counted from its first letter, so that kills fall into its work and not into its start.
      while (smtp.accepted.length === seen && worker.exitCode === null) await pause(2)
      await pause(moment.next().value * 120)
      worker.kill('SIGKILL')
      await ended(worker)
      killedInDialogue += (await states(db)).filter((row) => row.state === 'sending').length
    }
    expect(await ended(startJobs(place, ['--once', 'mail']))).toBe(0)

    const rows = await states(db)
    const arrivals = new Map<string, number>()
    for (const mail of await smtp.parsed()) arrivals.set(mail.messageId ?? '', (arrivals.get(mail.messageId ?? '') ?? 0) + 1)
    expect(rows).toHaveLength(LETTERS)
    expect([...arrivals.values()].filter((count) => count > 1)).toEqual([])
    expect(rows.filter((row) => row.state === 'sent' && arrivals.get(row.message_id) !== 1)).toEqual([])
    expect(rows.filter((row) => row.state !== 'sent' && row.state !== 'ambiguous')).toEqual([])
    // Every letter in doubt comes from a kill in its dialogue, and the kills did hit dialogues.
    expect(rows.filter((row) => row.state === 'ambiguous')).toHaveLength(killedInDialogue)
    expect(killedInDialogue).toBeGreaterThan(0)
    await smtp.close()
    await db.destroy()
  })
})

const pause = (ms: number): Promise<void> => new Promise((resolve) => setTimeout(resolve, ms))
