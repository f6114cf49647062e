/** Puts one check together: a limit from memory never makes a pass, and mains work always carries its caution. */
import type { Limit } from './profiles/profile.ts'
import type { Check } from './types.ts'

export const MAINS_CAUTION = 'Isolate and lock off before opening. Licensed practice; the adopted local code decides.'

type Found = Omit<Check, 'clause' | 'confirmAgainstCode' | 'caution'> & { readonly caution?: string }

export const clauseOf = ({ clause, edition }: Limit): string => (edition === '' ? clause : `${clause} (${edition})`)

/** The worse of a verdict and what a limit from memory can support. */
export const check = (limit: Limit, found: Found): Check => ({
  caution: MAINS_CAUTION,
  ...found,
  verdict: limit.confirm && found.verdict === 'pass' ? 'attention' : found.verdict,
  clause: clauseOf(limit),
  confirmAgainstCode: limit.confirm,
})

type Base = Pick<Check, 'id' | 'title' | 'limit'> & { readonly caution?: string }

export const notKnown = (limit: Limit, base: Base, reason: string): Check =>
  check(limit, { ...base, verdict: 'not-known', figure: 'not known', reason })

/** Several limits that decide together: from memory as soon as one of them is. */
export const together = (limits: readonly Limit[]): Limit => ({
  clause: limits.map(clauseOf).join('; '),
  edition: '',
  confirm: limits.some(({ confirm }) => confirm),
})

/** A published figure that no profile changes. */
export const published = (clause: string, edition: string): Limit => ({ clause, edition, confirm: false })
