/** The guidance on stored water that a property follows: what is usual in a country where nobody has chosen, and the choices in words. */
import { HYGIENE_POLICIES } from '#lib/core/hygiene/policies.ts'
import type { HygienePolicyId } from '#lib/core/hygiene/types.ts'

export const HYGIENE_POLICY_IDS = ['store-60-daily-hour', 'store-60', 'scald-49'] as const satisfies readonly HygienePolicyId[]
export const USUAL_IN_COUNTRY = 'country'

/**
 * The United Kingdom has guidance of its own, the daily hour to ACoP L8. Canada's plumbing code, BRANZ and New South Wales ask for
 * 60 °C. For the United States CDC and ASHRAE (60 °C) stand against CPSC and DOE (49 °C): 60 °C with a mixing valve answers both
 * hazards. Where no national guidance was read, 60 °C is the one that most of the published ones share.
 */
export const usualPolicy = (country: string): HygienePolicyId => (country === 'GB' ? 'store-60-daily-hour' : 'store-60')

interface Choice {
  readonly value: string
  readonly label: string
}

export const hygieneChoices = (): readonly Choice[] =>
  HYGIENE_POLICY_IDS.map((value) => ({ value, label: `${HYGIENE_POLICIES[value].name} (${HYGIENE_POLICIES[value].whose})` }))

/** For a property that is new: its country is not chosen yet, so it may be left to that. */
export const hygieneChoicesWithUsual = (): readonly Choice[] => [
  { value: USUAL_IN_COUNTRY, label: 'What is usual in the country' },
  ...hygieneChoices(),
]

export const USUAL_WORDS = `Usual is in the United Kingdom: ${HYGIENE_POLICIES['store-60-daily-hour'].name.toLowerCase()} (HSE); elsewhere: ${HYGIENE_POLICIES['store-60'].name.toLowerCase()}. `
