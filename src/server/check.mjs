/** `npm run check`: everything that can be known without a database, in seconds. */
import { runChecks } from './checks.mjs'
import { install } from './prepare.mjs'

await install()
const failed = await runChecks()
if (failed.length > 0) console.log(`Not in order: ${failed.join(', ')}.`)
process.exit(failed.length === 0 ? 0 : 1)
