/** The browser that the tests drive: Debian's Chromium, installed when this may be done. */
import { existsSync } from 'node:fs'
import { giveUp } from './prepare.mjs'
import { run } from './run.mjs'

export const CHROMIUM = '/usr/bin/chromium'
const INSTALL = 'apt-get install -y chromium'

export async function needChromium() {
  if (existsSync(CHROMIUM)) return
  const mayInstall = process.getuid?.() === 0 && existsSync('/usr/bin/apt-get')
  if (!mayInstall) giveUp(`The browser tests need Debian's Chromium at ${CHROMIUM}. Install it as root with: ${INSTALL}`)
  console.log('Installing Chromium for the browser tests.')
  const env = { DEBIAN_FRONTEND: 'noninteractive' }
  const first = await run('apt-get', ['install', '-y', '--no-install-recommends', 'chromium'], { env, capture: 'all' })
  if (first.code !== 0) {
    // A machine whose package lists were never fetched.
    await run('apt-get', ['update'], { env, capture: 'all' })
    await run('apt-get', ['install', '-y', '--no-install-recommends', 'chromium'], { env, capture: 'all' })
  }
  if (!existsSync(CHROMIUM)) giveUp(`Chromium could not be installed. The browser tests need it at ${CHROMIUM}: ${INSTALL}`)
}
