/** Who holds a lease: one start of a process on a host. A holder that is certainly over need not be waited for. */
import { randomUUID } from 'node:crypto'
import { readFileSync } from 'node:fs'
import { hostname } from 'node:os'

/** Random per process start: a number alone is soon another process's, in a container at once. */
const STARTED = randomUUID()
let workers = 0

/** `host|pid|start|beginning|worker`: two workers inside one process are told apart by the last. */
export const makeHolder = (): string => [hostname(), process.pid, STARTED, beginningOf(process.pid) ?? '', ++workers].join('|')

/** True only when it is certain: same host, and no process of that start. Another host's holder is left to its lease. */
export function holderIsGone(holder: string): boolean {
  const [host, pid, started, beginning] = holder.split('|')
  if (host !== hostname() || !pid || !/^\d+$/.test(pid)) return false
  if (Number(pid) === process.pid) return started !== STARTED
  try {
    // Signal 0 asks whether the process is there and sends nothing.
    process.kill(Number(pid), 0)
  } catch (error) {
    return (error as NodeJS.ErrnoException).code === 'ESRCH'
  }
  const now = beginningOf(Number(pid))
  return Boolean(beginning) && now !== null && now !== beginning
}

/** When a process of this host began, in the kernel's ticks (proc_pid_stat(5), field 22); `null` where that is not told. */
function beginningOf(pid: number): string | null {
  try {
    // The second field is the program's name in brackets and may hold spaces and brackets itself.
    const fields = readFileSync(`/proc/${pid}/stat`, 'utf8').split(') ').at(-1)?.split(' ')
    return fields?.[19] ?? null
  } catch {
    return null
  }
}
