/** Debian's Chromium, driven by Playwright; it calls home for nothing. */
import { type Browser, type BrowserContext, chromium, type Page } from 'playwright-core'

const ARGUMENTS = ['--no-sandbox', '--disable-quic', '--disable-background-networking', '--disable-component-update', '--disable-sync']

export const openBrowser = (): Promise<Browser> => chromium.launch({ executablePath: '/usr/bin/chromium', args: ARGUMENTS })

export interface Visitor {
  readonly context: BrowserContext
  readonly page: Page
  /** Errors that the pages threw or logged; a test ends by expecting none. */
  readonly problems: readonly string[]
}

/** A person with a browser of their own: cookies and storage are not shared with another visitor. */
export async function visitor(browser: Browser, baseUrl: string, widthPx = 1440): Promise<Visitor> {
  const context = await browser.newContext({ baseURL: baseUrl, viewport: { width: widthPx, height: 900 } })
  const page = await context.newPage()
  const problems: string[] = []
  page.on('pageerror', (error) => problems.push(error.message))
  page.on('console', (message) => {
    if (message.type() === 'error') problems.push(message.text())
  })
  return { context, page, problems }
}

export async function signIn(page: Page, email: string, password: string): Promise<void> {
  await page.goto('/sign-in')
  await page.getByLabel('E-mail').fill(email)
  await page.getByLabel('Password').fill(password)
  await Promise.all([page.waitForURL((url) => !url.pathname.startsWith('/sign-in')), page.getByRole('button', { name: 'Sign in' }).click()])
}
