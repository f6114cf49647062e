/** The frame of the database commands: settings checked first, one readable line on failure, the exit code says the rest. */
import { mkdirSync } from 'node:fs'
import { type Config, readConfig } from '#lib/config.server.ts'

export async function command(work: (config: Config) => Promise<void> | void): Promise<void> {
  const outcome = readConfig(process.env)
  if (outcome.status === 'invalid') {
    console.error(`Settings are not valid. Nothing was started.\n${outcome.problems.map((line) => `  ${line}`).join('\n')}`)
    process.exitCode = 1
    return
  }
  try {
    mkdirSync(outcome.config.dataDir, { recursive: true, mode: 0o700 })
    await work(outcome.config)
  } catch (error) {
    console.error(error instanceof Error ? error.message : error)
    process.exitCode = 1
  }
}
