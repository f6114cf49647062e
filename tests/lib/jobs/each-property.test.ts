/** A job goes through every property once a period and contains what fails. */
import { describe, expect, it } from 'vitest'
import type { Config } from '#lib/config.server.ts'
import { forEachProperty } from '#lib/jobs/each-property.server.ts'
import type { Worker } from '#lib/jobs/job.ts'
import { latestDay } from '#lib/jobs/periods.ts'
import { inTransaction } from '#db/org-db.ts'
import { addProperty } from '#db/queries/property.ts'
import { listJobRuns } from '#db/queries/job.ts'
import { freshDatabase } from '../../support/database.ts'
import { makeLandlord } from '../../support/factories.ts'

const NOW_MS = Date.UTC(2026, 1, 3, 12)
const FIELDS = {
  address: '1 Quill Row',
  country: 'GB',
  currency: 'GBP',
  ruleProfile: 'iec-60364' as const,
  hygienePolicy: 'store-60' as const,
  supplyVoltageV: 230,
  phases: 1,
  serviceRatingA: 100,
  baseLoadW: 500,
  climate: { meanC: 10, amplitudeK: 5 } as never,
}

async function bench() {
  const db = await freshDatabase()
  const [one, other] = [await makeLandlord(db), await makeLandlord(db)]
  for (const [org, slug, zone] of [
    [one, 'quill-court', 'Europe/London'],
    [one, 'reed-house', 'America/Chicago'],
    [other, 'tern-hall', 'Europe/London'],
  ] as const)
    await inTransaction(org, (trx) => addProperty(trx, { ...FIELDS, slug, name: slug, zone }, NOW_MS))
  const worker = (change: Partial<Worker> = {}): Worker => ({
    db,
    config: {} as Config,
    transport: { send: () => Promise.resolve({ kind: 'sent' }), close: () => undefined },
    holder: 'w',
    mode: 'due',
    now: () => NOW_MS,
    ...change,
  })
  return { db, one, other, worker }
}

describe('forEachProperty', () => {
  it('runs each property once a period, keyed by the local day of the property', async () => {
    const { db, one, worker } = await bench()
    const seen: string[] = []
    const job = {
      name: 'evaluate',
      periods: latestDay(90),
      work: async (_db: unknown, { property, period }: { property: { slug: string }; period: string }) => ({
        units: seen.push(`${property.slug} ${period}`),
      }),
    }
    // 06:00 UTC is past 01:30 in London and before it in Chicago.
    const now = () => Date.UTC(2026, 1, 3, 6)
    expect(await forEachProperty(worker({ now }), job)).toEqual({ done: 3, failed: 0, left: 0 })
    expect(await forEachProperty(worker({ now }), job)).toEqual({ done: 0, failed: 0, left: 3 })
    expect(seen.sort()).toEqual(['quill-court 2026-02-03', 'reed-house 2026-02-02', 'tern-hall 2026-02-03'])
    expect(await listJobRuns(db, one.scope.organisationId, 10)).toHaveLength(2)
  })

  it('goes on with the other properties and organisations when one fails', async () => {
    const { db, one, other, worker } = await bench()
    const job = {
      name: 'evaluate',
      periods: latestDay(90),
      work: async (_db: unknown, { property }: { property: { slug: string } }) => {
        if (property.slug === 'quill-court') throw new Error('no climate')
        return { units: 1 }
      },
    }
    expect(await forEachProperty(worker(), job)).toEqual({ done: 2, failed: 1, left: 0 })
    const errors = (await listJobRuns(db, one.scope.organisationId, 10)).map((run) => run.error)
    expect(errors.filter((error) => error === null)).toHaveLength(1)
    expect(errors.filter((error) => error !== null)).toEqual([expect.stringMatching(/^It failed .* log is [0-9a-f]{8}\.$/)])
    expect((await listJobRuns(db, other.scope.organisationId, 10)).map((run) => run.counts)).toEqual([{ units: 1 }])
  })

  it('gives the work a scope of its own organisation', async () => {
    const { one, other, worker } = await bench()
    const owners = new Set<string>()
    await forEachProperty(worker(), {
      name: 'x',
      periods: latestDay(90),
      work: async (org) => ({ n: owners.add(org.scope.organisationId).size }),
    })
    expect(owners).toEqual(new Set([one.scope.organisationId, other.scope.organisationId]))
  })

  it('runs a finished period again only when told to', async () => {
    const { worker } = await bench()
    const job = { name: 'x', periods: latestDay(90), work: async () => ({}) }
    await forEachProperty(worker(), job)
    expect(await forEachProperty(worker({ mode: 'now' }), job)).toMatchObject({ done: 0, left: 3 })
    expect(await forEachProperty(worker({ mode: 'again' }), job)).toMatchObject({ done: 3 })
  })
})
