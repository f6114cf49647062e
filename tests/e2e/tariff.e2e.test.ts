/** The rate editor in a browser: by keyboard alone, by mouse, by two people at once, without script, and clean for axe. */
import { gzipSync } from 'node:zlib'
import { AxeBuilder } from '@axe-core/playwright'
import type { Browser, Page } from 'playwright-core'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { DEMO_PASSWORD, LANDLORD } from '#lib/demo/people.ts'
import { openBrowser, signIn, visitor } from './support/browser.ts'
import { type RunningProduct, startProduct } from './support/server.ts'

const HOUSE = '/o/brindlecross/p/cinder-wharf'
const EDIT = `${HOUSE}/tariff/edit`
const MOST_TABS = 200
/** What the page may load, its framework included. */
const SCRIPT_BUDGET_BYTES = 90_000

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

async function landlord(widthPx = 1440) {
  const one = await visitor(browser, product.baseUrl, widthPx)
  await signIn(one.page, LANDLORD.email, DEMO_PASSWORD)
  return one
}
const focusedLabel = (page: Page) =>
  page.evaluate<string>(`(() => {
    const { activeElement: at, body } = document
    return at && at !== body ? (at.getAttribute('aria-label') ?? at.textContent ?? '').trim() : ''
  })()`)
/** The grid is there before its script is. */
async function openEditor(page: Page): Promise<void> {
  await page.goto(EDIT)
  await page.locator('astro-island:not([ssr]) [role=grid]').first().waitFor()
}
/** Goes on with Tab until what is focused reads as wanted. */
async function tabTo(page: Page, wanted: RegExp): Promise<void> {
  for (let press = 0; press < MOST_TABS; press++) {
    if (wanted.test(await focusedLabel(page))) return
    await page.keyboard.press('Tab')
  }
  throw new Error(`Nothing reads ${String(wanted)} within ${MOST_TABS} presses of Tab.`)
}
const said = (page: Page) => page.locator('[role=status][aria-live]').innerText()
const cell = (page: Page, label: RegExp) => page.getByRole('gridcell', { name: label })

describe('the rate editor', () => {
  it('is worked with the keyboard alone, from painting to the saved version', async () => {
    const { page, problems, context } = await landlord()
    await openEditor(page)
    await tabTo(page, /Monday to Friday, 00:00 to 01:00/)
    for (let press = 0; press < 20; press++) await page.keyboard.press('ArrowDown')
    expect(await focusedLabel(page)).toMatch(/Monday to Friday, 20:00 to 21:00: /)
    await page.keyboard.press('Shift+ArrowDown')
    await page.keyboard.press('Shift+ArrowRight')
    await page.keyboard.press('b')
    expect(await said(page)).toMatch(/20:00 to 22:00: now B/)
    for (const days of ['Monday to Friday', 'Saturday, Sunday'])
      for (const hours of ['20:00 to 21:00', '21:00 to 22:00']) expect(await cell(page, new RegExp(`${days}, ${hours}: B`)).count()).toBe(1)
    await page.keyboard.press('Control+z')
    expect(await said(page)).toMatch(/undone/)
    expect(await cell(page, /Saturday, Sunday, 21:00 to 22:00: B/).count()).toBe(0)
    await page.keyboard.press('b')
    await tabTo(page, /^Save this version$/)
    await page.keyboard.press('Enter')
    await page.waitForURL(/\/tariff\?saved=/)
    expect(await page.getByRole('status').first().innerText()).toMatch(/Saved: a version in force from/)
    expect(problems).toEqual([])
    await context.close()
  })
  it('paints what a mouse is dragged over, and changes the previewed bill', async () => {
    const { page, problems, context } = await landlord()
    await openEditor(page)
    const bill = page.getByRole('heading', { name: /Preview/ })
    const before = await bill.innerText()
    const from = await cell(page, /Monday to Friday, 05:00 to 06:00/).boundingBox()
    const to = await cell(page, /Saturday, Sunday, 08:00 to 09:00/).boundingBox()
    if (!from || !to) throw new Error('The grid is not there.')
    await page.getByRole('radio').nth(1).check()
    await page.mouse.move(from.x + 10, from.y + 10)
    await page.mouse.down()
    await page.mouse.move(to.x + 10, to.y + 10, { steps: 8 })
    await page.mouse.up()
    expect(await said(page)).toMatch(/05:00 to 09:00: now B/)
    expect(await cell(page, /Saturday, Sunday, 07:00 to 08:00: B/).count()).toBe(1)
    await expect.poll(() => bill.innerText()).not.toBe(before)
    expect(problems).toEqual([])
    await context.close()
  })
  it('tells the second of two people what the first has saved, and loses nothing of theirs', async () => {
    const [first, second] = [await landlord(), await landlord()]
    for (const { page } of [first, second]) {
      await openEditor(page)
    }
    await first.page.getByLabel('Name of the rate').fill('The first one’s rate')
    await first.page.getByRole('button', { name: 'Save this version' }).click()
    await first.page.waitForURL(/saved=/)
    await second.page.getByLabel('Name of the rate').fill('The second one’s rate')
    await second.page.getByRole('button', { name: 'Save this version' }).click()
    const alert = second.page.getByRole('alert')
    expect(await alert.innerText()).toMatch(/Somebody else saved.*The first one’s rate/s)
    expect(await second.page.getByLabel('Name of the rate').inputValue()).toBe('The second one’s rate')
    await second.page.getByLabel('Why it is corrected').fill('Both of us wrote it; this is the right one.')
    await second.page.getByRole('button', { name: 'Save mine as well' }).click()
    await second.page.waitForURL(/saved=/)
    expect(await second.page.locator('main').innerText()).toMatch(/Both of us wrote it/)
    for (const { context } of [first, second]) await context.close()
  })
  it('needs script and says so; reading and exporting do not', async () => {
    const context = await browser.newContext({ baseURL: product.baseUrl, javaScriptEnabled: false })
    const page = await context.newPage()
    await page.goto('/sign-in')
    await page.getByLabel('E-mail').fill(LANDLORD.email)
    await page.getByLabel('Password').fill(DEMO_PASSWORD)
    await page.getByRole('button', { name: 'Sign in' }).click()
    await page.goto(EDIT)
    expect(await page.locator('noscript').innerText()).toMatch(/Painting needs JavaScript/)
    await page.goto(`${HOUSE}/tariff`)
    expect(await page.locator('main').innerText()).toMatch(/07:00–10:00 \$0\.2936\/kWh\s+on-peak/)
    expect(await page.getByRole('button', { name: /Import|Look/ }).count()).toBe(1)
    const answer = await page.request.get(`/api${HOUSE}/tariff`)
    expect(answer.headers()['content-disposition']).toMatch(/attachment; filename="cinder-wharf-tariff/)
    expect(await answer.json()).toHaveProperty('energyratestructure')
    await context.close()
  })
  it.each([
    [1440, 'light'],
    [1440, 'dark'],
    [390, 'light'],
    [390, 'dark'],
  ] as const)('is clean for axe and never scrolls sideways at %d px, %s, with everything open', async (widthPx, scheme) => {
    const { page, context } = await landlord(widthPx)
    await page.emulateMedia({ colorScheme: scheme })
    await openEditor(page)
    await page.getByRole('button', { name: 'Add a season' }).click()
    await page.getByLabel('A day type of its own').fill('Holiday')
    await page.getByRole('button', { name: 'Add a column for it' }).click()
    await page.getByLabel(/Dates to add/).fill('2027-12-25 2027-13-01')
    await page.getByRole('button', { name: 'Add the dates' }).click()
    await page.getByLabel(/On the highest within each demand period/).check()
    await page.getByLabel('Name of the rate').fill('')
    const { violations } = await new AxeBuilder({ page }).withTags(['wcag2a', 'wcag2aa', 'wcag21aa', 'wcag22aa']).analyze()
    expect(violations.map((one) => `${one.id} at ${one.nodes[0]?.target.join(' ') ?? ''}`)).toEqual([])
    expect(await page.evaluate('document.documentElement.scrollWidth - document.documentElement.clientWidth')).toBeLessThanOrEqual(0)
    const shots = process.env.TARIFF_SHOTS
    if (shots) await page.screenshot({ path: `${shots}/${widthPx}-${scheme}.png`, fullPage: true })
    await context.close()
  })
  it('loads no more script than its budget, compressed', async () => {
    const { page, context } = await landlord()
    const bodies: Promise<Buffer>[] = []
    page.on('response', (response) => {
      if (response.request().resourceType() === 'script') bodies.push(response.body())
    })
    await openEditor(page)
    await page.waitForLoadState('networkidle')
    const bytes = (await Promise.all(bodies)).reduce((sum, body) => sum + gzipSync(body).length, 0)
    // React alone is more than this: a page that loads nothing must not pass.
    expect(bytes).toBeGreaterThan(50_000)
    expect(bytes).toBeLessThanOrEqual(SCRIPT_BUDGET_BYTES)
    await context.close()
  })
})
