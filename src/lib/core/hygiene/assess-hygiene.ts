/**
 * Growth range and pasteurisation from the coldest node of a simulated week. It shows which guidance is followed and calls nothing
 * compliant: biofilm, sediment and water below the lowest element are outside the model.
 */
import { MIN_PER_HOUR } from '../units.ts'
import { GROWTH_RANGE_C, GROWTH_RANGE_SOURCE, HYGIENE_POLICIES, holdWords, PASTEURISED, TEMPERATURE_MARGIN_K } from './policies.ts'
import type { HygieneDay, HygieneFinding, HygieneSamples } from './types.ts'

export function assessHygiene({ days, sampleMin, setPointC, policy }: HygieneSamples): HygieneFinding {
  const rule = HYGIENE_POLICIES[policy]
  const sources = [GROWTH_RANGE_SOURCE, rule.source]
  const coldestC = days.flatMap((day) => day.coldestC)
  const hottestC = days.flatMap((day) => day.hottestC)
  const sound = days.length > 0 && days.every((day) => day.coldestC.length > 0 && day.coldestC.length === day.hottestC.length)
  if (!sound || !(sampleMin > 0) || ![...coldestC, ...hottestC].every(Number.isFinite))
    return { status: 'not-known', reason: 'No temperatures have been computed for every day of this week.', sources }
  const growing = coldestC.filter((temperatureC) => temperatureC >= GROWTH_RANGE_C.from && temperatureC <= GROWTH_RANGE_C.to).length
  // A tank's layers pass through every temperature between its coldest and its hottest water.
  const someGrowing = coldestC.filter((lowC, index) => lowC <= GROWTH_RANGE_C.to && (hottestC[index] ?? lowC) >= GROWTH_RANGE_C.from).length
  const pasteurised = heldAt(coldestC, sampleMin, PASTEURISED)
  const lastPasteurised = pasteurised.lastIndexOf(true)
  const daysHeld = daysWith(heldAt(coldestC, sampleMin, rule), days)
  const keepsGuidance = daysHeld === days.length
  return {
    status: 'assessed',
    sincePasteurisedH: lastPasteurised < 0 ? null : ((coldestC.length - 1 - lastPasteurised) * sampleMin) / MIN_PER_HOUR,
    growthRangeFraction: growing / coldestC.length,
    growthRangeHours: (growing * sampleMin) / MIN_PER_HOUR,
    someWaterHours: (someGrowing * sampleMin) / MIN_PER_HOUR,
    daysHeld,
    dayCount: days.length,
    keepsGuidance,
    reason: keepsGuidance
      ? `The coldest part of the tank reaches ${holdWords(rule)} every day.`
      : setPointC < rule.temperatureC - TEMPERATURE_MARGIN_K
        ? `The thermostat is set to ${setPointC} °C, below the ${rule.temperatureC} °C of the guidance followed.`
        : `The coldest part of the tank reaches ${holdWords(rule)} on ${daysHeld} of ${days.length} days with these runs.`,
    sources,
  }
}

interface Hold {
  readonly temperatureC: number
  readonly holdMin: number
}

/**
 * For each sample whether a stretch of `holdMin` that ends there has been hot throughout, the samples taken as a circle. A stretch
 * of an hour takes one sample more than an hour has steps: the first and the last are an hour apart.
 */
function heldAt(coldestC: readonly number[], sampleMin: number, { temperatureC, holdMin }: Hold): readonly boolean[] {
  const needed = Math.ceil(holdMin / sampleMin) + 1
  const isHot = coldestC.map((one) => one >= temperatureC - TEMPERATURE_MARGIN_K)
  if (isHot.every(Boolean)) return isHot
  // Two rounds: the first counts in what the end of the cycle leaves to its beginning.
  let stretch = 0
  for (const hot of isHot) stretch = hot ? stretch + 1 : 0
  return isHot.map((hot) => {
    stretch = hot ? stretch + 1 : 0
    return stretch >= needed
  })
}

function daysWith(held: readonly boolean[], days: readonly HygieneDay[]): number {
  let from = 0
  return days.filter(({ coldestC }) => {
    const own = held.slice(from, from + coldestC.length)
    from += coldestC.length
    return own.includes(true)
  }).length
}
