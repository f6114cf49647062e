/** `npm run build`: the site by Astro, and what runs outside it (commands, jobs, settings) bundled by esbuild, all to `dist/`. */
import { rmSync } from 'node:fs'
import { build } from 'esbuild'
import { inRoot } from './paths.mjs'
import { runTool } from './run.mjs'

rmSync(inRoot('dist'), { recursive: true, force: true })
const { code } = await runTool('astro/astro.js', ['build'], { env: { ASTRO_TELEMETRY_DISABLED: '1', NODE_ENV: 'production' } })
if (code !== 0) process.exit(code)

await build({
  absWorkingDir: inRoot(),
  entryPoints: {
    'db/migrate-command': 'db/migrate-command.ts',
    'db/seed': 'db/seed-command.ts',
    'db/backup': 'db/backup.ts',
    'db/restore': 'db/restore.ts',
    'jobs/index': 'jobs/index.ts',
    'jobs/bounces': 'jobs/bounces.ts',
    'lib/config': 'src/lib/config.server.ts',
  },
  outdir: 'dist',
  outExtension: { '.js': '.mjs' },
  bundle: true,
  packages: 'external',
  platform: 'node',
  target: 'node20',
  format: 'esm',
  sourcemap: true,
  logLevel: 'warning',
})
