/** `npm run bench`: bundles each file of `tests/bench` and prints what its exported `bench…` functions measure. */
import { mkdirSync, readdirSync } from 'node:fs'
import { pathToFileURL } from 'node:url'
import { build } from 'esbuild'
import { inRoot } from './paths.mjs'

const OUT = '.cache/bench'
const files = readdirSync(inRoot('tests/bench')).filter((name) => name.endsWith('.ts'))
if (files.length === 0) {
  console.log('There is nothing to measure in tests/bench.')
  process.exit(1)
}
mkdirSync(inRoot(OUT), { recursive: true })
await build({
  absWorkingDir: inRoot(),
  entryPoints: files.map((name) => `tests/bench/${name}`),
  outdir: OUT,
  outExtension: { '.js': '.mjs' },
  bundle: true,
  packages: 'external',
  platform: 'node',
  target: 'node20',
  format: 'esm',
  logLevel: 'warning',
})
const only = process.argv[2]
for (const name of files.filter((file) => only === undefined || file === `${only}.ts`)) {
  const module = await import(pathToFileURL(inRoot(OUT, name.replace(/\.ts$/, '.mjs'))).href)
  for (const [bench, measure] of Object.entries(module)) {
    if (!bench.startsWith('bench') || typeof measure !== 'function') continue
    for (const { label, value, unit } of await measure())
      console.log(`${label.padEnd(60)} ${String(Number(value.toPrecision(4))).padStart(12)} ${unit}`)
  }
}
