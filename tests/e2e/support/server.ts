/** The production build's web process on a free port of 127.0.0.1, with a data folder and a mail server of its own; jobs are run one at a time. */
import { spawn, type ChildProcess } from 'node:child_process'
import { mkdtempSync, rmSync } from 'node:fs'
import { createServer, type AddressInfo } from 'node:net'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { type FakeSmtp, fakeSmtp } from '../../support/smtp.ts'

export interface RunningProduct {
  readonly baseUrl: string
  readonly dataDir: string
  readonly smtp: FakeSmtp
  /** Runs one job to its end, as `npm run jobs -- --once <job>`; answers its counts. Extra arguments such as `--again` or `--at <instant>` follow. */
  runJob(job: string, ...more: readonly string[]): Promise<Record<string, number>>
  stop(): Promise<void>
}

export interface ProductOptions {
  /** Fill the empty database with the demo first. */
  readonly demo?: boolean
}

const START_PATIENCE_MS = 60_000

export async function startProduct({ demo = false }: ProductOptions = {}): Promise<RunningProduct> {
  const dataDir = mkdtempSync(join(tmpdir(), 'dwellhour-e2e-'))
  const smtp = await fakeSmtp()
  const port = await freePort()
  const baseUrl = `http://localhost:${port}`
  const env = {
    PATH: process.env.PATH ?? '',
    NODE_ENV: 'production',
    DWELLHOUR_DATA_DIR: dataDir,
    DWELLHOUR_PORT: String(port),
    DWELLHOUR_BASE_URL: baseUrl,
    DWELLHOUR_SMTP_URL: smtp.url,
    DWELLHOUR_DEMO: demo ? 'on' : 'off',
    DWELLHOUR_LOG_LEVEL: 'error',
  }
  await toItsEnd(['dist/db/migrate-command.mjs'], env)
  if (demo) await toItsEnd(['dist/db/seed.mjs'], env)
  const web = spawn(process.execPath, ['src/server/serve.mjs'], { env, stdio: ['ignore', 'inherit', 'inherit', 'ipc'] })
  await listening(web)
  return {
    baseUrl,
    dataDir,
    smtp,
    async runJob(job, ...more) {
      const output = await toItsEnd(['dist/jobs/index.mjs', '--once', job, ...more], env)
      const last = output.trim().split('\n').at(-1) ?? '{}'
      return Object.fromEntries(Object.entries(JSON.parse(last) as Record<string, number>).filter(([name]) => name !== 'job'))
    },
    async stop() {
      const gone = new Promise((resolve) => web.once('exit', resolve))
      if (web.exitCode === null && web.signalCode === null) {
        web.kill('SIGTERM')
        await gone
      }
      await smtp.close()
      rmSync(dataDir, { recursive: true, force: true })
    },
  }
}

const freePort = (): Promise<number> =>
  new Promise((resolve) => {
    const probe = createServer()
    probe.listen(0, '127.0.0.1', () => {
      const { port } = probe.address() as AddressInfo
      probe.close(() => resolve(port))
    })
  })

const listening = (web: ChildProcess): Promise<void> =>
  new Promise((resolve, reject) => {
    const timer = setTimeout(() => reject(new Error('The server did not listen in time.')), START_PATIENCE_MS)
    web.once('message', () => {
      clearTimeout(timer)
      resolve()
    })
    web.once('exit', (code) => reject(new Error(`The server ended with ${code} before it listened.`)))
  })

function toItsEnd(args: readonly string[], env: NodeJS.ProcessEnv): Promise<string> {
  return new Promise((resolve, reject) => {
    const child = spawn(process.execPath, args, { env, stdio: ['ignore', 'pipe', 'pipe'] })
    let output = ''
    let problems = ''
    child.stdout.on('data', (chunk: Buffer) => (output += chunk.toString()))
    child.stderr.on('data', (chunk: Buffer) => (problems += chunk.toString()))
    child.once('close', (code) =>
      code === 0 ? resolve(output) : reject(new Error(`${args.join(' ')} ended with ${code}. ${output}${problems}`)),
    )
  })
}
