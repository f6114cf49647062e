/**
 * Growth range and pasteurisation from the coldest node of a simulated week (or a day that repeats). It shows which guidance is
 * followed and calls nothing compliant: biofilm, sediment and water below the lowest element are outside the model.
 */
import { MIN_PER_HOUR } from '../units.ts'
import { GROWTH_RANGE_C, GROWTH_RANGE_SOURCE, HYGIENE_POLICIES, TEMPERATURE_MARGIN_K } from './policies.ts'
import type { HygieneFinding, HygienePolicyId } from './types.ts'

export { GROWTH_RANGE_C, HYGIENE_POLICIES } from './policies.ts'

/** Regular samples of the coldest node, the last one now; taken as a cycle that repeats. */
export interface HygieneSamples {
  readonly coldestC: readonly number[]
  readonly sampleMin: number
  readonly setPointC: number
  readonly policy: HygienePolicyId
}

export function assessHygiene({ coldestC, sampleMin, setPointC, policy }: HygieneSamples): HygieneFinding {
  const rule = HYGIENE_POLICIES[policy]
  const neededC = rule.temperatureC - TEMPERATURE_MARGIN_K
  const growing = coldestC.filter((temperatureC) => temperatureC >= GROWTH_RANGE_C.from && temperatureC <= GROWTH_RANGE_C.to).length
  const hot = coldestC.map((temperatureC) => temperatureC >= neededC)
  const samplesAgo = samplesSinceHold(hot, Math.max(1, Math.ceil(rule.holdMin / sampleMin)))
  return {
    sincePasteurisedH: samplesAgo === null ? null : (samplesAgo * sampleMin) / MIN_PER_HOUR,
    growthRangeFraction: coldestC.length === 0 ? 0 : growing / coldestC.length,
    growthRangeHours: (growing * sampleMin) / MIN_PER_HOUR,
    reason:
      samplesAgo !== null
        ? `The coldest part of the tank reaches ${rule.temperatureC} °C${rule.holdMin > 0 ? ` for ${rule.holdMin} min` : ''}.`
        : setPointC < neededC
          ? `The thermostat is set to ${setPointC} °C, below the ${rule.temperatureC} °C of the guidance followed.`
          : `The coldest part of the tank does not reach ${rule.temperatureC} °C${rule.holdMin > 0 ? ` for ${rule.holdMin} min` : ''} with these runs.`,
    sources: [GROWTH_RANGE_SOURCE, rule.source],
  }
}

/** Samples since the end of the latest stretch that lasted `hold`, the samples taken as a circle; `null` when there is none. */
function samplesSinceHold(hot: readonly boolean[], hold: number): number | null {
  const count = hot.length
  if (count === 0 || hold > count) return null
  if (hot.every(Boolean)) return 0
  for (let ago = 0; ago < count; ago++) {
    let stretch = 0
    while (stretch < hold && hot[(((count - 1 - ago - stretch) % count) + count) % count]) stretch++
    if (stretch === hold) return ago
  }
  return null
}
