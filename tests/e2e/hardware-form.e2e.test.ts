/** The hardware form: verdicts change as one types, a cleared field never passes, and what is from memory says so. */
import type { Browser } from 'playwright-core'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { DEMO_PASSWORD, LANDLORD } from '#lib/demo/people.ts'
import { openBrowser, signIn, visitor } from './support/browser.ts'
import { type RunningProduct, startProduct } from './support/server.ts'

const UNIT = '/o/brindlecross/p/cinder-wharf/units/5C'
let product: RunningProduct
let browser: Browser
beforeAll(async () => {
  product = await startProduct({ demo: true })
  browser = await openBrowser()
}, 180_000)
afterAll(async () => {
  await browser.close()
  await product.stop()
})

describe('the hardware form', () => {
  it('screens while one types, records the younger fields, and shows them on the unit’s page', async () => {
    const { context, page, problems } = await visitor(browser, product.baseUrl, 390)
    await signIn(page, LANDLORD.email, DEMO_PASSWORD)
    await page.goto(`${UNIT}/hardware`)
    const entry = (title: string) => page.locator('.ledger > div').filter({ has: page.getByText(title, { exact: true }) })
    const supply = page.getByLabel(/^Supply, V/)
    await (await supply.elementHandle())?.waitForElementState('enabled')
    await entry('Contact of the timer').getByText('passes').waitFor()
    // 10 A of contact under 16.25 A of load (4500 W at 240 V on 208 V).
    await page.getByLabel(/^Contact rating/).fill('10')
    await entry('Contact of the timer').getByText('fails').waitFor()
    expect(await entry('Contact of the timer').textContent()).toMatch(/16\.25 A.*10 A resistive.*Caution:/s)
    await page.getByLabel(/^Contact rating/).fill('30')
    await supply.fill('')
    for (const title of ['Contact of the timer', 'Breaker large enough', 'Conductor'])
      await entry(title).getByText('not known').first().waitFor()
    await supply.fill('208')
    await page.getByLabel('A home-built timer with a relay').selectOption('yes')
    await page.getByLabel(/^Transformer, VA/).fill('5')
    await page.getByLabel(/^Primary fuse/).fill('50')
    expect(await entry('Primary fuse').textContent()).toMatch(/attention.*Confirm against your code/s)
    await page.getByLabel('A home-built timer with a relay').selectOption('no')
    await page.getByLabel('Terminals marked for').selectOption('75')
    await page.getByLabel(/^Largest device on the heater/).fill('25')
    await page.getByLabel('What was done and why').fill('Nameplate and terminals read')
    await Promise.all([
      page.waitForURL((url) => !url.pathname.endsWith('/hardware')),
      page.getByRole('button', { name: 'Record revision 2' }).click(),
    ])
    expect(await page.getByText('Terminals rated for: nothing → 75 °C', { exact: false }).count()).toBe(1)
    const water = page.getByRole('region', { name: 'Stored water' })
    expect(await water.textContent()).toMatch(/Guidance followed.*Legionella.*ask /s)
    await context.close()
    expect(problems).toEqual([])
  })
})
