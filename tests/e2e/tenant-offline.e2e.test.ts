/** The card without a connection, and a phone that several people use: kept is what one opened oneself, until one signs out. */
import type { Browser, Page } from 'playwright-core'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { DEMO_PASSWORD, LANDLORD, TENANT } from '#lib/demo/people.ts'
import { openBrowser, signIn, visitor, type Visitor } from './support/browser.ts'
import { type RunningProduct, startProduct } from './support/server.ts'

const MY = '/o/brindlecross/my'
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

/** Addresses in every cache of this browser. */
const keptBy = (page: Page): Promise<readonly string[]> =>
  page.evaluate(`(async () => {
    const urls = []
    for (const name of await caches.keys()) for (const { url } of await (await caches.open(name)).keys()) urls.push(new URL(url).pathname)
    return urls.filter((path) => !path.startsWith('/_astro/'))
  })()`)

async function keptUntil(page: Page, path: string): Promise<void> {
  await expect.poll(() => keptBy(page), { timeout: 20_000 }).toContain(path)
}

async function tenantWithCard(): Promise<Visitor> {
  const tenant = await visitor(browser, product.baseUrl, 390)
  await signIn(tenant.page, TENANT.email, DEMO_PASSWORD)
  await tenant.page.goto(MY)
  await keptUntil(tenant.page, MY)
  return tenant
}

describe('the card without a connection', () => {
  it('opens as it was, says from when it is, and offers nothing that would have to be sent', async () => {
    const { context, page, problems } = await tenantWithCard()
    const heading = await page.getByRole('heading', { level: 1 }).innerText()
    const asOf = /As of (.+)\.$/.exec(await page.getByText(/^As of /).innerText())?.[1] ?? 'no time'
    expect(asOf).toMatch(/\d\d:\d\d \(.+\)$/)
    expect(problems).toEqual([])
    await context.setOffline(true)
    await page.reload()
    expect(await page.getByRole('heading', { level: 1 }).innerText()).toBe(heading)
    const note = await page.getByText('No connection.').innerText()
    // The copy is the page as asked for once more when the worker began: the same minute or the next.
    expect(note).toMatch(/as it was on .+ \d\d:\d\d \(.+\); what you press is not sent/)
    expect(await page.locator('form:visible').count()).toBe(0)
    const styled: unknown = await page.evaluate('getComputedStyle(document.body).fontFamily')
    expect(String(styled)).toContain('Lato')
    await context.close()
  })
  it('answers with a plain page where it has not been, and for what it never keeps', async () => {
    const { context, page } = await tenantWithCard()
    await page.goto(`${MY}/kept`)
    await page.goto(`${MY}/calendar`)
    expect(await keptBy(page)).toEqual(expect.not.arrayContaining([`${MY}/kept`, `${MY}/calendar`]))
    await context.setOffline(true)
    for (const path of ['week', 'kept', 'calendar']) {
      await page.goto(`${MY}/${path}`)
      await page.getByRole('heading', { name: 'There is no connection.' }).waitFor()
    }
    await context.close()
  })
  it('says that nothing was sent where a form could not be', async () => {
    const { context, page } = await tenantWithCard()
    await context.setOffline(true)
    await page.getByRole('button', { name: 'It was cold' }).click()
    await page.getByText('Nothing was sent and nothing was changed.').waitFor()
    await context.close()
  })
})

describe('a shared phone', () => {
  it('keeps nothing after signing out', async () => {
    const { context, page } = await tenantWithCard()
    await page.goto('/account')
    await page.getByRole('button', { name: 'Sign out here' }).click()
    await page.waitForURL('**/sign-in')
    await expect.poll(() => keptBy(page)).toEqual([])
    expect(await page.evaluate('navigator.serviceWorker.getRegistrations().then((all) => all.length)')).toBe(0)
    await context.setOffline(true)
    await expect(page.goto(MY)).rejects.toThrow(/ERR_INTERNET_DISCONNECTED/)
    await context.close()
  })
  it('shows the next person nothing of the one before, whose session ran out', async () => {
    const { context, page } = await tenantWithCard()
    await context.clearCookies()
    await signIn(page, LANDLORD.email, DEMO_PASSWORD)
    await expect.poll(() => keptBy(page)).toEqual([])
    await context.setOffline(true)
    await expect(page.goto(MY)).rejects.toThrow(/ERR_INTERNET_DISCONNECTED/)
    await context.close()
  })
  it('forgets the card as soon as it is asked for without a session', async () => {
    const { context, page } = await tenantWithCard()
    await context.clearCookies()
    await page.goto(`${MY}/week`)
    await page.waitForURL('**/sign-in?next=*')
    await expect.poll(() => keptBy(page)).not.toContain(MY)
    await context.close()
  })
})
