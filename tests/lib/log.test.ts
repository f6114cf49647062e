/** What the log may hold of an error. */
import { describe, expect, it } from 'vitest'
import { loggedError } from '#lib/log.server.ts'

describe('loggedError', () => {
  it('names the kind, the code and the places, and never what the message quotes', () => {
    const quoting = Object.assign(new RangeError('bad week of ada@people.example\n    at her flat, 12 Quill Row'), { code: 'SQLITE_BUSY' })
    const logged = loggedError(quoting)
    expect(logged).toMatchObject({ name: 'RangeError', code: 'SQLITE_BUSY' })
    expect(logged.frames.length).toBeGreaterThan(0)
    expect(logged.frames[0]).toContain('log.test')
    expect(JSON.stringify(logged)).not.toMatch(/ada@|Quill Row/)
  })

  it('says no more of a thrown value than its type', () => {
    expect(loggedError('ada@people.example')).toEqual({ name: 'string', frames: [] })
  })
})
