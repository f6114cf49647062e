/** The tenant's side on a 390 px phone: from the invitation to showers, calendar, wall card, answers and what is kept; with and without script. */
import { gzipSync } from 'node:zlib'
import ICAL from 'ical.js'
import type { Browser, Page } from 'playwright-core'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { DEMO_PASSWORD, ELECTRICIAN, LANDLORD, OWNER, TENANT } from '#lib/demo/people.ts'
import { openBrowser, signIn, visitor } from './support/browser.ts'
import { type RunningProduct, startProduct } from './support/server.ts'

const HOME = '/o/brindlecross'
const MY = `${HOME}/my`
const PAGES = [MY, `${MY}/showers`, `${MY}/week`, `${MY}/calendar`, `${MY}/wall`, `${MY}/history`, `${MY}/kept`]
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

const phone = async (email: string) => {
  const one = await visitor(browser, product.baseUrl, 390)
  await signIn(one.page, email, DEMO_PASSWORD)
  return one
}
const linkTo = async (address: string, path: string): Promise<string> => {
  await product.runJob('mail')
  const mail = (await product.smtp.parsed()).findLast((one) => one.to?.some((to) => to.address === address))
  return new RegExp(`https?://\\S+/${path}/\\S+`).exec(mail?.text ?? '')?.[0] ?? ''
}

describe('an invitation', () => {
  it('opens the week of showers, which is answered while it is chosen and set in under a minute', async () => {
    const landlord = await visitor(browser, product.baseUrl)
    await signIn(landlord.page, LANDLORD.email, DEMO_PASSWORD)
    await landlord.page.goto(`${HOME}/p/cinder-wharf/units/5B`)
    await landlord.page.getByRole('button', { name: /^Invite / }).click()
    await landlord.page.waitForLoadState('networkidle')
    await product.runJob('mail')
    const mail = (await product.smtp.parsed()).findLast((one) => one.text?.includes('/invitation/'))
    const link = /https?:\/\/\S+\/invitation\/\S+/.exec(mail?.text ?? '')?.[0] ?? ''
    const { page, context } = await visitor(browser, product.baseUrl, 390)
    const beganMs = performance.now()
    await page.goto(link)
    await page.getByLabel('Choose a password').fill('a kettle of old copper')
    await page.getByRole('button', { name: 'Accept' }).click()
    await page.waitForURL(`**${MY}/showers`)
    await page.getByRole('heading', { name: 'When do you shower?' }).waitFor()
    const answer = page.getByRole('status').filter({ hasText: 'Monday' })
    const typed = { time: page.locator('[name=weekdays-time]'), minutes: page.locator('[name=weekdays-minutes]') }
    await typed.time.fill('06:40')
    await typed.minutes.fill('4')
    await expect.poll(() => answer.innerText()).toMatch(/works at 06:40|min too short/)
    await typed.minutes.fill('45')
    await expect.poll(() => answer.innerText()).toMatch(/min too short|No run of up to/)
    await typed.minutes.fill('4')
    await page.locator('[name=weekend-time]').fill('09:00')
    await page.getByRole('button', { name: 'Save my showers' }).click()
    await page.waitForURL(`**${MY}`)
    await page.getByRole('heading', { level: 1, name: /today|tomorrow/ }).waitFor()
    // A script is faster than a thumb; what a person adds is reading. Nine presses and four fields leave room within the minute.
    expect(performance.now() - beganMs).toBeLessThan(60_000)
    await Promise.all([context.close(), landlord.context.close()])
  })
})

describe('the answer while one chooses', () => {
  it('says by how much the run is short and the nearest times that work, or that none does', async () => {
    const { page, context } = await phone(TENANT.email)
    await page.goto(`${MY}/showers`)
    const answer = page.getByRole('status').filter({ hasText: 'Monday' })
    await page.locator('[name=weekdays-minutes]').fill('9')
    await expect
      .poll(() => answer.innerText())
      .toMatch(
        /at 06:45 the run is \d+ min too short: warm for \d+ of 18 minutes\. (Works at \d\d:\d\d|A shorter or a single shower may work)/,
      )
    await context.close()
  })
  it('says what the peak costs and the cheaper time nearest to it', async () => {
    const { page, context } = await phone(TENANT.email)
    await page.goto(`${MY}/showers`)
    const answer = page.getByRole('status').filter({ hasText: 'Monday' })
    await page.locator('[name=weekdays-time]').fill('08:30')
    await page.locator('[name=weekdays-count]').fill('1')
    await page.locator('[name=weekdays-minutes]').fill('3')
    await expect
      .poll(() => answer.innerText())
      .toMatch(/Costs about \$\d+\.\d\d a day, \$\d+\.\d\d of it on-peak\. At \d\d:\d\d instead: \$\d+\.\d\d\./)
    await context.close()
  })
})

describe('the calendar', () => {
  it('is made, read by an independent parser, asked about again for nothing, renewed and stopped', async () => {
    const { page, context } = await phone(TENANT.email)
    const get = (address: string, headers: Record<string, string> = {}) => fetch(address, { headers })
    await page.goto(`${MY}/calendar`)
    await page.getByRole('button', { name: 'Make my calendar address' }).click()
    const field = page.getByLabel('Or copy this address')
    const first = await field.inputValue()
    expect(await page.getByRole('link', { name: 'Open it in my calendar' }).getAttribute('href')).toBe(first.replace('http:', 'webcal:'))
    const answer = await get(first)
    expect(answer.headers.get('content-type')).toBe('text/calendar; charset=utf-8')
    expect(answer.headers.get('cache-control')).toBe('private, no-cache')
    const events = new ICAL.Component(ICAL.parse(await answer.text()) as unknown[]).getAllSubcomponents('vevent')
    expect(events.length).toBeGreaterThan(5)
    expect((await get(first, { 'if-none-match': answer.headers.get('etag') ?? '' })).status).toBe(304)
    expect((await get(first, { 'if-modified-since': answer.headers.get('last-modified') ?? '' })).status).toBe(304)
    expect((await fetch(first, { method: 'HEAD' })).status).toBe(200)
    await page.getByRole('button', { name: 'Renew the address' }).click()
    await page.getByText('This is your new address.').waitFor()
    const second = await field.inputValue()
    expect([(await get(first)).status, (await get(second)).status]).toEqual([404, 200])
    await page.getByRole('button', { name: 'Stop the calendar' }).click()
    await page.getByText('Stopped.').waitFor()
    expect((await get(second)).status).toBe(404)
    await context.close()
  })
})

describe('the card for the wall', () => {
  it.each([
    ['a6', 105, 148],
    ['a5', 148, 210],
  ])('prints on one page of %s (ISO 216: %i by %i mm) and names nobody', async (size, widthMm, heightMm) => {
    const { page, context } = await phone(TENANT.email)
    await page.goto(`${MY}/wall?size=${size}`)
    const text = await page.getByRole('article').innerText()
    expect(text).toContain('Hot water, 5C')
    expect(text).toMatch(/press by \d\d:\d\d|hot from \d\d:\d\d|no hot water to count on/)
    expect(text).toContain('can scald')
    expect(text).toContain(LANDLORD.name)
    for (const word of [...TENANT.name.split(' '), TENANT.email]) expect(text).not.toContain(word)
    const pdf = (await page.pdf({ preferCSSPageSize: true })).toString('latin1')
    const boxes = [...pdf.matchAll(/\/MediaBox\s*\[\s*0 0 ([\d.]+) ([\d.]+)\s*\]/g)]
    expect(boxes).toHaveLength(1)
    const mm = boxes[0]?.slice(1).map((points) => (Number(points) / 72) * 25.4) ?? []
    // Printers' points are rounded to whole CSS pixels: 0.26 mm each.
    expect(Math.abs((mm[0] ?? 0) - widthMm)).toBeLessThan(0.6)
    expect(Math.abs((mm[1] ?? 0) - heightMm)).toBeLessThan(0.6)
    await context.close()
  })
})

describe('the link in a mail', () => {
  it('changes nothing when a scanner follows it, asks once, and is noted without signing in', async () => {
    await product.runJob('tips', '--again')
    const link = await linkTo(TENANT.email, 't')
    expect(link).not.toBe('')
    for (const method of ['GET', 'HEAD', 'GET'] as const) expect((await fetch(link, { method })).status).toBe(200)
    const { page, context } = await phone(TENANT.email)
    await page.goto(`${MY}/history`)
    const before = await page.getByRole('listitem').filter({ hasText: 'It was' }).count()
    const stranger = await visitor(browser, product.baseUrl, 390)
    await stranger.page.goto(link)
    // The tip is of tomorrow: that day has nothing to say yet.
    await stranger.page.getByText('That day is yet to come.').waitFor()
    await page.reload()
    expect(await page.getByRole('listitem').filter({ hasText: 'It was' }).count()).toBe(before)
    await Promise.all([context.close(), stranger.context.close()])
  })
})

describe('without client script', () => {
  it('sets showers, answers, chooses mails and deletes', async () => {
    const context = await browser.newContext({ baseURL: product.baseUrl, viewport: { width: 390, height: 844 }, javaScriptEnabled: false })
    const page = await context.newPage()
    await signIn(page, TENANT.email, DEMO_PASSWORD)
    await page.goto(`${MY}/showers?mode=groups`)
    await page.locator('[name=weekdays-time]').fill('07:10')
    await page.getByRole('button', { name: 'Save my showers' }).click()
    await page.waitForURL(`**${MY}`)
    await page.getByRole('button', { name: 'It was cold' }).click()
    await page.getByText('Noted: it was cold today.').waitFor()
    await page.goto(`${MY}/history`)
    await page.getByText('It was cold').first().waitFor()
    await page.goto(MY)
    await page.getByText(/^Mails: /).click()
    await page.getByLabel('How often').selectOption({ label: 'once a week' })
    await page.getByRole('button', { name: 'Save', exact: true }).click()
    await page.getByText('Saved. Mails come: once a week.').waitFor()
    await page.goto(`${MY}/kept`)
    await page.getByText('Delete what I entered for 5C').click()
    await page.getByRole('button', { name: 'Delete them for good' }).click()
    await page.getByText('Deleted. Below is what is left.').waitFor()
    await page.getByText('0 weeks of showers').waitFor()
    await page.goto(MY)
    await page.getByRole('link', { name: 'Set my showers' }).waitFor()
    await context.close()
  })
})

describe('what is kept', () => {
  it('is handed out as a file of one’s own', async () => {
    const { page, context } = await phone(TENANT.email)
    await page.goto(`${MY}/kept`)
    const [download] = await Promise.all([page.waitForEvent('download'), page.getByRole('link', { name: 'Download all of it' }).click()])
    expect(download.suggestedFilename()).toBe('what-is-kept.json')
    await context.close()
  })
})

describe.each([
  ['a landlord', LANDLORD.email],
  ['an electrician', ELECTRICIAN.email],
  ['an owner', OWNER.email],
])('%s', (_role, email) => {
  it('is shown no tenant’s page and no tenant’s file', async () => {
    const { page, context } = await phone(email)
    for (const path of [...PAGES, `/api${MY}/kept`]) expect([path, (await page.goto(path))?.status()]).toEqual([path, 403])
    await context.close()
  })
})

describe('a stranger', () => {
  it('is sent to the sign-in, and a tenant with a neighbour’s id to nothing', async () => {
    const stranger = await visitor(browser, product.baseUrl, 390)
    for (const path of PAGES) {
      await stranger.page.goto(path)
      expect(new URL(stranger.page.url()).pathname).toBe('/sign-in')
    }
    const { page, context } = await phone(TENANT.email)
    const other = '00000000-0000-4000-8000-000000000000'
    for (const path of PAGES.filter((one) => !one.endsWith('/kept'))) {
      expect([path, (await page.goto(`${path}?tenancy=${other}`))?.status()]).toEqual([path, 404])
    }
    await Promise.all([context.close(), stranger.context.close()])
  })
})

describe('the weight of a page', () => {
  it('is at most 10 kB of script, gzipped, and 90 kB where an island answers', async () => {
    const { page, context } = await phone(TENANT.email)
    for (const path of PAGES) expect([path, await scriptKb(page, path)]).toEqual([path, expect.any(Number)])
    for (const path of PAGES) expect(await scriptKb(page, path)).toBeLessThanOrEqual(path.endsWith('/showers') ? 90 : 10)
    await context.close()
  })
})

async function scriptKb(page: Page, path: string): Promise<number> {
  const scripts: Buffer[] = []
  const bodies: Promise<void>[] = []
  const take = (response: import('playwright-core').Response) => {
    if (response.request().resourceType() !== 'script') return
    bodies.push(response.body().then((body) => void scripts.push(body)))
  }
  page.on('response', take)
  await page.goto(path)
  await page.waitForLoadState('networkidle')
  await Promise.all(bodies)
  page.off('response', take)
  const kb = scripts.reduce((sum, body) => sum + gzipSync(body).length, 0) / 1_024
  return kb
}
