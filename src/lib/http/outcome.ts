/** What a page does with the result of a form: one value, one message, problems by field. */
import type { ActionError } from 'astro:actions'
import type { FormOutcome } from './to-action-error.ts'

export interface Outcome<T> {
  readonly ok: boolean
  readonly value: T | null
  readonly message: string
  problemOf(field: string): string | undefined
}

type Result<T> =
  { readonly data: FormOutcome<T>; readonly error: undefined } | { readonly data: undefined; readonly error: ActionError } | undefined

/** `null` when the form was not sent. */
export function outcomeOf<T>(result: Result<T>): Outcome<T> | null {
  if (!result) return null
  if (result.error) return { ok: false, value: null, message: result.error.message, problemOf: () => undefined }
  const { data } = result
  if (data.ok) return { ok: true, value: data.value, message: '', problemOf: () => undefined }
  return {
    ok: false,
    value: null,
    message: data.message,
    problemOf: (field) => data.fields.find((problem) => problem.field === field)?.message,
  }
}
