/** The middleware by its rules: who gets in where, and what an address answers to everybody else. */
import type { APIContext } from 'astro'
import type { Kysely } from 'kysely'
import { beforeEach, describe, expect, it, vi } from 'vitest'
import type { PersonId } from '#db/ids.ts'
import type { Database } from '#db/schema.ts'
import { lucia } from '#lib/auth/lucia.server.ts'
import { forbidden } from '#lib/http/app-error.ts'
import { onRequest } from '../src/middleware.ts'
import { freshDatabase } from './support/database.ts'
import { makeOrganisation, makePerson, scopeFor } from './support/factories.ts'

const held = vi.hoisted(() => ({ db: null as unknown }))
vi.mock('#lib/database.server.ts', () => ({ database: () => held.db }))

const BASE = 'http://localhost:4321'
let db: Kysely<Database>
let member: PersonId
beforeEach(async () => {
  db = await freshDatabase()
  held.db = db
  member = await makePerson(db)
  const ours = await makeOrganisation(db, 'ours')
  await scopeFor(db, { organisationId: ours.id, personId: member, roles: ['owner', 'electrician'] })
  await makeOrganisation(db, 'theirs')
})

interface Visit {
  readonly path: string
  readonly as?: PersonId
  /** A cookie's session id in place of a fresh session. */
  readonly cookie?: string
  readonly init?: RequestInit
  readonly page?: (locals: App.Locals) => Response
}

/** One request through the middleware; `rendered` is the error page that was shown in place of the one asked for. */
async function visit({ path, as, cookie, init, page = () => new Response('page', { headers: { 'content-type': 'text/html' } }) }: Visit) {
  const locals = {} as App.Locals
  const sessionId = as ? (await lucia().createSession(as, {})).id : cookie
  const set: string[] = []
  let rendered: { path: string; method: string } | null = null
  let reached = false
  const url = new URL(path, BASE)
  const context = {
    locals,
    url,
    request: new Request(url, init),
    cookies: { get: () => (sessionId ? { value: sessionId } : undefined), set: (_name: string, value: string) => set.push(value) },
    redirect: (to: string, status = 302) => new Response(null, { status, headers: { location: to } }),
    rewrite: (request: Request) => {
      rendered = { path: new URL(request.url).pathname, method: request.method }
      return Promise.resolve(new Response('error page', { headers: { 'content-type': 'text/html' } }))
    },
  } as unknown as APIContext
  const response = (await onRequest(context, () => {
    reached = true
    return Promise.resolve(page(locals))
  })) as Response
  return { response, locals, rendered: rendered as { path: string; method: string } | null, reached, set }
}
const problem = async (response: Response) => ({ status: response.status, type: response.headers.get('content-type') })
const PROBLEM_JSON = 'application/problem+json'

describe('onRequest', () => {
  it('opens the organisation of the address with the person’s roles there', async () => {
    const { locals, reached } = await visit({ path: '/o/ours/people', as: member })
    expect(reached).toBe(true)
    expect(locals.organisation).toMatchObject({ slug: 'ours', roles: ['electrician', 'owner'] })
    expect(locals.db?.scope.actor).toMatchObject({ kind: 'person', personId: member })
  })
  it('opens no organisation outside /o/', async () => {
    const { locals } = await visit({ path: '/organisations?slug=ours', as: member })
    expect([locals.organisation, locals.db]).toEqual([null, null])
    expect(locals.user?.id).toBe(member)
  })
  it('sends whoever is not signed in to the sign-in and back', async () => {
    const { response, reached } = await visit({ path: '/o/ours/people?tab=1' })
    expect(reached).toBe(false)
    expect(response.headers.get('location')).toBe('/sign-in?next=%2Fo%2Fours%2Fpeople%3Ftab%3D1')
  })
  it('answers 401 under /api to whoever is not signed in', async () => {
    const { response, reached } = await visit({ path: '/api/o/ours/units' })
    expect(reached).toBe(false)
    expect(await problem(response)).toEqual({ status: 401, type: PROBLEM_JSON })
  })
  it('answers the same 404 for an organisation that is not theirs and for one that is not there', async () => {
    const bodies = []
    for (const slug of ['theirs', 'nowhere']) {
      const page = await visit({ path: `/o/${slug}/people`, as: member })
      expect([page.rendered?.path, page.reached]).toEqual(['/404', false])
      const api = await visit({ path: `/api/o/${slug}/units`, as: member })
      expect(await problem(api.response)).toEqual({ status: 404, type: PROBLEM_JSON })
      bodies.push((await api.response.text()).replaceAll(slug, 'X'))
    }
    expect(bodies[0]).toBe(bodies[1])
  })
  it('answers 403 for a role’s limit inside their own organisation', async () => {
    const refusing = () => {
      throw forbidden('invite people')
    }
    const page = await visit({ path: '/o/ours/people', as: member, page: refusing })
    expect(page.rendered?.path).toBe('/403')
    expect(page.locals.refusal).toContain('invite people')
    const api = await visit({ path: '/api/o/ours/people', as: member, page: refusing })
    expect(await problem(api.response)).toEqual({ status: 403, type: PROBLEM_JSON })
  })
  it('shows no inside of an unknown error, only its id in the log', async () => {
    const failing = () => {
      throw new Error('SQLITE_BUSY at line 7')
    }
    const page = await visit({ path: '/o/ours/people', as: member, page: failing })
    expect(page.rendered?.path).toBe('/500')
    expect(page.locals.errorId).toMatch(/^[0-9a-f-]{36}$/)
    const api = await visit({ path: '/api/o/ours/units', as: member, page: failing })
    expect(api.response.status).toBe(500)
    const body = await api.response.text()
    expect(body).not.toContain('SQLITE')
    expect(body).toMatch(/"errorId":"[0-9a-f-]{36}"/)
  })
  it('refuses a form of another site before anything runs, and shows why by a fresh GET', async () => {
    const init = { method: 'POST', headers: { 'sec-fetch-site': 'cross-site' }, body: 'a=b' }
    const page = await visit({ path: '/o/ours/people?_action=people.invite', as: member, init })
    expect([page.rendered, page.reached]).toEqual([{ path: '/403', method: 'GET' }, false])
    const api = await visit({ path: '/api/o/ours/units', as: member, init })
    expect(await problem(api.response)).toEqual({ status: 403, type: PROBLEM_JSON })
  })
  it('lets a mail program post to a signed link, which carries its own proof (RFC 8058)', async () => {
    const init = { method: 'POST', headers: { origin: 'https://mail.example' }, body: 'List-Unsubscribe=One-Click' }
    expect((await visit({ path: '/t/token', init })).reached).toBe(true)
  })
  it('treats a session that has ended, expired or never was like none, and clears its cookie', async () => {
    const [ended, expired] = [await lucia().createSession(member, {}), await lucia().createSession(member, {})]
    await lucia().invalidateSession(ended.id)
    await db.updateTable('session').set({ expires_at_ms: 1 }).execute()
    for (const cookie of [ended.id, expired.id, 'never-was']) {
      const { locals, set } = await visit({ path: '/', cookie })
      expect(locals.user).toBeNull()
      expect(set).toEqual([''])
    }
  })
  it('answers an address of /api that is not there as a problem document', async () => {
    const { response } = await visit({ path: '/api/nonsense', page: () => new Response(null, { status: 404 }) })
    expect(await problem(response)).toEqual({ status: 404, type: PROBLEM_JSON })
  })
  it('keeps every page out of caches', async () => {
    const { response } = await visit({ path: '/o/ours/people', as: member })
    expect(response.headers.get('cache-control')).toBe('private, no-store')
  })
})
