/** Who holds a lease: a process on a host. A holder whose process has died on this host need not be waited for. */
import { randomUUID } from 'node:crypto'
import { hostname } from 'node:os'

/** `host|pid|instance`; the instance tells two workers inside one process apart. */
export const makeHolder = (): string => [hostname(), process.pid, randomUUID().slice(0, 8)].join('|')

/** True only when it is certain: same host, and no process with that number. Another host's holder is left to its lease. */
export function holderIsGone(holder: string): boolean {
  const [host, pid] = holder.split('|')
  if (host !== hostname() || !pid || !/^\d+$/.test(pid)) return false
  if (Number(pid) === process.pid) return false
  try {
    // Signal 0 asks whether the process is there and sends nothing.
    process.kill(Number(pid), 0)
    return false
  } catch (error) {
    return (error as NodeJS.ErrnoException).code === 'ESRCH'
  }
}
