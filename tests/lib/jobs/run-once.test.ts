/** A period of a job runs exactly once, whoever tries, and a failure leaves a trace and a pause. */
import { spawnSync } from 'node:child_process'
import { mkdtempSync, rmSync } from 'node:fs'
import { hostname, tmpdir } from 'node:os'
import { join } from 'node:path'
import { describe, expect, it } from 'vitest'
import { openDatabase } from '#db/connection.ts'
import { makeHolder } from '#lib/jobs/holder.server.ts'
import { runOncePerPeriod } from '#lib/jobs/run-once.server.ts'
import { freshDatabase } from '../../support/database.ts'

const NOW_MS = Date.UTC(2026, 1, 3, 1, 30)
const HOUR_MS = 3_600_000

async function bench(file?: string) {
  const db = await freshDatabase(file)
  const given = { db, job: 'evaluate', scope: 'p1', period: '2026-02-03', organisationId: null, nowMs: NOW_MS, leaseMs: HOUR_MS }
  const runs = () => db.selectFrom('job_run').selectAll().orderBy('started_at_ms').execute()
  return { db, given, runs }
}

describe('runOncePerPeriod', () => {
  it('runs a period once and keeps its counts', async () => {
    const { given, runs } = await bench()
    let calls = 0
    const work = async () => ({ units: 8, calls: ++calls })
    expect(await runOncePerPeriod({ ...given, holder: 'a' }, work)).toBe('done')
    expect(await runOncePerPeriod({ ...given, holder: 'b' }, work)).toBe('already-done')
    expect(calls).toBe(1)
    expect(await runs()).toMatchObject([
      { job: 'evaluate', scope: 'p1', period: '2026-02-03', counts: '{"units":8,"calls":1}', error: null },
    ])
  })

  it('runs another scope and another period on their own', async () => {
    const { given, runs } = await bench()
    const work = async () => ({})
    expect(await runOncePerPeriod({ ...given, holder: 'a' }, work)).toBe('done')
    expect(await runOncePerPeriod({ ...given, holder: 'a', scope: 'p2' }, work)).toBe('done')
    expect(await runOncePerPeriod({ ...given, holder: 'a', period: '2026-02-04' }, work)).toBe('done')
    expect(await runs()).toHaveLength(3)
  })

  it('lets only one of two workers on one file run it', async () => {
    const folder = mkdtempSync(join(tmpdir(), 'dwellhour-lease-'))
    const { db, given } = await bench(join(folder, 'lease.sqlite'))
    const other = openDatabase(join(folder, 'lease.sqlite'))
    let calls = 0
    let finish: () => void = () => undefined
    const work = async () => {
      calls += 1
      await new Promise<void>((resolve) => (finish = resolve))
      return {}
    }
    const first = runOncePerPeriod({ ...given, holder: makeHolder() }, work)
    while (calls === 0) await new Promise((resolve) => setTimeout(resolve, 1))
    const again = { ...given, db: other, holder: makeHolder() }
    expect(await runOncePerPeriod(again, work)).toBe('held-elsewhere')
    finish()
    expect(await first).toBe('done')
    expect(await runOncePerPeriod(again, work)).toBe('already-done')
    expect(calls).toBe(1)
    await db.destroy()
    await other.destroy()
    rmSync(folder, { recursive: true })
  })

  it('says that a run failed without quoting the error, and waits before trying again, longer each time', async () => {
    const { given, runs } = await bench()
    const fails = () => Promise.reject(new Error('no tariff'))
    const atMin = (minutes: number) => ({ ...given, holder: 'a', nowMs: NOW_MS + minutes * 60_000 })
    expect(await runOncePerPeriod(atMin(0), fails)).toBe('failed')
    expect(await runOncePerPeriod(atMin(10), fails)).toBe('held-elsewhere')
    expect(await runOncePerPeriod(atMin(16), fails)).toBe('failed')
    expect(await runOncePerPeriod(atMin(16 + 25), fails)).toBe('held-elsewhere')
    expect(await runOncePerPeriod(atMin(16 + 31), async () => ({ units: 1 }))).toBe('done')
    const failed = expect.stringMatching(/^It failed for a reason that nobody expected\. Its id in the server’s log is [0-9a-f]{8}\.$/)
    expect((await runs()).map((run) => run.error)).toEqual([failed, failed, null])
  })

  it('takes over from another host only when the lease is over', async () => {
    const { given } = await bench()
    const stuck = runOncePerPeriod({ ...given, holder: 'elsewhere|1|x' }, () => new Promise(() => undefined))
    void stuck
    await new Promise((resolve) => setTimeout(resolve, 5))
    expect(await runOncePerPeriod({ ...given, holder: 'b', nowMs: NOW_MS + HOUR_MS - 1 }, async () => ({}))).toBe('held-elsewhere')
    expect(await runOncePerPeriod({ ...given, holder: 'b', nowMs: NOW_MS + HOUR_MS }, async () => ({}))).toBe('done')
  })

  it('takes over at once from a dead process of this host and closes its run', async () => {
    const { given, runs } = await bench()
    const dead = spawnSync(process.execPath, ['-e', ''])
    const holder = [hostname(), dead.pid, 'x'].join('|')
    void runOncePerPeriod({ ...given, holder }, () => new Promise(() => undefined))
    await new Promise((resolve) => setTimeout(resolve, 5))
    expect(await runOncePerPeriod({ ...given, holder: 'b', nowMs: NOW_MS + 1000 }, async () => ({ units: 2 }))).toBe('done')
    expect((await runs()).map((run) => [run.counts, run.error])).toEqual([
      [null, 'The worker ended before the job did; it was run again.'],
      ['{"units":2}', null],
    ])
  })
})
