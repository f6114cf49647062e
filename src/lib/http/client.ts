/** The islands' side of `/api`: JSON in and out, a problem document becomes an ApiProblem. */

export interface ApiFieldProblem {
  readonly field: string
  readonly message: string
}

export class ApiProblem extends Error {
  constructor(
    readonly status: number,
    message: string,
    readonly fields: readonly ApiFieldProblem[],
  ) {
    super(message)
    this.name = 'ApiProblem'
  }
}

export const apiGet = <T>(path: string): Promise<T> => call<T>(path, { method: 'GET' })

export const apiSend = <T>(method: 'POST' | 'PUT' | 'PATCH' | 'DELETE', path: string, body: unknown): Promise<T> =>
  call<T>(path, { method, headers: { 'content-type': 'application/json' }, body: JSON.stringify(body) })

async function call<T>(path: string, init: RequestInit): Promise<T> {
  const response = await fetch(path, { ...init, credentials: 'same-origin' }).catch(() => {
    throw new ApiProblem(0, 'No connection. What you entered is still here; try again when you are back online.', [])
  })
  if (response.ok) return (await response.json()) as T
  const problem = (await response.json().catch(() => ({}))) as { detail?: string; errors?: ApiFieldProblem[] }
  throw new ApiProblem(response.status, problem.detail ?? `The server answered ${response.status}. Try again.`, problem.errors ?? [])
}
