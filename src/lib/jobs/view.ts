/** How a job, its period and what it did are said. */
import { formatDay } from '#lib/format.ts'

const WHAT: Readonly<Record<string, { readonly label: string; readonly when: string }>> = {
  evaluate: { label: 'Evaluation of every unit', when: 'every night at 01:30' },
  tips: { label: 'Tips to tenants', when: 'every day at 17:00' },
  digest: { label: 'Digest to owners', when: 'on the 1st at 07:00' },
}

export const JOB_NAMES: readonly string[] = Object.keys(WHAT)
export const jobLabel = (job: string): string => WHAT[job]?.label ?? job
export const jobTimes = (job: string): string => WHAT[job]?.when ?? ''

/** `2026-12-02` -> "Wednesday 2 December"; `2026-11` -> "November 2026"; a repeated run says so. */
export function periodLabel(period: string): string {
  const [key = '', again] = period.split(' ')
  const label = /^\d{4}-\d{2}$/.test(key) ? formatDay(`${key}-01`, 'MMMM yyyy') : formatDay(key)
  return again ? `${label}, run again` : label
}

/** `{ flagsOpened: 2, units: 24 }` -> "flags opened 2, units 24". */
export const countsLabel = (counts: Readonly<Record<string, number>> | null): string =>
  Object.entries(counts ?? {})
    .map(([name, count]) => `${name.replaceAll(/[A-Z]/g, (letter) => ` ${letter.toLowerCase()}`)} ${count}`)
    .join(', ')
