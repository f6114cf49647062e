/** Whose guidance on stored water a property follows: chosen, or what is usual in its country; kept as chosen from then on. */
import { beforeEach, describe, expect, it } from 'vitest'
import type { OrgDb } from '#db/org-db.ts'
import { findProperty } from '#db/queries/property.ts'
import { HYGIENE_POLICIES } from '#lib/core/hygiene/policies.ts'
import { hygieneChoices, hygieneChoicesWithUsual, USUAL_IN_COUNTRY } from '#lib/property/hygiene-choice.ts'
import { saveProperty } from '#lib/property/save-property.server.ts'
import { COUNTRIES } from '#lib/property/schemas.ts'
import { freshDatabase } from '../../support/database.ts'
import { makeLandlord, NOW_MS } from '../../support/factories.ts'

let db: OrgDb
beforeEach(async () => {
  db = await makeLandlord(await freshDatabase())
})
const input = (patch: Record<string, string>) => ({
  name: 'Tannery Row',
  slug: 'tannery-row',
  address: '',
  zone: 'Europe/London',
  country: 'GB',
  ruleProfile: 'gb-bs7671',
  hygienePolicy: USUAL_IN_COUNTRY,
  supplyVoltageV: '230',
  phases: '1',
  serviceRatingA: '100',
  baseLoadW: '2000',
  meanAirC: '10',
  swingAirK: '14',
  hemisphere: 'north',
  ...patch,
})
const policyOf = async (patch: Record<string, string>) => {
  const { id } = await saveProperty(db, { propertyId: null, input: input(patch), nowMs: NOW_MS })
  return (await findProperty(db, id))?.hygienePolicy
}

describe('saveProperty', () => {
  // HSE's daily hour (guidance to ACoP L8) in the United Kingdom; 60 °C in Canada (NPC 2.6.1.12) and New Zealand (BRANZ).
  it.each([
    ['GB', 'store-60-daily-hour'],
    ['CA', 'store-60'],
    ['NZ', 'store-60'],
  ])('follows in %s the guidance that is usual there where nobody chose: %s', async (country, policy) => {
    expect(await policyOf({ country })).toBe(policy)
  })
  it('follows the guidance that was chosen, in any country', async () => {
    expect(await policyOf({ hygienePolicy: 'scald-49' })).toBe('scald-49')
  })
  it('keeps a concrete guidance when the country changes later', async () => {
    const { id } = await saveProperty(db, { propertyId: null, input: input({}), nowMs: NOW_MS })
    await saveProperty(db, { propertyId: id, input: input({ country: 'CA', hygienePolicy: 'store-60-daily-hour' }), nowMs: NOW_MS })
    expect((await findProperty(db, id))?.hygienePolicy).toBe('store-60-daily-hour')
  })
  it('refuses guidance that nobody published', async () => {
    await expect(policyOf({ hygienePolicy: 'weekly' })).rejects.toMatchObject({ code: 'invalid' })
  })
  it('has some guidance usual in every country, never one that leaves Legionella uncontrolled', async () => {
    for (const [index, { code }] of COUNTRIES.entries()) {
      const policy = await policyOf({ country: code, slug: `house-${index}` })
      expect(HYGIENE_POLICIES[policy!].temperatureC, code).toBe(60)
    }
  })
})

describe('the choices', () => {
  it('say whose guidance each is', () => {
    for (const { value, label } of hygieneChoices()) expect(label).toContain(HYGIENE_POLICIES[value as keyof typeof HYGIENE_POLICIES].whose)
    expect(hygieneChoicesWithUsual().map(({ value }) => value)).toEqual([USUAL_IN_COUNTRY, ...Object.keys(HYGIENE_POLICIES)])
  })
})
