/** Growth range and pasteurisation from a settled day's curve. It shows which guidance is followed and calls nothing compliant. */
import type { HygieneFinding, HygienePolicyId } from './types.ts'

/** Stored water between these can grow Legionella (HSE, landlord guidance and HSG274). */
export const GROWTH_RANGE_C = { from: 20, to: 45 } as const

export interface HygienePolicy {
  readonly name: string
  readonly temperatureC: number
  readonly holdMin: number
  readonly source: string
}
/** Published guidance differs and is not averaged: a property follows one. */
export const HYGIENE_POLICIES: Readonly<Record<HygienePolicyId, HygienePolicy>> = {
  'store-60-daily-hour': {
    name: 'Whole tank at 60 °C for an hour each day',
    temperatureC: 60,
    holdMin: 60,
    source: 'HSE technical guidance to ACoP L8 (cited by WRAS)',
  },
  'store-60': { name: 'Stored at 60 °C', temperatureC: 60, holdMin: 0, source: 'HSE HSG274 part 2; Canadian NPC 2.6.1.12' },
  'scald-49': {
    name: '49 °C against scalds',
    temperatureC: 49,
    holdMin: 0,
    source: 'CPSC and US DOE advice of 120 °F; does not control Legionella',
  },
}
/** A set point of 60 °C reads as 60 within the thermostat's accuracy. */
const TEMPERATURE_MARGIN_K = 0.5

export interface HygieneDay {
  readonly coldestC: readonly number[]
  readonly sampleMin: number
  readonly setPointC: number
  readonly policy: HygienePolicyId
}

/** The day is taken as repeating itself, as the settled state does. */
export function assessHygiene({ coldestC, sampleMin, setPointC, policy }: HygieneDay): HygieneFinding {
  const rule = HYGIENE_POLICIES[policy]
  const growing = coldestC.filter((temperatureC) => temperatureC >= GROWTH_RANGE_C.from && temperatureC <= GROWTH_RANGE_C.to).length
  const hot = coldestC.map((temperatureC) => temperatureC >= rule.temperatureC - TEMPERATURE_MARGIN_K)
  const longestMin = longestStretch(hot) * sampleMin
  const lastHot = hot.lastIndexOf(true)
  const reached = lastHot >= 0 && longestMin >= rule.holdMin
  const forbidden = setPointC < rule.temperatureC - TEMPERATURE_MARGIN_K
  return {
    sincePasteurisedH: reached ? ((coldestC.length - 1 - lastHot) * sampleMin) / 60 : null,
    growthRangeFraction: coldestC.length === 0 ? 0 : growing / coldestC.length,
    growthRangeHours: (growing * sampleMin) / 60,
    reason: reached
      ? `The coldest part of the tank reaches ${rule.temperatureC} °C every day.`
      : forbidden
        ? `The thermostat is set to ${setPointC} °C, below the ${rule.temperatureC} °C of the guidance followed.`
        : `The coldest part of the tank does not reach ${rule.temperatureC} °C for ${rule.holdMin} min with these runs.`,
    sources: ['HSE: Legionella grows between 20 and 45 °C', rule.source],
  }
}

/** Longest run of `true`, the day taken as a circle. */
function longestStretch(flags: readonly boolean[]): number {
  if (flags.every(Boolean)) return flags.length
  let longest = 0
  let current = 0
  for (const flag of [...flags, ...flags]) {
    current = flag ? current + 1 : 0
    longest = Math.max(longest, current)
  }
  return longest
}
