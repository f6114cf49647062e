/** Makes a fresh checkout ready: checks what must be there, installs when the lock changed, builds when the sources changed. */
import { createHash } from 'node:crypto'
import { existsSync, lstatSync, readdirSync, readFileSync, statSync, writeFileSync } from 'node:fs'
import { join } from 'node:path'
import { inRoot } from './paths.mjs'
import { run } from './run.mjs'

const OLDEST_NODE = [20, 11]
const NEWEST_MAJOR = 22
const COMPILER = ['g++', 'make', 'python3']
const SQLITE_BINARY = 'node_modules/better-sqlite3/build/Release/better_sqlite3.node'

/** Ends the process with one readable line; nothing was changed. */
export function giveUp(message) {
  console.error(message)
  process.exit(1)
}

export function checkNode(version = process.versions.node) {
  const [major = 0, minor = 0] = version.split('.').map(Number)
  const oldEnough = major > OLDEST_NODE[0] || (major === OLDEST_NODE[0] && minor >= OLDEST_NODE[1])
  if (oldEnough && major <= NEWEST_MAJOR) return null
  return `Dwellhour needs Node ${OLDEST_NODE.join('.')} to ${NEWEST_MAJOR}; this is ${version}. Debian 13 has it: apt-get install -y nodejs npm`
}

const isOnPath = (program) => (process.env.PATH ?? '').split(':').some((folder) => folder !== '' && existsSync(join(folder, program)))

/** The SQLite driver is compiled on this machine; names what is missing for that, with the command that installs it. */
export function checkCompiler(isThere = isOnPath) {
  const missing = COMPILER.filter((program) => !isThere(program))
  if (missing.length === 0) return null
  return `The SQLite driver has to be compiled here and ${missing.join(', ')} ${missing.length === 1 ? 'is' : 'are'} missing. Install with: apt-get install -y build-essential python3`
}

const hashOf = (files) => {
  const hash = createHash('sha256').update(process.versions.modules)
  for (const file of files)
    hash
      .update(file)
      .update('\0')
      .update(readFileSync(inRoot(file)))
  return hash.digest('hex')
}

/** All files under the given names, in a stable order. */
function filesUnder(names) {
  const files = []
  const visit = (name) => {
    if (!existsSync(inRoot(name))) return
    if (statSync(inRoot(name)).isDirectory()) for (const entry of readdirSync(inRoot(name)).sort()) visit(join(name, entry))
    else files.push(name)
  }
  for (const name of names) visit(name)
  return files
}

const isKept = (file, hash) => existsSync(inRoot(file)) && readFileSync(inRoot(file), 'utf8') === hash

const INSTALLED = 'node_modules/.dwellhour-lock'
const BUILT = 'dist/.dwellhour-sources'
const SOURCES = ['src', 'db', 'jobs', 'public', 'astro.config.mjs', 'tsconfig.json', 'package.json', 'package-lock.json']

/** True when it installed something. */
export async function install() {
  const hash = hashOf(['package-lock.json', 'package.json'])
  if (isKept(INSTALLED, hash)) return false
  // Installed by hand, for development, from this very lock: nothing to do.
  const hidden = 'node_modules/.package-lock.json'
  const isCurrent =
    existsSync(inRoot(hidden)) &&
    existsSync(inRoot(SQLITE_BINARY)) &&
    statSync(inRoot(hidden)).mtimeMs >= statSync(inRoot('package-lock.json')).mtimeMs &&
    (await run('npm', ['ls', '--silent'], { capture: 'all' })).code === 0
  if (!isCurrent) {
    // npm would empty the folder behind a link, which belongs to somebody else.
    if (lstatSync(inRoot('node_modules'), { throwIfNoEntry: false })?.isSymbolicLink())
      giveUp('node_modules is a link to another folder. Remove the link, then start again. Nothing was changed.')
    const problem = existsSync(inRoot(SQLITE_BINARY)) ? null : checkCompiler()
    if (problem) giveUp(problem)
    console.log('Installing packages; the SQLite driver is compiled, which takes a few minutes the first time.')
    const { code } = await run('npm', ['ci', '--no-audit', '--no-fund', '--include=dev'])
    if (code !== 0) giveUp('Installing the packages failed; npm says above why. Nothing was started.')
  }
  writeFileSync(inRoot(INSTALLED), hash)
  return !isCurrent
}

/** True when it built something. */
export async function build({ always = false } = {}) {
  const hash = hashOf(filesUnder(SOURCES))
  if (!always && isKept(BUILT, hash)) return false
  console.log('Building.')
  const { code } = await run(process.execPath, ['src/server/build.mjs'])
  if (code !== 0) giveUp('The build failed; its words are above. Nothing was started.')
  writeFileSync(inRoot(BUILT), hash)
  return true
}
