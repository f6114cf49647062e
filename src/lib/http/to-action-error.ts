/** The edge of plain forms: an AppError becomes the result a page can show beside its fields. */
import { ActionError, type ActionErrorCode } from 'astro:actions'
import { AppError, type AppErrorCode, type FieldProblem } from './app-error.ts'
import { logUnknown } from './to-response.ts'

const ACTION_CODE_OF: Readonly<Record<AppErrorCode, ActionErrorCode>> = {
  'not-signed-in': 'UNAUTHORIZED',
  forbidden: 'FORBIDDEN',
  'not-found': 'NOT_FOUND',
  conflict: 'CONFLICT',
  expired: 'GONE',
  'too-large': 'CONTENT_TOO_LARGE',
  invalid: 'UNPROCESSABLE_CONTENT',
  limited: 'TOO_MANY_REQUESTS',
}

export interface FormProblem {
  readonly ok: false
  readonly code: AppErrorCode
  readonly message: string
  readonly fields: readonly FieldProblem[]
  readonly retryAfterS: number | null
}
export type FormOutcome<T> = { readonly ok: true; readonly value: T } | FormProblem

/** Field problems are a value for the form; everything else is an ActionError. */
export async function runForm<T>(work: () => Promise<T>): Promise<FormOutcome<T>> {
  try {
    return { ok: true, value: await work() }
  } catch (error) {
    if (error instanceof AppError) {
      if (error.code === 'not-found' || error.code === 'forbidden' || error.code === 'not-signed-in') {
        throw new ActionError({ code: ACTION_CODE_OF[error.code], message: error.message })
      }
      const { fields = [], retryAfterS = null } = error.details
      return { ok: false, code: error.code, message: error.message, fields, retryAfterS }
    }
    const errorId = logUnknown(error)
    throw new ActionError({
      code: 'INTERNAL_SERVER_ERROR',
      message: `Something failed here. Look whether your change is there before you try again. Its id in the log is ${errorId}.`,
    })
  }
}
