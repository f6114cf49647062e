/** Reads the worker's command line. */
import type { Mode } from './job.ts'

export type Asked =
  | { readonly status: 'valid'; readonly once: string | null; readonly mode: Mode; readonly atMs: number | null }
  | { readonly status: 'invalid'; readonly message: string }

export function readArguments(args: readonly string[], names: readonly string[]): Asked {
  const usage = `Use: npm run jobs [-- --once <${names.join('|')}> [--again] [--at 2026-12-02T01:30:00Z]]`
  let once: string | null = null
  let again = false
  let atMs: number | null = null
  for (let index = 0; index < args.length; index++) {
    const [name, value] = [args[index], args[index + 1]]
    if (name === '--once' && value && names.includes(value)) once = value
    else if (name === '--at' && value && Number.isFinite(Date.parse(value))) atMs = Date.parse(value)
    else if (name === '--again') {
      again = true
      continue
    } else return { status: 'invalid', message: `${name} ${value ?? ''} is not understood. ${usage}` }
    index += 1
  }
  if (once === null && (again || atMs !== null)) return { status: 'invalid', message: `--again and --at go with --once. ${usage}` }
  return { status: 'valid', once, mode: once === null ? 'due' : again ? 'again' : 'now', atMs }
}
