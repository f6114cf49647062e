/** What a one-shot's parts come to: nominal, typical and guaranteed minutes, whether it always ends, and the sentences that say why. */
import { formatOhm } from './describe.ts'
import { IC_FAMILIES, IC_TOLERANCE_FRACTION } from './ic-families.ts'
import { publishedMaxOhm } from './max-resistance.ts'
import { type RcCircuit, rcCorners, rcDuration, type RcOutcome } from './one-shot-rc.ts'
import type { DurationOutcome, DurationRange, OneShotRcController } from './types.ts'

const S_PER_MIN = 60
const minutesOf = (circuit: RcCircuit): number | null => {
  const outcome = rcDuration(circuit)
  return outcome.status === 'ends' ? outcome.durationS / S_PER_MIN : null
}

/** The guaranteed range alone; a search over thousands of parts asks for nothing else. */
export function guaranteedRange(timer: OneShotRcController): DurationRange {
  const { shortest, longest } = rcCorners(timer)
  return { minMin: minutesOf(shortest) ?? 0, maxMin: minutesOf(longest) }
}

export function rcOutcome(timer: OneShotRcController): DurationOutcome {
  const corners = rcCorners(timer)
  const nominalMin = (timer.resistanceOhm * timer.capacitanceF * Math.log(3)) / S_PER_MIN
  const typicalMin = minutesOf(corners.typical)
  const longest = rcDuration(corners.longest)
  const shortestMin = minutesOf(corners.shortest) ?? 0
  // Tolerances combine by root sum of squares. Leakage and bias are no tolerance: they lengthen only, so they move the upper end alone.
  const rss = Math.hypot(timer.resistanceToleranceFraction, timer.capacitanceToleranceFraction, IC_TOLERANCE_FRACTION)
  return {
    source: 'computed',
    nominalMin,
    typical: {
      // With large tolerances the root sum of squares would pass what the parts can be at all.
      minMin: Math.max(nominalMin * (1 - rss), shortestMin),
      maxMin: typicalMin === null ? null : longerMin(typicalMin, corners.typicalLonger),
    },
    guaranteed: { minMin: shortestMin, maxMin: longest.status === 'ends' ? longest.durationS / S_PER_MIN : null },
    timesOut: typicalMin === null ? 'never' : longest.status === 'never' ? 'typically' : 'always',
    reasons: reasonsOf(timer, { nominalMin, typicalMin, longest }),
  }
}

/** Near the stall a part's tolerance weighs far more than its percentage: each is put through the law. */
function longerMin(typicalMin: number, longer: readonly RcCircuit[]): number | null {
  const increases: number[] = []
  for (const circuit of longer) {
    const durationMin = minutesOf(circuit)
    if (durationMin === null) return null
    increases.push(durationMin - typicalMin)
  }
  return typicalMin + Math.hypot(...increases)
}

interface Found {
  readonly nominalMin: number
  readonly typicalMin: number | null
  readonly longest: RcOutcome
}

function reasonsOf(timer: OneShotRcController, { nominalMin, typicalMin, longest }: Found): readonly string[] {
  const highestOhm = publishedMaxOhm(timer)
  return [
    `R × C × ln 3 gives ${nominalMin.toFixed(1)} min.`,
    typicalMin === null
      ? 'With typical leakage and bias it never reaches its threshold.'
      : `With typical leakage and bias ${typicalMin.toFixed(1)} min.`,
    ...(longest.status === 'never'
      ? [
          `At the published limits of leakage and bias the capacitor settles at ${longest.settlesAtV.toFixed(2)} V, below the ${longest.thresholdV.toFixed(2)} V threshold: it may never time out.`,
        ]
      : []),
    ...(timer.resistanceOhm > highestOhm * (1 + 1e-9)
      ? [
          `The resistor is above ${formatOhm(highestOhm)}, the most its makers’ rule allows at ${timer.supplyV} V; the chip may take ${(IC_FAMILIES[timer.icFamily].worstBiasA * 1e9).toFixed(0)} nA.`,
        ]
      : []),
  ]
}
