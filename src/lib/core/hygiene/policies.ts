/** Published guidance on stored hot water, as data with its source; it differs and is not averaged: a property follows one. */
import type { HygienePolicyId } from './types.ts'

/** Stored water between these can grow Legionella (HSE, landlord guidance and HSG274). WHO 2007 says 25 to 45 °C; the wider range is kept. */
export const GROWTH_RANGE_C = { from: 20, to: 45 } as const
export const GROWTH_RANGE_SOURCE = 'HSE: Legionella grows between 20 and 45 °C'

/** The whole content for an hour: technical guidance to ACoP L8, cited by WRAS, which calls a brief rise to 60 °C not effective. */
export const PASTEURISED = { temperatureC: 60, holdMin: 60, source: 'Technical guidance to HSE ACoP L8, cited by WRAS' } as const

export interface HygienePolicy {
  readonly name: string
  /** Whose guidance it is, for choosing. */
  readonly whose: string
  readonly temperatureC: number
  /** How long the coldest water must be there on each day; 0 = reaching it is enough. */
  readonly holdMin: number
  readonly source: string
  readonly whomToAsk: string
}

/**
 * Sources conflict. The daily hour of the whole content is guidance to ACoP L8; BRANZ asks for 60 °C daily without the hour. Weekly
 * cycles are a trade habit without a regulator behind them and are not offered. CDC does not recommend thermal remediation and
 * follows ASHRAE Guideline 12. Against scalds CPSC and US DOE advise 49 °C, which does not control Legionella: a property that
 * follows it is told so, and 60 °C with a mixing valve answers both hazards.
 */
export const HYGIENE_POLICIES: Readonly<Record<HygienePolicyId, HygienePolicy>> = {
  'store-60-daily-hour': {
    name: 'Whole tank at 60 °C for an hour each day',
    whose: 'HSE, United Kingdom',
    temperatureC: 60,
    holdMin: 60,
    source: 'Technical guidance to HSE ACoP L8, cited by WRAS',
    whomToAsk: 'the person responsible for Legionella under HSE ACoP L8: a landlord must assess the risk or appoint who can',
  },
  'store-60': {
    name: 'Whole tank at 60 °C once a day',
    whose: 'HSE HSG274, Canada’s plumbing code, New Zealand’s BRANZ, New South Wales',
    temperatureC: 60,
    holdMin: 0,
    source: 'HSE HSG274 part 2 and NPC 2.6.1.12 (stored at 60 °C); BRANZ Level (at least 60 °C daily)',
    whomToAsk: 'whoever assesses water risk for this building, or the local health department',
  },
  'scald-49': {
    name: '49 °C against scalds',
    whose: 'CPSC and US Department of Energy; it does not control Legionella',
    temperatureC: 49,
    holdMin: 0,
    source: 'CPSC and US DOE advice of 120 °F; does not control Legionella',
    whomToAsk: 'whoever assesses water risk for this building; DOE keeps 60 °C where somebody’s immune system is weak',
  },
}

/** Guidance is written in whole degrees: 59.5 °C reads as 60 (common practice, no source). A thermostat set to 60 °C then counts. */
export const TEMPERATURE_MARGIN_K = 0.5

export const holdWords = ({ temperatureC, holdMin }: Pick<HygienePolicy, 'temperatureC' | 'holdMin'>): string =>
  holdMin > 0 ? `${temperatureC} °C for ${holdMin} min` : `${temperatureC} °C`
