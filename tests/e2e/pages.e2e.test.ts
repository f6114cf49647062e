/** Every page of the demo, as each role, light and dark: axe (WCAG 2.2 A and AA) finds nothing and 390 px never scroll sideways. */
import { AxeBuilder } from '@axe-core/playwright'
import type { Browser } from 'playwright-core'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { DEMO_PASSWORD, ELECTRICIAN, LANDLORD, OWNER, TENANT } from '#lib/demo/people.ts'
import { openBrowser, signIn } from './support/browser.ts'
import { type RunningProduct, startProduct } from './support/server.ts'

const HOME = '/o/brindlecross'
const HOUSE = `${HOME}/p/cinder-wharf`
const PAGES = [
  { email: null, paths: ['/', '/sign-in', '/sign-up', '/reset', '/offline', '/no-such-page'] },
  {
    email: LANDLORD.email,
    paths: [
      `${HOME}/`,
      `${HOUSE}/`,
      `${HOUSE}/calendar`,
      `${HOUSE}/plan/`,
      `${HOUSE}/plan/restart`,
      `${HOUSE}/units`,
      `${HOUSE}/units/5C`,
      `${HOUSE}/clock-change`,
      `${HOUSE}/units/4B/hardware`,
      `${HOUSE}/units/import`,
      `${HOUSE}/clock-change?outage=200`,
      `${HOUSE}/flags`,
      `${HOUSE}/tariff`,
      `${HOUSE}/tariff/edit`,
      `${HOUSE}/settings`,
      `${HOME}/people`,
      `${HOME}/post`,
      `${HOME}/jobs`,
      `${HOME}/digests`,
      `${HOME}/p/new`,
      '/account',
    ],
  },
  {
    email: TENANT.email,
    paths: ['', '/showers', '/showers?mode=days', '/week', '/calendar', '/wall', '/wall?size=a5', '/history', '/kept'].map(
      (page) => `${HOME}/my${page}`,
    ),
  },
  { email: ELECTRICIAN.email, paths: [`${HOME}/visits`] },
  { email: OWNER.email, paths: [`${HOME}/digests`] },
] as const
const LOOKS = [
  { widthPx: 1440, scheme: 'light' },
  { widthPx: 390, scheme: 'dark' },
] as const

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

describe.each(LOOKS)('pages at $widthPx px, $scheme', ({ widthPx, scheme }) => {
  it.each(PAGES)('are clean for $email', async ({ email, paths }) => {
    const context = await browser.newContext({
      baseURL: product.baseUrl,
      viewport: { width: widthPx, height: 900 },
      colorScheme: scheme,
      timezoneId: 'Asia/Kolkata',
    })
    const page = await context.newPage()
    if (email) await signIn(page, email, DEMO_PASSWORD)
    const found: string[] = []
    for (const path of paths) {
      await page.goto(path)
      await page.waitForLoadState('networkidle')
      const { violations } = await new AxeBuilder({ page }).withTags(['wcag2a', 'wcag2aa', 'wcag21aa', 'wcag22aa']).analyze()
      found.push(...violations.map((one) => `${path}: ${one.id} at ${one.nodes[0]?.target.join(' ') ?? ''}`))
      const beyondPx = await page.evaluate('document.documentElement.scrollWidth - document.documentElement.clientWidth')
      if (Number(beyondPx) > 0) found.push(`${path}: ${String(beyondPx)} px too wide`)
    }
    await context.close()
    expect(found).toEqual([])
  })
})
