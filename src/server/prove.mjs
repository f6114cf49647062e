/** `npm test`: the whole proof: checks, tests, a production build and browser tests against it. Closes with `N passed, N failed`. */
import { needChromium } from './browser.mjs'
import { runChecks } from './checks.mjs'
import { checkNode, giveUp, install } from './prepare.mjs'
import { run } from './run.mjs'
import { runSuite, SUITES } from './suites.mjs'

const problem = checkNode()
if (problem) giveUp(problem)
await install()
await needChromium()

const results = []
const failedChecks = await runChecks()
results.push({ passed: 0, failed: failedChecks.length })
results.push(await runSuite(SUITES.unit))
results.push(await runSuite(SUITES.otherZone))

console.log('Building for production.')
const built = await run(process.execPath, ['src/server/build.mjs'], { capture: 'all' })
if (built.code === 0) {
  results.push(await runSuite(SUITES.browser))
} else {
  console.log(`${built.output}\nThe production build failed, so no browser test ran.`)
  results.push({ passed: 0, failed: 1 })
}

const sum = (part) => results.reduce((total, result) => total + result[part], 0)
const [passed, failed] = [sum('passed'), sum('failed')]
if (failedChecks.length > 0) console.log(`Not in order: ${failedChecks.join(', ')}.`)
console.log(`${passed} passed, ${failed} failed`)
process.exit(failed === 0 && passed > 0 ? 0 : 1)
