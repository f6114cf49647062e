/** `npm start`: from a fresh checkout to a running product, in one command; again, in seconds. Ctrl-C stops all of it. */
import { spawn } from 'node:child_process'
import { build, checkNode, giveUp, install } from './prepare.mjs'
import { ROOT } from './paths.mjs'
import { run } from './run.mjs'

const PRODUCTION = { NODE_ENV: 'production', ASTRO_TELEMETRY_DISABLED: '1' }
/** Longer than the patience of either process. */
const KILL_AFTER_MS = 12_000

const problem = checkNode()
if (problem) giveUp(problem)
await install()
await build()

// The first command to read the settings; it names every bad one.
const migrated = await run(process.execPath, ['dist/db/migrate-command.mjs'], { env: PRODUCTION })
if (migrated.code !== 0) process.exit(1)
const seeded = await run(process.execPath, ['dist/db/seed.mjs'], { env: PRODUCTION, capture: 'stdout' })
if (seeded.code !== 0) giveUp('The demo could not be written; the reason is above. Nothing was started.')

const children = new Map()
let stopping = false

function begin(name, script) {
  // The channel tells a child when this script has died.
  const child = spawn(process.execPath, [script], {
    cwd: ROOT,
    env: { ...process.env, ...PRODUCTION },
    stdio: ['ignore', 'inherit', 'inherit', 'ipc'],
  })
  children.set(name, child)
  child.on('exit', (code) => {
    children.delete(name)
    if (!stopping) console.error(`The ${name} process ended by itself; stopping the rest.`)
    end(stopping ? 0 : (code ?? 1) || 1)
  })
  return child
}

let exitCode = 0
function end(code) {
  exitCode ||= code
  if (children.size === 0) process.exit(exitCode)
  if (stopping) return
  stopping = true
  for (const child of children.values()) child.kill('SIGTERM')
  setTimeout(() => {
    for (const child of children.values()) child.kill('SIGKILL')
  }, KILL_AFTER_MS).unref()
}
process.on('SIGINT', () => end(0))
process.on('SIGTERM', () => end(0))
process.on('SIGHUP', () => end(0))

const web = begin('web', 'src/server/serve.mjs')
begin('jobs', 'dist/jobs/index.mjs')
web.once('message', () => {
  if (seeded.output.trim() !== '') console.log(seeded.output.trimEnd())
  console.log('Ctrl-C stops it.')
})
