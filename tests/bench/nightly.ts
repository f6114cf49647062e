/** The night of a large portfolio: 10,000 units in 20 buildings, no two alike, evaluated and told by two worker processes of the real program on one file. */
import { spawn } from 'node:child_process'
import { mkdtempSync, rmSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { build } from 'esbuild'
import { DEMO_BUILDINGS, type DemoBuilding, type DemoUnit } from '#lib/demo/buildings.ts'
import { makeBuilding } from '../support/building.ts'
import { freshDatabase } from '../support/database.ts'
import { makeLandlord } from '../support/factories.ts'

const BUILDINGS = 20
const ORGANISATIONS = 10
const WORKERS = 2
/** Fewer for a quick look: time grows with the units, since each is computed by itself. */
const UNITS = Number(process.env.DWELLHOUR_BENCH_UNITS ?? 10_000)
const OUT = '.cache/bench-worker'
/** An evening after the tests' day began in every zone of the demo: 17:00 has come everywhere. */
const AT = '2026-12-01T23:30:00Z'

/** The demo's units over and over, each with a set point, a loss and a first shower of its own, so that nothing computed for one serves another. */
function unitsOf(building: DemoBuilding, from: number, count: number): readonly DemoUnit[] {
  return Array.from({ length: count }, (_, index): DemoUnit => {
    const model = building.units[index % building.units.length] as DemoUnit
    const { load } = model.installation
    const own = (from + index) / UNITS
    return {
      ...model,
      code: `U${index + 1}`,
      installation: { ...model.installation, load: { ...load, tank: { ...load.tank, setPointC: load.tank.setPointC - 3 * own } } },
      week:
        model.week?.map((day) =>
          day.map((shower) => ({ ...shower, readyByMinuteOfDay: shower.readyByMinuteOfDay + Math.floor(own * 20) })),
        ) ?? null,
    }
  })
}

async function fill(file: string): Promise<void> {
  const db = await freshDatabase(file)
  const each = Math.ceil(UNITS / BUILDINGS)
  for (let organisation = 0; organisation < ORGANISATIONS; organisation++) {
    const org = await makeLandlord(db)
    for (let index = organisation; index < BUILDINGS; index += ORGANISATIONS) {
      const model = DEMO_BUILDINGS[index % DEMO_BUILDINGS.length] as DemoBuilding
      const units = unitsOf(model, index * each, Math.min(each, UNITS - index * each))
      await makeBuilding(org, { ...model, slug: `${model.slug}-${index}`, units })
    }
  }
  await db.destroy()
}

/** One job by so many workers at once: what they did together, and how long until the last had ended. */
async function together(
  job: string,
  dataDir: string,
): Promise<{ readonly seconds: number; readonly done: number; readonly failed: number }> {
  const startedAtMs = performance.now()
  const counts = await Promise.all(Array.from({ length: WORKERS }, () => once(job, dataDir)))
  const sum = (name: 'done' | 'failed') => counts.reduce((total, one) => total + one[name], 0)
  return { seconds: (performance.now() - startedAtMs) / 1000, done: sum('done'), failed: sum('failed') }
}

function once(job: string, dataDir: string): Promise<{ readonly done: number; readonly failed: number }> {
  const worker = spawn(process.execPath, [`${OUT}/index.mjs`, '--once', job, '--at', AT], {
    env: { PATH: process.env.PATH ?? '', DWELLHOUR_DATA_DIR: dataDir, DWELLHOUR_LOG_LEVEL: 'error' },
    stdio: ['ignore', 'pipe', 'inherit'],
  })
  let said = ''
  worker.stdout.on('data', (chunk: Buffer) => (said += chunk.toString()))
  return new Promise((resolve, reject) => {
    worker.once('error', reject)
    worker.once('exit', () => resolve(JSON.parse(said.trim().split('\n').at(-1) ?? '{}')))
  })
}

export async function benchNightly() {
  await build({
    entryPoints: ['jobs/index.ts'],
    outdir: OUT,
    outExtension: { '.js': '.mjs' },
    bundle: true,
    packages: 'external',
    platform: 'node',
    target: 'node20',
    format: 'esm',
    logLevel: 'warning',
  })
  const dataDir = mkdtempSync(join(tmpdir(), 'dwellhour-night-'))
  try {
    await fill(join(dataDir, 'dwellhour.sqlite'))
    const evaluated = await together('evaluate', dataDir)
    const told = await together('tips', dataDir)
    const db = await freshDatabase(join(dataDir, 'dwellhour.sqlite'))
    const { count } = await db
      .selectFrom('message')
      .where('kind', '=', 'tip')
      .select((eb) => eb.fn.countAll<number>().as('count'))
      .executeTakeFirstOrThrow()
    await db.destroy()
    const seconds = evaluated.seconds + told.seconds
    return [
      { label: `night: ${UNITS} units evaluated, ${WORKERS} workers`, value: evaluated.seconds, unit: 's' },
      { label: `night: ${count} tips queued, ${WORKERS} workers`, value: told.seconds, unit: 's' },
      { label: `night: both (limit 180 s for 10,000 units)`, value: seconds, unit: 's' },
      { label: 'night: the same for 10,000 units, by proportion', value: (seconds * 10_000) / UNITS, unit: 's' },
      {
        label: 'night: buildings done / failed, of both jobs',
        value: evaluated.done + told.done,
        unit: `/ ${evaluated.failed + told.failed}`,
      },
    ]
  } finally {
    rmSync(dataDir, { recursive: true })
  }
}
