/** How a job, its period and what it did are said. */
import { formatDay } from '#lib/format.ts'

const WHAT: Readonly<Record<string, { readonly label: string; readonly when: string }>> = {
  evaluate: { label: 'Evaluation of every unit', when: 'every night at 01:30, and after each change' },
  tips: { label: 'Tips to tenants', when: 'every day at 17:00' },
  'flag-summary': { label: 'List of flags to landlords', when: 'every day at 07:30, when something has changed' },
  'clock-change': { label: 'Switches to set before a clock change', when: 'ten days before, at 09:00' },
  digest: { label: 'Digest to owners', when: 'on the 1st at 07:00' },
  clean: { label: 'Removal of what is kept no longer', when: 'every night at 03:10 UTC' },
  backup: { label: 'Backup', when: 'every night at 03:20 UTC; 14 are kept' },
}

/** They run for each property, by its own clock. */
export const PROPERTY_JOBS = ['evaluate', 'tips', 'flag-summary', 'clock-change', 'digest'] as const
/** They run once for the whole server. */
export const SERVER_JOBS = ['clean', 'backup'] as const
export const jobLabel = (job: string): string => WHAT[job]?.label ?? job
export const jobTimes = (job: string): string => WHAT[job]?.when ?? ''

/** `2026-12-02` -> "Wednesday 2 December"; `2026-11` -> "November 2026"; a repeated run says so. */
export function periodLabel(period: string): string {
  const [key = '', again] = period.split(' ')
  const label = /^\d{4}-\d{2}$/.test(key) ? formatDay(`${key}-01`, 'MMMM yyyy') : formatDay(key)
  return again ? `${label}, run again` : label
}

/** `{ flagsOpened: 2, units: 24, cold: 0 }` -> "flags opened 2, units 24"; what there was none of is left out. */
export const countsLabel = (counts: Readonly<Record<string, number>> | null): string =>
  Object.entries(counts ?? {})
    .filter(([, count]) => count !== 0)
    .map(([name, count]) => `${name.replaceAll(/[A-Z]/g, (letter) => ` ${letter.toLowerCase()}`)} ${count}`)
    .join(', ')
