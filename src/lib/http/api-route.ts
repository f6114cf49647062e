/** One route of `/api/o/<slug>/…`: scope from the middleware, a body limit before reading, one translation of errors. */
import type { APIContext, APIRoute } from 'astro'
import type { OrgDb } from '#db/org-db.ts'
import type { OrganisationForPerson } from '#lib/auth/scope.server.ts'
import { AppError, invalid, notFound } from './app-error.ts'
import { toResponse } from './to-response.ts'

/** A roster of 5,000 lines with all columns is about 1 MB. */
export const JSON_BODY_LIMIT_BYTES = 4 * 1024 * 1024

export interface ApiCall {
  readonly db: OrgDb
  readonly organisation: OrganisationForPerson
  readonly nowMs: number
  readonly params: Readonly<Record<string, string | undefined>>
  readonly query: URLSearchParams
  /** The body as JSON; throws `invalid` when it is not JSON and `too-large` past the limit. */
  readJson(): Promise<unknown>
}

/** `handler` answers a JSON value, or a Response of its own for files. */
export const apiRoute =
  (handler: (call: ApiCall) => Promise<unknown>): APIRoute =>
  async (context) => {
    try {
      const { db, organisation, user, nowMs } = context.locals
      if (!user) throw new AppError('not-signed-in', 'You are not signed in, or your session has ended. Sign in and try again.')
      if (!db || !organisation) throw notFound('page')
      const answer = await handler({
        db,
        organisation,
        nowMs,
        params: context.params,
        query: context.url.searchParams,
        readJson: () => readJson(context),
      })
      return answer instanceof Response ? answer : Response.json(answer, { headers: { 'cache-control': 'no-store' } })
    } catch (error) {
      return toResponse(error, context.url.pathname)
    }
  }

async function readJson({ request }: APIContext): Promise<unknown> {
  if (!request.headers.get('content-type')?.startsWith('application/json')) {
    throw invalid([{ field: '', message: 'Send JSON with the content type application/json.' }])
  }
  const text = await readText(request, JSON_BODY_LIMIT_BYTES)
  try {
    return JSON.parse(text) as unknown
  } catch {
    throw invalid([{ field: '', message: 'The body is not valid JSON. Nothing was changed.' }])
  }
}

/** Reads a body, refusing it as soon as it passes the limit, whatever its headers claim. */
export async function readText(request: Request, limitBytes: number): Promise<string> {
  const chunks: Uint8Array[] = []
  let sizeBytes = 0
  const reader = request.body?.getReader()
  for (let part = await reader?.read(); part && !part.done; part = await reader?.read()) {
    sizeBytes += part.value.byteLength
    if (sizeBytes > limitBytes) {
      await reader?.cancel()
      throw new AppError('too-large', `The upload is over ${Math.round(limitBytes / 1024)} kB. Nothing was changed. Send a smaller one.`)
    }
    chunks.push(part.value)
  }
  return Buffer.concat(chunks).toString('utf8')
}
