/** Puts one check together: a limit from memory never makes a pass, and mains work always carries its caution. */
import type { Limit } from './profiles/profile.ts'
import type { Check } from './types.ts'

export const MAINS_CAUTION = 'Isolate and lock off before opening. Licensed practice; the adopted local code decides.'

/** The worse of a verdict and what a limit from memory can support. */
export const check = (
  limit: Limit,
  found: Omit<Check, 'clause' | 'confirmAgainstCode' | 'caution'> & { readonly caution?: string },
): Check => ({
  caution: MAINS_CAUTION,
  ...found,
  verdict: limit.confirm && found.verdict === 'pass' ? 'attention' : found.verdict,
  clause: limit.clause,
  confirmAgainstCode: limit.confirm,
})
