/** Settings: defaults that run on one machine, every bad variable named, nothing for development shown to others. */
import { describe, expect, it } from 'vitest'
import { readConfig } from '#lib/config.server.ts'

const configOf = (env: Record<string, string>) => {
  const outcome = readConfig(env)
  if (outcome.status === 'invalid') throw new Error(outcome.problems.join('; '))
  return outcome.config
}

describe('readConfig', () => {
  it('runs with nothing set, an empty value counting as not set', () => {
    expect(configOf({ DWELLHOUR_PORT: '' })).toMatchObject({
      port: 4321,
      host: '127.0.0.1',
      baseUrl: 'http://localhost:4321',
      smtpUrl: null,
      demo: true,
      local: true,
    })
  })
  it('names every bad variable', () => {
    const outcome = readConfig({ DWELLHOUR_PORT: 'http', DWELLHOUR_SMTP_URL: 'mail', DWELLHOUR_SECRET: 'short', DWELLHOUR_DEMO: 'maybe' })
    const problems = outcome.status === 'invalid' ? outcome.problems.join('\n') : ''
    for (const name of ['DWELLHOUR_PORT', 'DWELLHOUR_SMTP_URL', 'DWELLHOUR_SECRET', 'DWELLHOUR_DEMO']) expect(problems).toContain(name)
  })
  it('shows neither the demo nor the post room where others can reach the service', () => {
    expect(configOf({ DWELLHOUR_HOST: '0.0.0.0' })).toMatchObject({ demo: false, local: false })
    expect(configOf({ DWELLHOUR_BASE_URL: 'https://heat.example', DWELLHOUR_DEMO: 'on' })).toMatchObject({
      demo: false,
      local: false,
      baseUrl: 'https://heat.example',
    })
  })
})
