/** Flags in words: what a kind and a severity are called, how old a flag is, in which order it is worked. */
import type { FlagKind } from '#db/enums.ts'
import { counted } from '#lib/format.ts'

export type Severity = 'dangerous' | 'cold' | 'attention'

export const KIND_WORDS: Readonly<Record<FlagKind, string>> = {
  'misses-recovery': 'Runs too short',
  'may-never-stop': 'May never stop',
  'hardware-fails': 'Fails its screening',
  'over-service': 'Over the service',
  'clock-is-off': 'Clock is off',
  'growth-range': 'Growth range',
  'scald-risk': 'Scald risk',
  'not-evaluated': 'Not computed',
  'model-disagrees': 'Model disagrees',
}

export const SEVERITY_WORDS: Readonly<Record<Severity, string>> = { dangerous: 'Dangerous', cold: 'Runs cold', attention: 'Attention' }
export const SEVERITIES: readonly Severity[] = ['dangerous', 'cold', 'attention']

const MS_PER_DAY = 86_400_000

export function ageWords(openedAtMs: number, nowMs: number): string {
  const days = Math.floor((nowMs - openedAtMs) / MS_PER_DAY)
  return days < 1 ? 'since today' : `for ${counted(days, 'day')}`
}

/** The worst first, and of these the oldest: whoever waits longest is next. */
export const byUrgency = (
  one: { readonly severity: Severity; readonly openedAtMs: number },
  other: { readonly severity: Severity; readonly openedAtMs: number },
): number => SEVERITIES.indexOf(one.severity) - SEVERITIES.indexOf(other.severity) || one.openedAtMs - other.openedAtMs

export const STEP_WORDS = {
  assumed: 'What was assumed',
  found: 'What came out',
  limit: 'What it is held against',
  fix: 'What would change it',
  caution: 'Caution',
} as const
