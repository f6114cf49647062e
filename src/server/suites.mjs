/** The test suites and how their reports are read: a suite or a file that ran nothing counts as failed, and so does a skipped test. */
import { existsSync, mkdirSync, readFileSync, rmSync } from 'node:fs'
import { inRoot } from './paths.mjs'
import { runTool } from './run.mjs'

const REPORTS = '.cache/prove'

export const SUITES = {
  unit: { name: 'unit and integration', args: [] },
  // Nothing may depend on the zone of the machine: the other side of the date line, with its own clock changes.
  otherZone: {
    name: 'time in another zone',
    args: ['tests/core/time', 'tests/core/tariff', 'tests/lib/jobs'],
    env: { TZ: 'Pacific/Chatham' },
  },
  browser: { name: 'browser', args: ['--config', 'vitest.e2e.config.ts'] },
}

export async function runSuite({ name, args, env = {} }) {
  mkdirSync(inRoot(REPORTS), { recursive: true })
  const report = `${REPORTS}/${name.replaceAll(' ', '-')}.json`
  rmSync(inRoot(report), { force: true })
  const startedAtMs = performance.now()
  const reporters = ['--reporter=dot', '--reporter=json', `--outputFile.json=${report}`]
  const { code } = await runTool('vitest/vitest.mjs', ['run', ...reporters, ...args], { env })
  const result = existsSync(inRoot(report)) ? readReport(JSON.parse(readFileSync(inRoot(report), 'utf8'))) : NOTHING
  const failed = code !== 0 && result.failed === 0 ? 1 : result.failed
  console.log(`${name}: ${result.passed} passed, ${failed} failed (${((performance.now() - startedAtMs) / 1000).toFixed(0)} s)`)
  for (const problem of result.problems) console.log(`  ${problem}`)
  return { passed: result.passed, failed }
}

const NOTHING = { passed: 0, failed: 1, problems: ['The suite ran nothing.'] }

export function readReport(report) {
  if (report.testResults.length === 0 || report.numTotalTests === 0) return NOTHING
  const problems = []
  let failed = report.numFailedTests
  for (const { name, assertionResults, status, message } of report.testResults) {
    if (assertionResults.length > 0) continue
    problems.push(`${name} ran nothing.${status === 'failed' ? ` ${message}` : ''}`)
    failed += 1
  }
  const skipped = report.numTotalTests - report.numPassedTests - report.numFailedTests
  if (skipped > 0) problems.push(`${skipped} tests were skipped.`)
  return { passed: report.numPassedTests, failed: failed + skipped, problems }
}
