/** What a unit's evaluation was computed from, as one short text: the same inputs give the same, a change of any gives another. */
import { createHash } from 'node:crypto'
import type { PropertyInputs, UnitInputs } from './load-inputs.server.ts'

/** Of the whole stretch of days: the charge that one day leaves is the next one's beginning. */
export const inputsHash = (
  { site, fromDay, toDay }: Pick<PropertyInputs, 'site' | 'fromDay' | 'toDay'>,
  { hardware, wants }: UnitInputs,
): string =>
  createHash('sha256')
    .update(JSON.stringify([siteText(site), fromDay, toDay, hardware, wants]))
    .digest('base64url')

// A tariff is most of a site and the same for every unit, so its text is made once a site.
const texts = new WeakMap<PropertyInputs['site'], string>()

function siteText(site: PropertyInputs['site']): string {
  const known = texts.get(site)
  if (known !== undefined) return known
  const text = createHash('sha256').update(JSON.stringify(site)).digest('base64url')
  texts.set(site, text)
  return text
}
