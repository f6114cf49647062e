/**
 * The 555-type monostable with capacitor leakage and bias: its law, and exactly when it stalls.
 * Node: R from the supply; C and leakage R_L to ground; a constant sink I_b (threshold plus discharge-pin leakage).
 * Constant I_b over-states the delay of a bipolar part but gives the same stall condition (TI E2E thread 564703, 2017).
 */
import { leakageOhm } from './capacitors.ts'
import { IC_FAMILIES, IC_TOLERANCE_FRACTION } from './ic-families.ts'
import type { OneShotRcController } from './types.ts'

/** Two equal resistors below the threshold tap and one above it: V_th = 2/3 V, from which ln 3 follows; datasheets round it to 1.1. */
const DIVIDER_RATIO = 2

export interface RcCircuit {
  readonly resistanceOhm: number
  readonly capacitanceF: number
  readonly supplyV: number
  /** `null` = none. */
  readonly leakageOhm: number | null
  readonly biasA: number
  readonly startV?: number
  /** Threshold over what is left above it, k / (1 − k); 2 in a perfect chip. */
  readonly dividerRatio?: number
}

interface Node {
  /** Where the capacitor would come to rest, and what it has to pass. */
  readonly settlesAtV: number
  readonly thresholdV: number
}
export type RcOutcome = (Node & { readonly status: 'ends'; readonly durationS: number }) | (Node & { readonly status: 'never' })

/**
 * t = tau · ln((V_inf − V_0) / (V_inf − V_th)); never when V_inf ≤ V_th. The headroom V_inf − V_th is multiplied out before it is
 * computed, so that nothing cancels near the stall and R_L = 2 R is never, to the last bit.
 */
export function rcDuration(circuit: RcCircuit): RcOutcome {
  const { resistanceOhm, capacitanceF, supplyV, biasA, startV = 0, dividerRatio = DIVIDER_RATIO } = circuit
  const leakiness = circuit.leakageOhm === null ? 0 : resistanceOhm / circuit.leakageOhm
  const biasV = biasA * resistanceOhm
  const thresholdV = (supplyV * dividerRatio) / (1 + dividerRatio)
  const settlesAtV = (supplyV - biasV) / (1 + leakiness)
  const headroomV = (supplyV * (1 - dividerRatio * leakiness) - (1 + dividerRatio) * biasV) / ((1 + dividerRatio) * (1 + leakiness))
  if (headroomV <= 0) return { status: 'never', settlesAtV, thresholdV }
  // Begun at or above the threshold it ends at once.
  const fromV = Math.min(startV, thresholdV)
  const tauS = (capacitanceF * resistanceOhm) / (1 + leakiness)
  return { status: 'ends', durationS: tauS * Math.log1p((thresholdV - fromV) / headroomV), settlesAtV, thresholdV }
}

/** A chip whose interval is longer by a fraction has its threshold higher: 3^(1 + f) − 1 in place of 2. The interval without leakage then is exactly that much longer. */
const dividerRatioAt = (errorFraction: number): number => 3 ** (1 + errorFraction) - 1

export interface RcCorners {
  /** Every part at its shortest; leakage and bias only ever lengthen, so it has neither. */
  readonly shortest: RcCircuit
  /** Nominal parts with typical leakage and bias. */
  readonly typical: RcCircuit
  /** The typical circuit with one part at its longest, for each part with a tolerance. */
  readonly typicalLonger: readonly RcCircuit[]
  /** Every part at its longest, leakage and bias at their published limits. */
  readonly longest: RcCircuit
}

export function rcCorners(timer: OneShotRcController): RcCorners {
  const { resistanceOhm, resistanceToleranceFraction: dr, capacitanceF, capacitanceToleranceFraction: dc, supplyV, icFamily } = timer
  const thresholdV = (supplyV * DIVIDER_RATIO) / (1 + DIVIDER_RATIO)
  const leak = leakageOhm(timer.leakage, { capacitanceF, thresholdV })
  const { typicalBiasA, worstBiasA } = IC_FAMILIES[icFamily]
  const typical: RcCircuit = { resistanceOhm, capacitanceF, supplyV, leakageOhm: leak.typicalOhm, biasA: typicalBiasA }
  return {
    shortest: {
      resistanceOhm: resistanceOhm * (1 - dr),
      capacitanceF: capacitanceF * (1 - dc),
      supplyV,
      leakageOhm: null,
      biasA: 0,
      dividerRatio: dividerRatioAt(-IC_TOLERANCE_FRACTION),
    },
    typical,
    typicalLonger: [
      { ...typical, resistanceOhm: resistanceOhm * (1 + dr) },
      { ...typical, capacitanceF: capacitanceF * (1 + dc) },
      { ...typical, dividerRatio: dividerRatioAt(IC_TOLERANCE_FRACTION) },
    ],
    longest: {
      resistanceOhm: resistanceOhm * (1 + dr),
      capacitanceF: capacitanceF * (1 + dc),
      supplyV,
      leakageOhm: leak.worstOhm,
      biasA: worstBiasA,
      dividerRatio: dividerRatioAt(IC_TOLERANCE_FRACTION),
    },
  }
}
