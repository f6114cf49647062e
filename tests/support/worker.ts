/** The real worker program, bundled as the build does, run as a process of its own; and the mail worker alone, which starts faster. */
import { type ChildProcess, spawn } from 'node:child_process'
import { once } from 'node:events'
import { build } from 'esbuild'

const OUT = '.cache/test-worker'

export async function bundleWorker(): Promise<string> {
  await bundle({ worker: 'jobs/index.ts' }, { packages: 'external' })
  return `${OUT}/worker.mjs`
}

/** With its packages inside, all but the native one: a start then reads one file instead of hundreds. */
export async function bundleMailWorker(): Promise<string> {
  const require = "import { createRequire } from 'node:module'; const require = createRequire(import.meta.url);"
  await bundle({ 'mail-worker': 'tests/support/mail-worker.ts' }, { external: ['better-sqlite3'], banner: { js: require } })
  return `${OUT}/mail-worker.mjs`
}

const bundle = (entryPoints: Record<string, string>, more: Parameters<typeof build>[0]) =>
  build({
    entryPoints,
    outdir: OUT,
    outExtension: { '.js': '.mjs' },
    bundle: true,
    platform: 'node',
    target: 'node20',
    format: 'esm',
    logLevel: 'warning',
    ...more,
  })

export interface WorkerPlace {
  readonly file: string
  readonly dataDir: string
  readonly smtpUrl: string
}

export const startJobs = ({ file, dataDir, smtpUrl }: WorkerPlace, args: readonly string[]): ChildProcess =>
  spawn(process.execPath, [file, ...args], {
    env: { PATH: process.env.PATH ?? '', DWELLHOUR_DATA_DIR: dataDir, DWELLHOUR_SMTP_URL: smtpUrl, DWELLHOUR_LOG_LEVEL: 'silent' },
    stdio: ['pipe', 'pipe', 'pipe'],
  })

/** Ends when a started mail worker waits for its word. */
export const isReady = async (worker: ChildProcess): Promise<unknown> => worker.stdout && once(worker.stdout, 'data')

export const ended = (child: ChildProcess): Promise<number | null> =>
  new Promise((resolve) => {
    if (child.exitCode !== null || child.signalCode !== null) resolve(child.exitCode)
    else child.once('exit', (code) => resolve(code))
  })
