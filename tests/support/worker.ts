/** The real worker program, bundled as the build does, run as a process of its own. */
import { spawn, type ChildProcess } from 'node:child_process'
import { build } from 'esbuild'

const OUT = '.cache/test-worker'

export async function bundleWorker(): Promise<string> {
  await build({
    entryPoints: { worker: 'jobs/index.ts' },
    outdir: OUT,
    outExtension: { '.js': '.mjs' },
    bundle: true,
    packages: 'external',
    platform: 'node',
    target: 'node20',
    format: 'esm',
    logLevel: 'warning',
  })
  return `${OUT}/worker.mjs`
}

export interface WorkerPlace {
  readonly file: string
  readonly dataDir: string
  readonly smtpUrl: string
}

export const startJobs = ({ file, dataDir, smtpUrl }: WorkerPlace, args: readonly string[]): ChildProcess =>
  spawn(process.execPath, [file, ...args], {
    env: { PATH: process.env.PATH ?? '', DWELLHOUR_DATA_DIR: dataDir, DWELLHOUR_SMTP_URL: smtpUrl, DWELLHOUR_LOG_LEVEL: 'silent' },
    stdio: ['ignore', 'pipe', 'pipe'],
  })

export const ended = (child: ChildProcess): Promise<number | null> =>
  new Promise((resolve) => {
    if (child.exitCode !== null || child.signalCode !== null) resolve(child.exitCode)
    else child.once('exit', (code) => resolve(code))
  })
