/**
 * The 555-type monostable with capacitor leakage and bias: its law, and when it stalls.
 * Node: R from the supply; C and leakage R_L to ground; a constant sink I_b (threshold plus discharge-pin leakage).
 * Constant I_b over-states the delay of a bipolar part but gives the same stall condition (TI E2E thread 564703, 2017).
 */
import type { CapacitorLeakage, OneShotRcController } from './types.ts'

/** Threshold of the divider, 2/3 of the supply. ln 3 follows from it; datasheets round to 1.1 (0.126 % above). */
export const THRESHOLD_FRACTION = 2 / 3

/** Threshold plus discharge-pin leakage, which sit on the same node. */
export const BIAS_A: Readonly<Record<'bipolar' | 'cmos', { readonly typicalA: number; readonly worstA: number }>> = {
  // NE555: threshold 30 nA typical, 250 nA max; discharge 20 / 100 nA (TI SLFS022 p. 5; ST Doc 2182 table 3).
  bipolar: { typicalA: 50e-9, worstA: 350e-9 },
  // TS555: threshold 10 pA; discharge 1 nA typical, 100 nA max (ST TS555 p. 7).
  cmos: { typicalA: 1e-9, worstA: 100e-9 },
}

/** Initial error of the interval, 3 % max (TI SLFS022A p. 5; TLC555 SLFS043C p. 9). */
export const IC_TOLERANCE_FRACTION = 0.03

/**
 * A datasheet's leakage limit is a test after one to five minutes at rated voltage; parts in service leak far less. One
 * hundredth of the limit is taken as typical for wet electrolytics: common practice, no source.
 */
export const TYPICAL_SHARE_OF_ELECTROLYTIC_LIMIT = 0.01

export interface RcCircuit {
  readonly resistanceOhm: number
  readonly capacitanceF: number
  readonly supplyV: number
  /** `null` = none. */
  readonly leakageOhm: number | null
  readonly biasA: number
  readonly startV?: number
}

export type RcOutcome =
  | { readonly status: 'ends'; readonly durationS: number }
  | { readonly status: 'never'; readonly settlesAtV: number; readonly thresholdV: number }

/** t = tau · ln((V_inf − V_0) / (V_inf − V_th)); never when V_inf ≤ V_th. */
export function rcDuration({ resistanceOhm, capacitanceF, supplyV, leakageOhm, biasA, startV = 0 }: RcCircuit): RcOutcome {
  const share = leakageOhm === null ? 1 : leakageOhm / (resistanceOhm + leakageOhm)
  const settlesAtV = (supplyV - biasA * resistanceOhm) * share
  const thresholdV = THRESHOLD_FRACTION * supplyV
  if (settlesAtV <= thresholdV) return { status: 'never', settlesAtV, thresholdV }
  const tauS = capacitanceF * resistanceOhm * share
  return { status: 'ends', durationS: tauS * Math.log((settlesAtV - startV) / (settlesAtV - thresholdV)) }
}

/** Equivalent leakage resistance: the published limit, and what is typical. */
export function leakageOhm(
  leakage: CapacitorLeakage,
  capacitanceF: number,
  supplyV: number,
): { readonly typicalOhm: number | null; readonly worstOhm: number | null } {
  const microfarad = capacitanceF * 1e6
  // Leakage current at rated voltage in microampere, the greater of the two terms.
  const limit = (perCv: number, floorMicroA: number, ratedV: number) => (ratedV / Math.max(perCv * microfarad * ratedV, floorMicroA)) * 1e6
  if (leakage.kind === 'resistance') return { typicalOhm: leakage.leakageOhm, worstOhm: leakage.leakageOhm }
  if (leakage.kind === 'current') {
    const ohm = leakage.leakageA > 0 ? (THRESHOLD_FRACTION * supplyV) / leakage.leakageA : null
    return { typicalOhm: ohm, worstOhm: ohm }
  }
  const series = leakage.kind === 'series' ? leakage : { series: 'electrolytic' as const, ratedV: 25 }
  switch (series.series) {
    case 'electrolytic': {
      // 0.01 CV or 3 µA (Vishay 038 RSU, doc. 28309, p. 100).
      const worstOhm = limit(0.01, 3, series.ratedV)
      return { typicalOhm: worstOhm / TYPICAL_SHARE_OF_ELECTROLYTIC_LIMIT, worstOhm }
    }
    case 'low-leakage': {
      // 0.002 CV or 0.2 µA (Nichicon KL).
      const worstOhm = limit(0.002, 0.2, series.ratedV)
      return { typicalOhm: worstOhm / TYPICAL_SHARE_OF_ELECTROLYTIC_LIMIT, worstOhm }
    }
    case 'film-polypropylene': {
      // Self-time-constant at least 30,000 s (Icel PPB).
      const ohm = 30_000 / capacitanceF
      return { typicalOhm: ohm, worstOhm: ohm }
    }
    case 'film-polyester': {
      // 3,000 s up to 100 V (index lines of a maker's list; read in a secondary copy).
      const ohm = 3_000 / capacitanceF
      return { typicalOhm: ohm, worstOhm: ohm }
    }
  }
}

/** Corner values of a controller as circuits: shortest possible, typical, longest possible. */
export function rcCorners(timer: OneShotRcController): {
  readonly shortest: RcCircuit
  readonly typical: RcCircuit
  readonly longest: RcCircuit
} {
  const { resistanceOhm, resistanceToleranceFraction: dr, capacitanceF, capacitanceToleranceFraction: dc, supplyV, icFamily } = timer
  const leak = leakageOhm(timer.leakage, capacitanceF, supplyV)
  const bias = BIAS_A[icFamily]
  return {
    // Leakage and bias only ever lengthen, so the shortest run has neither.
    shortest: { resistanceOhm: resistanceOhm * (1 - dr), capacitanceF: capacitanceF * (1 - dc), supplyV, leakageOhm: null, biasA: 0 },
    typical: { resistanceOhm, capacitanceF, supplyV, leakageOhm: leak.typicalOhm, biasA: bias.typicalA },
    longest: {
      resistanceOhm: resistanceOhm * (1 + dr),
      capacitanceF: capacitanceF * (1 + dc),
      supplyV,
      leakageOhm: leak.worstOhm,
      biasA: bias.worstA,
    },
  }
}
