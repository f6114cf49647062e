/** When a lease's holder is certainly over. */
import { spawn } from 'node:child_process'
import { hostname } from 'node:os'
import { afterAll, describe, expect, it } from 'vitest'
import { holderIsGone, makeHolder } from '#lib/jobs/holder.server.ts'

const sleeper = spawn(process.execPath, ['-e', 'setTimeout(() => {}, 60000)'])
afterAll(() => void sleeper.kill('SIGKILL'))

describe('holderIsGone', () => {
  it('is no for this process’s own workers', () => {
    const [one, other] = [makeHolder(), makeHolder()]
    expect(one).not.toBe(other)
    expect([holderIsGone(one), holderIsGone(other)]).toEqual([false, false])
  })

  it('is yes for an earlier start under this very number, as a restarted container has it', () => {
    const [host, pid] = makeHolder().split('|')
    expect(holderIsGone([host, pid, 'an earlier start', '1', '1'].join('|'))).toBe(true)
  })

  it('is yes for a number that another program has now, no for the process that began then', () => {
    const at = (beginning: string) => holderIsGone([hostname(), sleeper.pid, 'some start', beginning, '1'].join('|'))
    expect(at('1')).toBe(process.platform === 'linux')
    expect(at('')).toBe(false)
  })

  it('is no for another host, whatever its numbers', () => {
    expect(holderIsGone(['elsewhere', process.pid, 'x', '1', '1'].join('|'))).toBe(false)
  })
})
