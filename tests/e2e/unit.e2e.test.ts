/** A unit's page: the day drawn, another day by its link, a change tried and nothing saved, taken to the hardware form, all by keyboard. */
import type { Browser } from 'playwright-core'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { DEMO_PASSWORD, LANDLORD, TENANT } from '#lib/demo/people.ts'
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

describe('a unit’s page', () => {
  it('draws the day, says its chance and the year, and tries a change that it does not save', async () => {
    const { context, page, problems } = await visitor(browser, product.baseUrl, 390)
    await signIn(page, LANDLORD.email, DEMO_PASSWORD)
    await page.goto(UNIT)
    const drawn = page.getByRole('img', { name: /^Temperatures on / }).first()
    expect(await drawn.getAttribute('aria-label')).toMatch(/Outlet between \d+ and \d+ °C.*Showers: /s)
    expect(await page.getByText(/ready \d+ days in 20/).count()).toBeGreaterThan(3)
    expect(await page.getByText('This week of showers is short all year', { exact: false }).first().isVisible()).toBe(true)
    const why = page.getByText('Why?').first()
    await why.focus()
    await page.keyboard.press('Enter')
    expect(await page.getByText('computed: the model was run again with it', { exact: false }).count()).toBeGreaterThan(0)

    const run = page.getByLabel('Run to count on')
    await run.scrollIntoViewIfNeeded()
    await (await run.elementHandle())?.waitForElementState('enabled')
    await run.focus()
    await page.keyboard.press('Control+A')
    await page.keyboard.type('90')
    const table = page.getByRole('region', { name: 'Now and then' })
    const row = table.getByRole('row', { name: /^That day/ })
    await row.getByText('warm on time').waitFor()
    expect(await row.textContent()).toContain('short')
    await page.reload()
    await run.scrollIntoViewIfNeeded()
    expect(await run.inputValue()).not.toBe('90')
    expect(await page.getByRole('heading', { level: 1 }).textContent()).toContain('short')
    await context.close()
    expect(problems).toEqual([])
  })
  it('takes what was tried to the hardware form, which records nothing by itself', async () => {
    const { context, page, problems } = await visitor(browser, product.baseUrl)
    await signIn(page, LANDLORD.email, DEMO_PASSWORD)
    await page.goto(UNIT)
    const setPoint = page.getByLabel('Set point')
    await setPoint.scrollIntoViewIfNeeded()
    await setPoint.fill('62')
    await page.getByRole('link', { name: 'Take it to the hardware form' }).click()
    await page.waitForURL(/hardware\?setPointC=62/)
    expect(await page.getByText('Nothing is recorded until you record it', { exact: false }).isVisible()).toBe(true)
    await page.goto(UNIT)
    expect(await page.getByText('Hardware, revision 1').isVisible()).toBe(true)
    await context.close()
    expect(problems).toEqual([])
  })
  it('draws another day from its link without any script', async () => {
    const context = await browser.newContext({ baseURL: product.baseUrl, javaScriptEnabled: false })
    const page = await context.newPage()
    await signIn(page, LANDLORD.email, DEMO_PASSWORD)
    await page.goto(UNIT)
    const days = page.getByRole('navigation', { name: 'Day drawn' }).getByRole('link')
    expect(await days.count()).toBe(7)
    const last = (await days.last().textContent())?.trim() ?? ''
    await days.last().click()
    expect(await page.getByRole('navigation', { name: 'Day drawn' }).locator('[aria-current=true]').textContent()).toContain(last)
    await context.close()
  })
  it('is nobody else’s to see', async () => {
    const { context, page } = await visitor(browser, product.baseUrl)
    await signIn(page, TENANT.email, DEMO_PASSWORD)
    expect((await page.goto(UNIT))?.status()).toBe(403)
    await context.close()
  })
})
