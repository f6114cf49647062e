/** How timing capacitors leak, by series: the makers' limits, and what is stocked. */
import type { CapacitorLeakage } from './types.ts'

export type CapacitorSeriesId = Extract<CapacitorLeakage, { readonly kind: 'series' }>['series']

/** A limit on the current at rated voltage, or a least self-time-constant (leakage resistance times capacitance). */
type LeakageLimit =
  | { readonly kind: 'current'; readonly perCv: number; readonly floorMicroA: number }
  | { readonly kind: 'self-time-constant'; readonly leastS: number }

export interface CapacitorSeries {
  readonly name: string
  readonly limit: LeakageLimit
  readonly source: string
  readonly status: 'read' | 'read in a secondary copy'
  /** Typical leakage as a share of the limit. */
  readonly typicalShare: number
  /** What shops carry in one piece: common practice, no source. */
  readonly stock: {
    readonly fromF: number
    readonly toF: number
    readonly ratedV: number
    readonly toleranceFraction: number
  }
}

/**
 * A limit of wet electrolytics is a test after one to five minutes at rated voltage; parts in service leak far less. One hundredth
 * of the limit is taken as typical: common practice, no source. What is guaranteed never rests on it.
 */
const TYPICAL_SHARE_OF_ELECTROLYTIC_LIMIT = 0.01

export const CAPACITOR_SERIES: Readonly<Record<CapacitorSeriesId, CapacitorSeries>> = {
  electrolytic: {
    name: 'electrolytic',
    limit: { kind: 'current', perCv: 0.01, floorMicroA: 3 },
    source: '0.01 CV or 3 µA: Vishay 038 RSU, doc. 28309 (2005) p. 100',
    status: 'read',
    typicalShare: TYPICAL_SHARE_OF_ELECTROLYTIC_LIMIT,
    stock: { fromF: 1e-6, toF: 4.7e-3, ratedV: 25, toleranceFraction: 0.2 },
  },
  'low-leakage': {
    name: 'low-leakage electrolytic',
    limit: { kind: 'current', perCv: 0.002, floorMicroA: 0.2 },
    source: '0.002 CV or 0.2 µA: Nichicon KL',
    status: 'read',
    typicalShare: TYPICAL_SHARE_OF_ELECTROLYTIC_LIMIT,
    stock: { fromF: 0.1e-6, toF: 1e-3, ratedV: 25, toleranceFraction: 0.2 },
  },
  'film-polyester': {
    name: 'polyester film',
    limit: { kind: 'self-time-constant', leastS: 3_000 },
    source: '3,000 s up to 100 V: index lines of a maker’s list',
    status: 'read in a secondary copy',
    typicalShare: 1,
    stock: { fromF: 0.1e-6, toF: 33e-6, ratedV: 63, toleranceFraction: 0.1 },
  },
  'film-polypropylene': {
    name: 'polypropylene film',
    limit: { kind: 'self-time-constant', leastS: 30_000 },
    source: '30,000 s: Icel PPB',
    status: 'read',
    typicalShare: 1,
    stock: { fromF: 0.1e-6, toF: 100e-6, ratedV: 450, toleranceFraction: 0.1 },
  },
}

/** The current a series may leak at rated voltage. */
export function leakageLimitA(
  series: CapacitorSeriesId,
  { capacitanceF, ratedV }: { readonly capacitanceF: number; readonly ratedV: number },
): number {
  const { limit } = CAPACITOR_SERIES[series]
  if (limit.kind === 'self-time-constant') return (ratedV * capacitanceF) / limit.leastS
  // C in µF times V gives the current in µA; the greater of the two terms is the limit.
  return Math.max(limit.perCv * capacitanceF * 1e6 * ratedV, limit.floorMicroA) / 1e6
}

/** Leakage of a capacitor whose series nobody wrote down: an ordinary electrolytic. */
const ASSUMED = { kind: 'series', series: 'electrolytic', ratedV: 25 } as const

export interface LeakageOhm {
  /** `null` = none. */
  readonly typicalOhm: number | null
  readonly worstOhm: number | null
}

/** Equivalent leakage resistance: the published limit, and what is typical. A measured current is taken at the voltage where it matters. */
export function leakageOhm(
  leakage: CapacitorLeakage,
  { capacitanceF, thresholdV }: { readonly capacitanceF: number; readonly thresholdV: number },
): LeakageOhm {
  switch (leakage.kind) {
    case 'resistance':
      return { typicalOhm: leakage.leakageOhm, worstOhm: leakage.leakageOhm }
    case 'current': {
      const ohm = leakage.leakageA > 0 ? thresholdV / leakage.leakageA : null
      return { typicalOhm: ohm, worstOhm: ohm }
    }
    case 'series':
    case 'unknown': {
      const { series, ratedV } = leakage.kind === 'series' ? leakage : ASSUMED
      const worstOhm = ratedV / leakageLimitA(series, { capacitanceF, ratedV })
      return { typicalOhm: worstOhm / CAPACITOR_SERIES[series].typicalShare, worstOhm }
    }
  }
}
