/** What a page does with the result of a form: one value, one message, problems by field. */
import type { ActionError } from 'astro:actions'
import type { FormOutcome } from './to-action-error.ts'
import { STATUS_OF } from './to-response.ts'

export interface Outcome<T> {
  readonly ok: boolean
  readonly value: T | null
  readonly message: string
  /** The HTTP status that says it to programs. */
  readonly status: number
  readonly retryAfterS: number | null
  problemOf(field: string): string | undefined
}

type Result<T> =
  { readonly data: FormOutcome<T>; readonly error: undefined } | { readonly data: undefined; readonly error: ActionError } | undefined

/** `null` when the form was not sent. */
export function outcomeOf<T>(result: Result<T>): Outcome<T> | null {
  if (!result) return null
  if (result.error) {
    const { message, status } = result.error
    return { ok: false, value: null, message, status, retryAfterS: null, problemOf: () => undefined }
  }
  const { data } = result
  if (data.ok) return { ok: true, value: data.value, message: '', status: 200, retryAfterS: null, problemOf: () => undefined }
  return {
    ok: false,
    value: null,
    message: data.message,
    status: STATUS_OF[data.code],
    retryAfterS: data.retryAfterS,
    problemOf: (field) => data.fields.find((problem) => problem.field === field)?.message,
  }
}

/** Gives the page the status of its form: 422 for fields, 429 with the time to wait, and so on. */
export function answerWith(response: ResponseInit & { readonly headers: Headers }, outcome: Outcome<unknown> | null): void {
  if (!outcome || outcome.ok) return
  response.status = outcome.status
  if (outcome.retryAfterS !== null) response.headers.set('retry-after', String(outcome.retryAfterS))
}
