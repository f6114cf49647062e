/** A landlord narrows the post, reads a letter without its links, sends it again, pauses a property and sees it everywhere; without client script. */
import type { Browser } from 'playwright-core'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { DEMO_PASSWORD, LANDLORD } from '#lib/demo/people.ts'
import { openBrowser, signIn } from './support/browser.ts'
import { type RunningProduct, startProduct } from './support/server.ts'

const HOME = '/o/brindlecross'
let product: RunningProduct
let browser: Browser
beforeAll(async () => {
  product = await startProduct({ demo: true })
  await product.runJob('flag-summary')
  await product.runJob('mail')
  browser = await openBrowser()
}, 180_000)
afterAll(async () => {
  await browser.close()
  await product.stop()
})

describe('the post', () => {
  it('is narrowed by address, read without private links, and sent again once', { timeout: 120_000 }, async () => {
    const context = await browser.newContext({ baseURL: product.baseUrl, javaScriptEnabled: false })
    const page = await context.newPage()
    await signIn(page, LANDLORD.email, DEMO_PASSWORD)
    await page.goto(`${HOME}/post`)
    await page.getByLabel('Kind').selectOption('flag-summary')
    await page.getByRole('button', { name: 'Show these' }).click()
    expect(new URL(page.url()).searchParams.get('kind')).toBe('flag-summary')
    const letters = page.locator('tbody tr')
    const before = await letters.count()
    expect(before).toBe(3)
    await letters.first().getByRole('link').click()
    await page.getByRole('link', { name: 'Plain text' }).click()
    const text = (await page.locator('#letter pre').textContent()) ?? ''
    expect(text).toMatch(/Stop these mails: http\S+\/t\/…/)
    const sent = (await product.smtp.parsed()).find((mail) => mail.subject?.startsWith('See to'))
    expect(sent?.text).toMatch(/Stop these mails: http\S+\/t\/[\w-]+\.[\w-]+/)
    await page.getByRole('button', { name: 'Send again' }).click()
    expect(await page.getByRole('status').textContent()).toContain('A new letter is queued')
    await page.goto(`${HOME}/post?kind=flag-summary`)
    expect(await letters.count()).toBe(before + 1)
    await context.close()
  })

  it('shows on every page of a property that its sending is paused', { timeout: 120_000 }, async () => {
    const context = await browser.newContext({ baseURL: product.baseUrl, javaScriptEnabled: false })
    const page = await context.newPage()
    await signIn(page, LANDLORD.email, DEMO_PASSWORD)
    await page.goto(`${HOME}/post`)
    await page.getByRole('button', { name: 'Pause all sending of Cinder Wharf' }).click()
    for (const path of ['', 'units', 'flags', 'settings']) {
      await page.goto(`${HOME}/p/cinder-wharf/${path}`)
      expect(await page.getByText('Sending is paused for Cinder Wharf.').count()).toBe(1)
    }
    await page.goto(`${HOME}/p/kestrel-rise/flags`)
    expect(await page.getByText('Sending is paused').count()).toBe(0)
    await page.goto(`${HOME}/post`)
    await page.getByRole('button', { name: 'Resume sending of Cinder Wharf' }).click()
    await page.goto(`${HOME}/p/cinder-wharf/flags`)
    expect(await page.getByText('Sending is paused').count()).toBe(0)
    await context.close()
  })
})
