/** The checks that need no database: formatting, lint, types, the pure core's own compiler, the map's paths, forged scopes. */
import { existsSync, readdirSync, readFileSync } from 'node:fs'
import { join } from 'node:path'
import { inRoot } from './paths.mjs'
import { runTool } from './run.mjs'

const tool = (name, program, args) => ({
  name,
  run: () => runTool(program, args, { capture: 'all', env: { ASTRO_TELEMETRY_DISABLED: '1', FORCE_COLOR: '0' } }),
})
const own = (name, find) => ({
  name,
  run: async () => {
    const problems = find()
    return { code: problems.length === 0 ? 0 : 1, output: problems.join('\n') }
  },
})

export const CHECKS = [
  tool('formatting', 'prettier/bin/prettier.cjs', ['--check', '--log-level', 'warn', '.']),
  tool('lint', 'eslint/bin/eslint.js', ['.', '--max-warnings', '0']),
  tool('types', 'astro/astro.js', ['check', '--minimumFailingSeverity', 'warning']),
  tool('types of the core', 'typescript/bin/tsc', ['-p', 'src/lib/core']),
  own('paths in DEVELOPERS.md', missingPaths),
  own('scopes minted elsewhere', forgedScopes),
]

/** Runs the checks two at a time; answers the names of those that failed. */
export async function runChecks() {
  const failed = []
  const waiting = [...CHECKS]
  const worker = async () => {
    for (let check = waiting.shift(); check; check = waiting.shift()) {
      const startedAtMs = performance.now()
      const { code, output } = await check.run()
      console.log(`${code === 0 ? 'passed' : 'FAILED'}  ${check.name} (${((performance.now() - startedAtMs) / 1000).toFixed(1)} s)`)
      if (code === 0) continue
      failed.push(check.name)
      console.log(output.trimEnd())
    }
  }
  await Promise.all([worker(), worker()])
  return failed
}

/** What stands in backticks and looks like a path of ours: a slash or a file ending, no placeholder, no command, no address. */
function missingPaths() {
  const map = inRoot('DEVELOPERS.md')
  if (!existsSync(map)) return ['DEVELOPERS.md is missing.']
  const marked = [...readFileSync(map, 'utf8').matchAll(/`([^`\n]+)`/g)].map(([, text]) => text ?? '')
  const paths = marked.filter((text) => /^[\w.[\]-]+(\/[\w.[\]-]+)*\/?$/.test(text) && /\/|\.(ts|tsx|mjs|js|json|md|astro|css)$/.test(text))
  if (paths.length === 0) return ['DEVELOPERS.md names no path at all.']
  return paths.filter((path) => !existsSync(inRoot(path))).map((path) => `DEVELOPERS.md names ${path}, which is not there.`)
}

function forgedScopes() {
  const found = []
  const visit = (folder) => {
    for (const entry of readdirSync(inRoot(folder), { withFileTypes: true })) {
      const path = join(folder, entry.name)
      if (entry.isDirectory()) visit(path)
      else if (
        /\.(ts|tsx|astro)$/.test(path) &&
        !path.startsWith('src/lib/auth/') &&
        /\bas (unknown as )?OrgScope\b/.test(readFileSync(inRoot(path), 'utf8'))
      )
        found.push(`${path} makes a scope; only src/lib/auth may.`)
    }
  }
  for (const folder of ['src', 'db', 'jobs', 'tests']) visit(folder)
  return found
}
