/** The log: JSON lines on standard output, ids instead of personal data. */
import { pino } from 'pino'

export const log = pino({
  level: process.env.DWELLHOUR_LOG_LEVEL ?? 'info',
  base: null,
  redact: { paths: ['email', 'to', 'password', 'token', '*.email', '*.password', '*.token'], censor: '[removed]' },
})

export interface LoggedError {
  readonly name: string
  /** Of a system or database error, e.g. `SQLITE_BUSY`. */
  readonly code?: string
  readonly frames: readonly string[]
}

/** An error as the log may hold it: its kind, its code and where it came from. A message can quote a record or what somebody typed, so it stays out. */
export function loggedError(error: unknown): LoggedError {
  if (!(error instanceof Error)) return { name: typeof error, frames: [] }
  const { code } = error as NodeJS.ErrnoException
  return {
    name: error.name,
    ...(typeof code === 'string' ? { code } : {}),
    // A message of several lines stands at the head of the stack; only lines of the form "at place" are places.
    frames: (error.stack ?? '')
      .slice((error.stack ?? '').indexOf(error.message) + error.message.length)
      .split('\n')
      .flatMap((line) => /^\s+at (.+)$/.exec(line)?.[1] ?? []),
  }
}
