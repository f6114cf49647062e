/** The planner in a browser: asked, compared, moved with the keyboard and the mouse, pinned, accepted and undone; by two people at once; clean for axe. */
import { gzipSync } from 'node:zlib'
import { AxeBuilder } from '@axe-core/playwright'
import type { Browser, Page } from 'playwright-core'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { DEMO_PASSWORD, LANDLORD } from '#lib/demo/people.ts'
import { openBrowser, signIn, visitor } from './support/browser.ts'
import { type RunningProduct, startProduct } from './support/server.ts'

const HOUSE = '/o/brindlecross/p/cinder-wharf'
const PLAN = `${HOUSE}/plan/`
/** What the page may load before anything is asked, its framework included. */
const SCRIPT_BUDGET_BYTES = 90_000
/** What asking may load on top: the planner and the tank model, in the worker. */
const WORKER_BUDGET_BYTES = 40_000
const PATIENCE_MS = 60_000

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
  one.page.on('dialog', (dialog) => void dialog.accept())
  await signIn(one.page, LANDLORD.email, DEMO_PASSWORD)
  return one
}
async function openPage(page: Page): Promise<void> {
  await page.goto(PLAN)
  await page.locator('astro-island:not([ssr]) form').first().waitFor()
}
/** Asks and waits until the planner has looked for the better plan as well. */
async function askFor(page: Page, days?: string): Promise<void> {
  await openPage(page)
  if (days) await page.getByLabel('Plan the starts of').selectOption({ label: days })
  await page.getByRole('button', { name: 'Ask for a plan' }).click()
  await page.getByRole('region', { name: 'Comparison' }).waitFor({ timeout: PATIENCE_MS })
  await page.getByRole('progressbar').waitFor({ state: 'detached', timeout: PATIENCE_MS })
}
const said = (page: Page) => page.locator('astro-island [role=status][aria-live]').innerText()
const bars = (page: Page) => page.getByRole('slider')
const row = (page: Page, name: RegExp) => page.getByRole('row', { name }).innerText()

function halfAnHourAfter(clock: RegExpExecArray | null): string {
  const minute = Number(clock?.[1]) * 60 + Number(clock?.[2]) + 30
  return `${String(Math.floor(minute / 60)).padStart(2, '0')}:${String(minute % 60).padStart(2, '0')}`
}

describe('the planner', () => {
  it('is asked, compared, moved with the keyboard alone, pinned, accepted and undone', async () => {
    const { page, problems, context } = await landlord()
    await page.goto(`${HOUSE}/calendar`)
    await page.getByRole('link', { name: /Plan the starts/ }).click()
    await page.locator('astro-island:not([ssr]) form').first().waitFor()
    await page.getByRole('button', { name: 'Ask for a plan' }).focus()
    await page.keyboard.press('Enter')
    await page.getByRole('progressbar').waitFor({ state: 'detached', timeout: PATIENCE_MS })
    await page.getByRole('region', { name: 'Comparison' }).waitFor()
    expect(await row(page, /^Cost in all/)).toMatch(/\$\d+\.\d\d\s+\$\d+\.\d\d/)
    expect(await row(page, /^From the best possible/)).toMatch(/\d+(\.\d)? %, \$\d+\.\d\d/)
    expect(await row(page, /^Highest load/)).toMatch(/kW at \d\d:\d\d/)
    expect(await row(page, /^Units warm on time/)).toMatch(/\d+ of \d+/)

    const bar = bars(page).first()
    const before = await bar.getAttribute('aria-valuenow')
    await bar.focus()
    await page.keyboard.press('ArrowRight')
    await expect.poll(() => said(page)).toMatch(/^\w+ at \d\d:\d\d( the evening before)?, (as it stands|\d+ .*(earlier|later))\./)
    expect(Number(await bar.getAttribute('aria-valuenow'))).toBe(Number(before) + 1)
    expect(await page.getByRole('columnheader', { name: 'Yours' }).count()).toBe(1)
    await page.keyboard.press('Enter')
    const typed = page.getByLabel('Start at')
    await typed.fill(halfAnHourAfter(/start by (\d\d):(\d\d)/.exec((await bar.getAttribute('aria-valuetext')) ?? '')))
    await typed.press('Enter')
    await expect.poll(() => page.getByText(/would serve \d+ of \d+ minutes warm: \w+ would be cold/).count()).toBe(1)
    expect(await page.getByRole('button', { name: 'Accept this plan' }).isDisabled()).toBe(true)
    await page.getByRole('button', { name: 'Take the last move back' }).click()
    await expect.poll(() => page.getByRole('button', { name: 'Accept this plan' }).isDisabled()).toBe(false)
    await page.getByRole('button', { name: 'Pin it here' }).click()
    const pinnedAt = await bar.getAttribute('aria-valuetext')
    await page.getByRole('button', { name: 'Plan again around the pins' }).click()
    await page.getByRole('progressbar').waitFor({ state: 'detached', timeout: PATIENCE_MS })
    expect(await bar.getAttribute('aria-valuetext')).toBe(pinnedAt)

    await page.getByRole('button', { name: 'Accept this plan' }).click()
    await page.waitForURL(/accepted=1/, { timeout: PATIENCE_MS })
    expect(await page.locator('main').innerText()).toMatch(
      /Plan 1 is accepted\. (One tenant is|\d+ tenants are) told by letter when to press/,
    )
    await page.getByRole('button', { name: /Undo/ }).click()
    await page.waitForURL(/undone=1/, { timeout: PATIENCE_MS })
    expect(await page.locator('main').innerText()).toMatch(/Plan 1 is undone: the starts before it stand again/)
    expect(problems).toEqual([])
    await context.close()
  })
  it('follows a bar that is dragged, with its effect said while it moves, and lets it go', async () => {
    const { page, problems, context } = await landlord()
    await askFor(page)
    const bar = bars(page).first()
    await bar.scrollIntoViewIfNeeded()
    const box = await bar.boundingBox()
    if (!box) throw new Error('There is no bar.')
    const before = Number(await bar.getAttribute('aria-valuenow'))
    await page.mouse.move(box.x + 12, box.y + box.height / 2)
    await page.mouse.down()
    await page.mouse.move(box.x - 90, box.y + box.height / 2, { steps: 6 })
    await expect.poll(() => said(page)).toMatch(/ at \d\d:\d\d/)
    expect(Number(await bar.getAttribute('aria-valuenow'))).toBeLessThan(before)
    expect(await page.getByRole('columnheader', { name: 'Yours' }).count()).toBe(0)
    await page.mouse.up()
    await page.getByRole('columnheader', { name: 'Yours' }).waitFor()
    expect(problems).toEqual([])
    await context.close()
  })
  it('tells the second of two landlords what the first accepted, and keeps their draft', async () => {
    const [first, second] = [await landlord(), await landlord()]
    for (const { page } of [first, second]) await askFor(page)
    const mine = bars(second.page).nth(1)
    await mine.focus()
    await second.page.keyboard.press('ArrowRight')
    await first.page.getByRole('button', { name: 'Accept this plan' }).click()
    await first.page.waitForURL(/accepted=/, { timeout: PATIENCE_MS })
    const [name, text] = [(await mine.getAttribute('aria-label')) ?? '', await mine.getAttribute('aria-valuetext')]
    await second.page.getByRole('button', { name: 'Accept this plan' }).click()
    const alert = second.page.getByRole('alert')
    await alert.waitFor({ timeout: PATIENCE_MS })
    expect(await alert.innerText()).toMatch(/Something changed.*accepted plan \d+ on/s)
    await second.page.getByRole('progressbar').waitFor({ state: 'detached', timeout: PATIENCE_MS })
    const at = (words: string | null) => /^\d\d:\d\d/.exec(words ?? '')?.[0]
    expect(at(await second.page.getByRole('slider', { name, exact: true }).getAttribute('aria-valuetext'))).toBe(at(text))
    const again = second.page.getByRole('button', { name: 'Accept mine as well' })
    await again.click()
    await second.page.waitForURL(/accepted=/, { timeout: PATIENCE_MS })
    for (const { context } of [first, second]) await context.close()
  })
  it('says without script what still works, and undoes a plan so', async () => {
    const context = await browser.newContext({ baseURL: product.baseUrl, javaScriptEnabled: false })
    const page = await context.newPage()
    await page.goto('/sign-in')
    await page.getByLabel('E-mail').fill(LANDLORD.email)
    await page.getByLabel('Password').fill(DEMO_PASSWORD)
    await page.getByRole('button', { name: 'Sign in' }).click()
    await page.goto(PLAN)
    expect(await page.locator('noscript').innerText()).toMatch(/Planning needs JavaScript/)
    await page.getByRole('button', { name: /Undo/ }).click()
    expect(await page.locator('main').innerText()).toMatch(/is undone: the starts before it stand again/)
    await page.goto(`${HOUSE}/plan/restart?at=06:00&limit=40`)
    expect(await page.locator('h1').innerText()).toMatch(/Power back at 06:00: the last of \d+ units is hot at/)
    await context.close()
  })
  it.each([
    [1440, 'light'],
    [1440, 'dark'],
    [390, 'light'],
    [390, 'dark'],
  ] as const)('is clean for axe and never scrolls sideways at %d px, %s, with a plan on the table', async (widthPx, scheme) => {
    const { page, context } = await landlord(widthPx)
    await page.emulateMedia({ colorScheme: scheme })
    await askFor(page)
    await bars(page).first().focus()
    await page.keyboard.press('Enter')
    await page.keyboard.press('End')
    await page.keyboard.press('PageUp')
    await page.getByText('Who, and by how much').click()
    await page.getByText(/would be cold/).waitFor({ timeout: PATIENCE_MS })
    const { violations } = await new AxeBuilder({ page }).withTags(['wcag2a', 'wcag2aa', 'wcag21aa', 'wcag22aa']).analyze()
    expect(violations.map((one) => `${one.id} at ${one.nodes[0]?.target.join(' ') ?? ''}`)).toEqual([])
    expect(await page.evaluate('document.documentElement.scrollWidth - document.documentElement.clientWidth')).toBeLessThanOrEqual(0)
    const shots = process.env.PLAN_SHOTS
    if (shots) await page.screenshot({ path: `${shots}/${widthPx}-${scheme}.png`, fullPage: true })
    await context.close()
  })
  it('loads no more script than its budget, and the planner only when it is asked', async () => {
    const { page, context } = await landlord()
    const bodies: Promise<Buffer>[] = []
    page.on('response', (response) => {
      if (/\.js($|\?)/.test(response.url())) bodies.push(response.body())
    })
    const bytes = async () => (await Promise.all(bodies)).reduce((sum, body) => sum + gzipSync(body).length, 0)
    await openPage(page)
    await page.waitForLoadState('networkidle')
    const opened = await bytes()
    // React alone is more than this: a page that loads nothing must not pass.
    expect(opened).toBeGreaterThan(50_000)
    expect(opened).toBeLessThanOrEqual(SCRIPT_BUDGET_BYTES)
    await page.getByRole('button', { name: 'Ask for a plan' }).click()
    await page.getByRole('region', { name: 'Comparison' }).waitFor({ timeout: PATIENCE_MS })
    const asked = await bytes()
    expect(asked).toBeGreaterThan(opened)
    expect(asked - opened).toBeLessThanOrEqual(WORKER_BUDGET_BYTES)
    await context.close()
  })
})
