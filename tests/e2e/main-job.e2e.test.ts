/** The main job, end to end, in a real browser against the production build, with mail over real SMTP. */
import { fileURLToPath } from 'node:url'
import type { Browser } from 'playwright-core'
import type { Email } from 'postal-mime'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { openBrowser, signIn, visitor, type Visitor } from './support/browser.ts'
import { type RunningProduct, startProduct } from './support/server.ts'

/** Figures of the published record of Schedule E-19 (OpenEI URDB 5cef0a415457a33576f60fe2). */
const RATE = fileURLToPath(new URL('../fixtures/tariff/pge-e19-2019.urdb.json', import.meta.url))
const ROSTER = fileURLToPath(new URL('../fixtures/roster/three-units.csv', import.meta.url))
const PASSWORD = 'a kettle of old copper'
const HOUSE = '/o/harrow-lane/p/mill-house'

let product: RunningProduct
let browser: Browser
let landlord: Visitor
let tenant: Visitor
let electrician: Visitor
beforeAll(async () => {
  product = await startProduct()
  browser = await openBrowser()
  landlord = await visitor(browser, product.baseUrl)
  tenant = await visitor(browser, product.baseUrl, 390)
  electrician = await visitor(browser, product.baseUrl, 390)
})
afterAll(async () => {
  await browser.close()
  await product.stop()
})

/** Sends what waits and answers the newest mail to an address. */
async function mailTo(address: string): Promise<Email> {
  await product.runJob('mail')
  const mail = (await product.smtp.parsed()).findLast((one) => one.to?.some((to) => to.address === address))
  if (!mail) throw new Error(`nothing came for ${address}`)
  return mail
}
const linkIn = (mail: Email, path: string): string => new RegExp(`https?://\\S+/${path}/\\S+`).exec(mail.text ?? '')?.[0] ?? ''

async function acceptInvitation({ page }: Visitor, address: string): Promise<void> {
  await page.goto(linkIn(await mailTo(address), 'invitation'))
  await page.getByLabel('Choose a password').fill(PASSWORD)
  await page.getByRole('button', { name: 'Accept' }).click()
  await page.waitForURL(/\/o\/harrow-lane\//)
}

async function invite(role: string, name: string, email: string): Promise<void> {
  const { page } = landlord
  await page.goto('/o/harrow-lane/people')
  await page.getByLabel('Name').fill(name)
  await page.getByLabel('E-mail').fill(email)
  await page.getByLabel('Role').selectOption({ label: role })
  await page.getByLabel('Property').selectOption({ label: 'Mill House' })
  await page.getByRole('button', { name: 'Send the invitation' }).click()
}

describe('the main job', () => {
  it('signs a landlord up, confirms the address by mail and founds the organisation', async () => {
    const { page } = landlord
    await page.goto('/sign-up')
    await page.getByLabel('Your name').fill('Petra Millward')
    await page.getByLabel('E-mail').fill('petra@people.example')
    await page.getByLabel('Password').fill(PASSWORD)
    await page.getByRole('button', { name: 'Sign up' }).click()
    await page.getByRole('heading', { name: 'Look at your post.' }).waitFor()
    await page.goto(linkIn(await mailTo('petra@people.example'), 'confirm'))
    await page.getByRole('button', { name: 'Yes, this is my address' }).click()
    await page.getByRole('heading', { name: 'Your address is confirmed.' }).waitFor()
    await signIn(page, 'petra@people.example', PASSWORD)
    await page.getByLabel('Name of the business').fill('Harrow Lane Homes')
    await page.getByLabel('Its address here').fill('harrow-lane')
    await page.getByRole('button', { name: 'Create it' }).click()
    await page.waitForURL('**/o/harrow-lane/')
    await page.getByRole('heading', { name: 'Begin with your first building.' }).waitFor()
  })

  it('makes a property, imports a published rate and a roster with every kind of timer', async () => {
    const { page } = landlord
    await page.goto('/o/harrow-lane/p/new')
    await page.getByLabel('Name of the building').fill('Mill House')
    await page.getByLabel('Its address here').fill('mill-house')
    await page.getByLabel('Time zone').selectOption('America/Los_Angeles')
    await page.getByLabel('Country').selectOption('US')
    await page.getByLabel('Rule profile').selectOption('us-nec-2023')
    await page.getByLabel('Voltage at the heaters').fill('240')
    await page.getByLabel('Service rating').fill('200')
    await page.getByRole('button', { name: 'Create the property' }).click()
    await page.waitForURL(`**${HOUSE}/units/import`)

    await page.goto(`${HOUSE}/tariff`)
    await page.getByLabel('URDB JSON file').setInputFiles(RATE)
    await page.getByRole('button', { name: 'Import' }).click()
    await page.getByRole('heading', { name: 'Pacific Gas & Electric Co' }).waitFor()

    await page.goto(`${HOUSE}/units/import`)
    await page.getByLabel('CSV file').setInputFiles(ROSTER)
    await page.getByRole('button', { name: 'Look at it first' }).click()
    await page.getByRole('heading', { name: '3 rows can be written.' }).waitFor()
    await page.getByLabel('Invite the new tenants by e-mail').check()
    await page.getByRole('button', { name: 'Write 3 rows' }).click()
    await page.getByRole('heading', { name: '3 units added' }).waitFor()
  })

  it('lets the tenant set their showers and evaluates every unit at night, with a flag that says by how much', async () => {
    await acceptInvitation(tenant, 'bea@tenants.example')
    await tenant.page.goto('/o/harrow-lane/my/showers')
    await tenant.page.locator('[name=weekdays-time]').fill('06:45')
    await tenant.page.locator('[name=weekdays-count]').fill('2')
    await tenant.page.locator('[name=weekend-time]').fill('08:30')
    await tenant.page.locator('[name=weekend-count]').fill('2')
    await tenant.page
      .getByText(/min too short/)
      .first()
      .waitFor()
    await tenant.page.getByRole('button', { name: 'Save my showers' }).click()
    await tenant.page.waitForURL('**/o/harrow-lane/my')

    const counts = await product.runJob('evaluate', '--again')
    expect(counts.failed).toBe(0)
    const { page } = landlord
    await page.goto(`${HOUSE}/units/B2`)
    await page.getByRole('heading', { name: /B2: \d+ min short tomorrow/ }).waitFor()
    await page.getByText('Runs too short').first().waitFor()
    await page.getByText('Why?').first().click()
    await page
      .getByText('208 V', { exact: false })
      .or(page.getByText('240 V', { exact: false }))
      .first()
      .waitFor()
  })

  it('shows the expected runs over the tariff peaks in the calendar', async () => {
    const { page } = landlord
    await page.goto(`${HOUSE}/calendar`)
    await page.getByRole('region', { name: 'Calendar of runs' }).waitFor()
    await page.getByText('B2', { exact: false }).first().waitFor()
    expect(await page.locator('.rbc-event').count()).toBeGreaterThanOrEqual(3)
    await page.getByText('Los Angeles', { exact: false }).first().waitFor()
  })

  it('mails the tenant by when to press, once', async () => {
    // As of a day ago, so that the day it speaks of has begun: before that there is nothing to answer.
    const dayAgoMs = Date.now() - 86_400_000
    for (const atMs of [dayAgoMs, dayAgoMs + 1_000]) await product.runJob('tips', '--again', '--at', new Date(atMs).toISOString())
    // Sent as of then too: a tip of a day that has begun is no longer delivered.
    await product.runJob('mail', '--at', new Date(dayAgoMs + 2_000).toISOString())
    const mail = await mailTo('bea@tenants.example')
    expect(mail.subject).toMatch(/Press the timer by \d\d:\d\d tomorrow/)
    expect(mail.text).toMatch(/\d\d:\d\d/)
    expect(mail.headers.find((header) => header.key === 'list-unsubscribe-post')?.value).toBe('List-Unsubscribe=One-Click')
    const tips = (await product.smtp.parsed()).filter(
      (one) => one.to?.[0]?.address === 'bea@tenants.example' && /timer|press/i.test(one.subject ?? ''),
    )
    expect(tips).toHaveLength(1)
    await tenant.page.goto(linkIn(mail, 't'))
    await tenant.page.getByRole('button', { name: 'Yes, it was hot' }).click()
    await tenant.page.getByRole('heading', { name: /Thank you/ }).waitFor()
  })

  it('sends the electrician, whose change closes the flag by itself', async () => {
    await invite('Electrician', 'Vic Ohmsted', 'vic@people.example')
    await acceptInvitation(electrician, 'vic@people.example')
    const { page } = landlord
    await page.goto(`${HOUSE}/flags?kind=misses-recovery`)
    await page.getByText('Send an electrician').first().click()
    await page.getByRole('button', { name: 'Send this visit' }).first().click()
    await page.getByText('The visit is planned').waitFor()

    const mail = await mailTo('vic@people.example')
    expect(mail.text).toContain('Isolate and lock off')
    await electrician.page.goto(linkIn(mail, 'o/harrow-lane/visits'))
    await electrician.page.getByLabel('Set to').fill('150')
    await electrician.page.getByLabel('What was done and why').fill('Dial set to 150 min')
    await electrician.page.getByRole('button', { name: 'Sign off' }).click()
    await electrician.page.waitForURL('**/visits?done')
    await page.goto(`${HOUSE}/flags?kind=misses-recovery`)
    await page
      .getByText('Set to 150', { exact: false })
      .or(page.getByText('No open flag', { exact: false }))
      .or(page.getByText('Closed'))
      .first()
      .waitFor()
    await page.goto(`${HOUSE}/units/B2`)
    await page.getByRole('heading', { name: 'B2: warm on time tomorrow.' }).waitFor()
    expect(await page.getByText('Runs too short').count()).toBe(0)
    expect((await mailTo('petra@people.example')).subject).toContain('what was done at B2')
  })

  it('mails the owner the month’s digest, once', async () => {
    await invite('Owner', 'Lene Solway', 'lene@people.example')
    const owner = await visitor(browser, product.baseUrl)
    await acceptInvitation(owner, 'lene@people.example')
    const after = new Date()
    after.setUTCMonth(after.getUTCMonth() + 1, 2)
    await product.runJob('digest', '--at', after.toISOString())
    await product.runJob('digest', '--at', after.toISOString(), '--again')
    const digests = async () =>
      (await product.smtp.parsed()).filter(
        (one) => one.to?.[0]?.address === 'lene@people.example' && one.subject?.includes('of Mill House:'),
      )
    await product.runJob('mail', '--at', after.toISOString())
    await product.runJob('mail', '--at', after.toISOString())
    expect(await digests()).toHaveLength(1)
    const [mail] = await digests()
    expect(mail?.text).toContain('Always on, same showers')
    expect(mail?.text).not.toContain('bea@tenants.example')
    await owner.page.goto('/o/harrow-lane/digests')
    await owner.page.getByRole('link', { name: /Mill House,/ }).click()
    await owner.page.getByRole('img', { name: /Energy by day/ }).waitFor()
  })

  it('keeps strangers out: 404 for another organisation’s pages, 403 beyond one’s role', async () => {
    const stranger = await visitor(browser, product.baseUrl)
    expect((await tenant.page.goto(`${HOUSE}/units`))?.status()).toBe(403)
    expect((await tenant.page.goto('/o/nobody-here/people'))?.status()).toBe(404)
    expect((await electrician.page.goto('/o/harrow-lane/people'))?.status()).toBe(403)
    await stranger.page.goto(`${HOUSE}/units`)
    expect(stranger.page.url()).toContain('/sign-in?next=')
    expect((await stranger.context.request.get(`/api/o/harrow-lane/p/mill-house/units`)).status()).toBe(401)
    const answer = await tenant.context.request.get(`/api/o/harrow-lane/p/mill-house/units`)
    expect(answer.status()).toBe(403)
    expect(answer.headers()['content-type']).toContain('application/problem+json')
  })

  it('throws and logs nothing in the pages of the main job', () => {
    const expected = /status of (403|404)/
    for (const one of [landlord, tenant, electrician]) expect(one.problems.filter((problem) => !expected.test(problem))).toEqual([])
  })
})
