/** Timers in the browser: advice follows what is typed, and a clock round is planned with one button, once. */
import type { Browser } from 'playwright-core'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { DEMO_PASSWORD, ELECTRICIAN, LANDLORD } from '#lib/demo/people.ts'
import { openBrowser, signIn, visitor } from './support/browser.ts'
import { type RunningProduct, startProduct } from './support/server.ts'

const HOUSE = '/o/brindlecross/p/cinder-wharf'

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

describe('advice beside the hardware form', () => {
  it('names parts for a short timer, and falls silent once a long enough one is entered', async () => {
    const { page, problems, context } = await visitor(browser, product.baseUrl)
    await signIn(page, LANDLORD.email, DEMO_PASSWORD)
    await page.goto(`${HOUSE}/units/5C/hardware`)
    const advice = page.getByRole('region', { name: 'What would do' })
    await advice
      .getByText(/Set the dial to \d+ min/)
      .first()
      .waitFor()
    const minutes = /Set the dial to (\d+) min/.exec(await advice.innerText())?.[1] ?? ''
    await page.getByLabel('Set to').fill(minutes)
    await advice.waitFor({ state: 'detached' })
    await page.getByLabel('Scale ends at').fill('20')
    await page.getByText('Fit a timer with a longer scale').waitFor()
    expect(problems).toEqual([])
    await context.close()
  })
  it('says for a timer that may never stop what surely does, or why nothing does', async () => {
    const { page, problems, context } = await visitor(browser, product.baseUrl, 390)
    await signIn(page, LANDLORD.email, DEMO_PASSWORD)
    await page.goto(`${HOUSE}/units/4B/hardware`)
    const advice = page.getByRole('region', { name: 'What would do' })
    await advice.getByText(/Fit /).first().waitFor()
    expect(await advice.innerText()).toMatch(/at least \d+ min, at most \d+ min/)
    expect(problems).toEqual([])
    await context.close()
  })
})

describe('the clock round', () => {
  it('plans every visit with one button, once, and the electrician finds them', async () => {
    const { page, problems, context } = await visitor(browser, product.baseUrl)
    await signIn(page, LANDLORD.email, DEMO_PASSWORD)
    await page.goto(`${HOUSE}/clock-change`)
    const button = page.getByRole('button', { name: /^Plan \d+ visits?$/ })
    const before = await button.count()
    expect(before).toBeGreaterThan(0)
    await button.first().click()
    await page
      .getByRole('status')
      .getByText(/planned and the electrician told/)
      .waitFor()
    expect(await button.count()).toBe(before - 1)
    expect(problems).toEqual([])
    await context.close()

    const electrician = await visitor(browser, product.baseUrl, 390)
    await signIn(electrician.page, ELECTRICIAN.email, DEMO_PASSWORD)
    await electrician.page.goto('/o/brindlecross/visits')
    await electrician.page
      .getByText(/Clock change on/)
      .first()
      .waitFor()
    expect(electrician.problems).toEqual([])
    await electrician.context.close()
  })
})
