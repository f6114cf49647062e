/** The one closed family of errors: a broken precondition, with words for the person who caused it. */

export interface FieldProblem {
  /** Path of the field, e.g. `tank.setPointC`; empty for the whole input. */
  readonly field: string
  /** What is wrong and what to do. */
  readonly message: string
}

export type AppErrorCode = 'not-signed-in' | 'forbidden' | 'not-found' | 'invalid' | 'conflict' | 'limited' | 'too-large' | 'expired'

/** Messages say what happened, what was kept, what to do. They are shown to people. */
export class AppError extends Error {
  constructor(
    readonly code: AppErrorCode,
    message: string,
    readonly details: { readonly fields?: readonly FieldProblem[]; readonly retryAfterS?: number } = {},
  ) {
    super(message)
    this.name = 'AppError'
  }
}

/** "Not yours" and "not there" are one answer. */
export const notFound = (what: string): AppError => new AppError('not-found', `There is no such ${what} here.`)
export const forbidden = (what: string): AppError =>
  new AppError('forbidden', `Your role does not allow you to ${what}. Nothing was changed.`)
export const invalid = (fields: readonly FieldProblem[]): AppError =>
  new AppError('invalid', fields.map((problem) => problem.message).join(' ') || 'The input is not valid.', { fields })
