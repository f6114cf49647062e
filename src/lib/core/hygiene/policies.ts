/** Published guidance on stored hot water, as data with its source; it differs and is not averaged: a property follows one. */
import type { HygienePolicyId } from './types.ts'

/** Stored water between these can grow Legionella (HSE, landlord guidance and HSG274). WHO 2007 says 25 to 45 °C; the wider range is kept. */
export const GROWTH_RANGE_C = { from: 20, to: 45 } as const
export const GROWTH_RANGE_SOURCE = 'HSE: Legionella grows between 20 and 45 °C'

export interface HygienePolicy {
  readonly name: string
  readonly temperatureC: number
  /** How long the whole tank must be there; 0 = reaching it is enough. */
  readonly holdMin: number
  readonly source: string
}

/**
 * Sources conflict. Daily hour of the whole content: guidance to ACoP L8 and, without the hour, BRANZ. Weekly cycles are a trade
 * habit without a regulator behind them and are not offered. CDC does not recommend thermal remediation and follows ASHRAE
 * Guideline 12. Against scalds CPSC and US DOE advise 49 °C, which does not control Legionella.
 */
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

/** A thermostat set to 60 °C reads as 60 within its accuracy (common practice, no source). */
export const TEMPERATURE_MARGIN_K = 0.5
