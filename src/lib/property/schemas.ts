/** What may be entered about a property: one schema for form, import and verb. */
import { z } from 'zod'
import type { InletClimate } from '#lib/core/tank/types.ts'
import { slugField } from '#lib/organisation/schemas.ts'
import { HYGIENE_POLICY_IDS, USUAL_IN_COUNTRY } from './hygiene-choice.ts'

export const COUNTRIES = [
  { code: 'US', name: 'United States', currency: 'USD', profile: 'us-nec-2023', voltageV: 208 },
  { code: 'CA', name: 'Canada', currency: 'CAD', profile: 'us-nec-2023', voltageV: 208 },
  { code: 'GB', name: 'United Kingdom', currency: 'GBP', profile: 'gb-bs7671', voltageV: 230 },
  { code: 'IE', name: 'Ireland', currency: 'EUR', profile: 'iec-60364', voltageV: 230 },
  { code: 'DE', name: 'Germany', currency: 'EUR', profile: 'iec-60364', voltageV: 230 },
  { code: 'FR', name: 'France', currency: 'EUR', profile: 'iec-60364', voltageV: 230 },
  { code: 'AU', name: 'Australia', currency: 'AUD', profile: 'iec-60364', voltageV: 230 },
  { code: 'NZ', name: 'New Zealand', currency: 'NZD', profile: 'iec-60364', voltageV: 230 },
  { code: 'ZA', name: 'South Africa', currency: 'ZAR', profile: 'iec-60364', voltageV: 230 },
] as const

const number = (what: string, min: number, max: number, unit: string) =>
  z.coerce
    .number({ error: `${what} must be a number in ${unit}.` })
    .min(min, `${what} is below ${min} ${unit}.`)
    .max(max, `${what} is above ${max} ${unit}.`)

const isZone = (zone: string): boolean => {
  try {
    new Intl.DateTimeFormat('en', { timeZone: zone })
    return true
  } catch {
    return false
  }
}

export const climateSchema = z.discriminatedUnion('kind', [
  z.strictObject({
    kind: z.literal('climate'),
    meanAirC: z.number().min(-20).max(35),
    swingAirK: z.number().min(0).max(60),
    hemisphere: z.enum(['north', 'south']),
  }),
  z.strictObject({ kind: z.literal('months'), inletC: z.array(z.number().min(0).max(40)).length(12) }),
]) satisfies z.ZodType<InletClimate>

/** As a form sends it: flat fields, numbers as text. */
export const propertySchema = z.object({
  name: z.string().trim().min(2, 'Enter the name of the building.').max(100),
  slug: slugField,
  address: z.string().trim().max(200),
  zone: z.string().refine(isZone, 'Choose a time zone like Europe/London.'),
  country: z.enum(
    COUNTRIES.map((country) => country.code),
    { error: 'Choose a country.' },
  ),
  ruleProfile: z.enum(['us-nec-2023', 'gb-bs7671', 'iec-60364'], { error: 'Choose a rule profile.' }),
  hygienePolicy: z.enum([...HYGIENE_POLICY_IDS, USUAL_IN_COUNTRY], { error: 'Choose whose guidance on stored water to follow.' }),
  supplyVoltageV: number('Supply voltage', 100, 480, 'V'),
  phases: z.coerce.number().refine((phases): phases is 1 | 3 => phases === 1 || phases === 3, 'Phases are 1 or 3.'),
  serviceRatingA: number('Service rating', 10, 6_000, 'A'),
  baseLoadW: number('Base load', 0, 5_000_000, 'W'),
  meanAirC: number('Mean air temperature', -20, 35, '°C'),
  swingAirK: number('Difference of the warmest and coldest month', 0, 60, 'K'),
  hemisphere: z.enum(['north', 'south']),
})
export type PropertyInput = z.infer<typeof propertySchema>
