/** The edge of `/api`: any thrown thing becomes one RFC 9457 problem document; unknown errors show an id and nothing else. */
import { log, loggedError } from '#lib/log.server.ts'
import { AppError, type AppErrorCode } from './app-error.ts'

export const STATUS_OF: Readonly<Record<AppErrorCode, number>> = {
  'not-signed-in': 401,
  forbidden: 403,
  'not-found': 404,
  conflict: 409,
  expired: 410,
  'too-large': 413,
  invalid: 422,
  limited: 429,
}

const TITLE_OF: Readonly<Record<AppErrorCode, string>> = {
  'not-signed-in': 'Sign in first',
  forbidden: 'Not allowed for your role',
  'not-found': 'Not found',
  conflict: 'It has changed meanwhile',
  expired: 'No longer valid',
  'too-large': 'Too large',
  invalid: 'The input is not valid',
  limited: 'Too many attempts',
}

export function toResponse(error: unknown, instance: string): Response {
  if (error instanceof AppError) {
    const { fields, retryAfterS } = error.details
    return problem({
      status: STATUS_OF[error.code],
      headers: retryAfterS === undefined ? {} : { 'retry-after': String(retryAfterS) },
      body: {
        type: `about:blank#${error.code}`,
        title: TITLE_OF[error.code],
        detail: error.message,
        instance,
        ...(fields ? { errors: fields } : {}),
      },
    })
  }
  const errorId = logUnknown(error)
  return problem({
    status: 500,
    headers: {},
    body: {
      type: 'about:blank#internal',
      title: 'Something failed here',
      detail: `Look whether your change is there before you try again; if it stays, tell whoever runs this service the id ${errorId}.`,
      instance,
      errorId,
    },
  })
}

/** Logs an error nobody expected and returns the id under which it stands in the log. */
export function logUnknown(error: unknown): string {
  const errorId = crypto.randomUUID()
  log.error({ errorId, err: loggedError(error) }, 'unexpected error')
  return errorId
}

interface Problem {
  readonly status: number
  readonly headers: Readonly<Record<string, string>>
  readonly body: object
}

const problem = ({ status, headers, body }: Problem): Response =>
  new Response(JSON.stringify({ status, ...body }), {
    status,
    headers: { 'content-type': 'application/problem+json', 'cache-control': 'no-store', ...headers },
  })
