/** The settings of the processes: read from the environment once, checked, with defaults that work on one machine. */
import { resolve } from 'node:path'
import { z } from 'zod'

const schema = z.object({
  DWELLHOUR_PORT: z.coerce.number().int().min(1).max(65_535).default(4321),
  DWELLHOUR_HOST: z.string().min(1).default('127.0.0.1'),
  DWELLHOUR_DATA_DIR: z.string().min(1).default('data'),
  DWELLHOUR_BASE_URL: z.url({ protocol: /^https?$/ }).optional(),
  DWELLHOUR_SMTP_URL: z.url({ protocol: /^smtps?$/ }).optional(),
  DWELLHOUR_MAIL_FROM: z.string().min(3).default('Dwellhour <post@dwellhour.example>'),
  DWELLHOUR_SECRET: z.string().min(32).optional(),
  DWELLHOUR_DEMO: z.enum(['on', 'off']).default('on'),
  DWELLHOUR_LOG_LEVEL: z.enum(['fatal', 'error', 'warn', 'info', 'debug', 'silent']).default('info'),
})

const LOOPBACK = new Set(['localhost', '127.0.0.1', '::1', '[::1]'])

export interface Config {
  readonly port: number
  readonly host: string
  readonly dataDir: string
  readonly databaseFile: string
  /** Without a trailing slash; every link in mail and feeds is built from it, never from a request. */
  readonly baseUrl: string
  /** Whether the base address and the address listened on are this very machine's own; what is for development alone shows only then. */
  readonly local: boolean
  /** `null`: mail goes to the local post room (readable at `/dev/post`) instead of an SMTP server. */
  readonly smtpUrl: string | null
  readonly mailFrom: string
  /** Signs links in mail; `null`: one is made and kept in the data folder. */
  readonly secret: string | null
  readonly logLevel: string
  /** Whether an empty database is filled with the demo at start. */
  readonly demo: boolean
}

export type ConfigOutcome =
  { readonly status: 'valid'; readonly config: Config } | { readonly status: 'invalid'; readonly problems: readonly string[] }

/** Reads settings from `env`; an empty string counts as not set. */
export function readConfig(env: Readonly<Record<string, string | undefined>>): ConfigOutcome {
  const set = Object.fromEntries(Object.entries(env).filter(([, value]) => value !== undefined && value !== ''))
  const parsed = schema.safeParse(set)
  if (!parsed.success) {
    return { status: 'invalid', problems: parsed.error.issues.map((issue) => `${issue.path.join('.')}: ${issue.message}`) }
  }
  const value = parsed.data
  const dataDir = resolve(value.DWELLHOUR_DATA_DIR)
  const baseUrl = (value.DWELLHOUR_BASE_URL ?? `http://localhost:${value.DWELLHOUR_PORT}`).replace(/\/+$/, '')
  const local = LOOPBACK.has(new URL(baseUrl).hostname) && LOOPBACK.has(value.DWELLHOUR_HOST)
  return {
    status: 'valid',
    config: {
      port: value.DWELLHOUR_PORT,
      host: value.DWELLHOUR_HOST,
      dataDir,
      databaseFile: resolve(dataDir, 'dwellhour.sqlite'),
      baseUrl,
      local,
      smtpUrl: value.DWELLHOUR_SMTP_URL ?? null,
      mailFrom: value.DWELLHOUR_MAIL_FROM,
      secret: value.DWELLHOUR_SECRET ?? null,
      logLevel: value.DWELLHOUR_LOG_LEVEL,
      // The demo's password is public: it never fills a service that others can reach.
      demo: value.DWELLHOUR_DEMO === 'on' && local,
    },
  }
}

/** The process's own settings; throws one readable message naming every bad variable. */
export function processConfig(): Config {
  const outcome = readConfig(process.env)
  if (outcome.status === 'invalid') throw new Error(`Settings are not valid.\n${outcome.problems.map((line) => `  ${line}`).join('\n')}`)
  return outcome.config
}
