/** The log: JSON lines on standard output, ids instead of personal data. */
import { pino } from 'pino'

export const log = pino({
  level: process.env.DWELLHOUR_LOG_LEVEL ?? 'info',
  base: null,
  redact: { paths: ['email', 'to', 'password', 'token', '*.email', '*.password', '*.token'], censor: '[removed]' },
})
