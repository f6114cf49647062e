/** Writes from another site are refused under every address; a signed link's own one-click POST is not. */
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { type RunningProduct, startProduct } from './support/server.ts'

let product: RunningProduct
beforeAll(async () => {
  product = await startProduct()
})
afterAll(() => product.stop())

const post = (path: string, headers: Record<string, string>) =>
  fetch(`${product.baseUrl}${path}`, {
    method: 'POST',
    redirect: 'manual',
    headers: { 'content-type': 'application/x-www-form-urlencoded', ...headers },
    body: 'List-Unsubscribe=One-Click',
  })
const EVIL = { origin: 'https://evil.example', 'sec-fetch-site': 'cross-site' }

describe('a POST from another site', () => {
  it.each(['/sign-in?_action=account.signIn', '/t/anything?_action=account.signIn', '/sign-out'])(
    'is refused at %s and sets no cookie',
    async (path) => {
      const answer = await post(path, EVIL)
      expect(answer.status).toBe(403)
      expect(answer.headers.get('set-cookie')).toBeNull()
    },
  )
  it('reaches a signed link, which proves itself', async () => {
    expect((await post('/t/not-a-real-link', EVIL)).status).toBe(410)
    expect((await post('/t/not-a-real-link', {})).status).toBe(410)
  })
})
