/** The load itself on what switches it: the element on this supply, the contact, the poles. */
import { ampere } from './figures.ts'
import type { Limit, RuleProfile } from './profiles/profile.ts'
import type { Recorded } from './recorded.ts'
import type { Check, Verdict } from './types.ts'
import { check, MAINS_CAUTION, notKnown, published } from './verdict.ts'

export const loadChecks = (one: Recorded, profile: RuleProfile): readonly Check[] => [
  elementVoltage(one, profile),
  contact(one),
  poles(one, profile),
]

/** A 208 V element on 240 V takes 133 % of its power; +10 % of voltage is 121 % and the top of a 230 V supply. */
const OVERLOAD_FROM = 1.1

/**
 * At or below its rated voltage an element is safe and slower: a maker's down-rating statement says so. Above it the margins that
 * are known (+10 % of 230 V, +5 % of power in IEC 60335-1) are from memory, so nothing there passes.
 */
function elementVoltage({ circuit, elements }: Recorded, profile: RuleProfile): Check {
  const lowestV = elements.length > 0 ? Math.min(...elements.map((one) => one.ratedVoltageV)) : null
  const above = circuit.supplyVoltageV !== null && lowestV !== null && circuit.supplyVoltageV > lowestV
  const limit: Limit = above
    ? { clause: 'P = P_rated (V / V_rated)²; margin above the rated voltage', edition: 'from memory', confirm: true }
    : published('P = P_rated (V / V_rated)²', 'a heater maker’s statement of down-rating')
  const base = { id: 'element-voltage', title: 'Element for this supply', limit: `at most ${lowestV ?? 'the rated'} V, the rated voltage` }
  if (circuit.supplyVoltageV === null || lowestV === null)
    return notKnown(limit, base, 'Enter the supply voltage and the power and voltage on the element’s label.')
  const ratio = circuit.supplyVoltageV / lowestV
  const verdict: Verdict = ratio > OVERLOAD_FROM ? 'fail' : above || ratio < profile.mains.lowFactor ? 'attention' : 'pass'
  return check(limit, {
    ...base,
    verdict,
    figure: `${circuit.supplyVoltageV} V on an element rated ${lowestV} V: ${Math.round(ratio ** 2 * 100)} % of rated power`,
    reason:
      verdict === 'fail'
        ? 'The element is overloaded: fit one rated for this supply.'
        : above
          ? 'It takes more than its rated power: look whether its label allows this voltage.'
          : verdict === 'attention'
            ? 'It heats more slowly than its label says; the computation uses the real power.'
            : 'The element suits the supply.',
  })
}

/** Above this share of a contact's rating a warning is given: common practice, no source. */
const CONTACT_WARNING_FRACTION = 0.8

/** Only the resistive or AC-1 column counts: general use, AC-3 and AC-7a are other tests and cannot be converted. */
function contact({ circuit, loadA }: Recorded): Check {
  const limit = published('Resistive or AC-1 rating of the contact, IEC 60947-4-1; warning at 80 %', 'warning: common practice, no source')
  const { contactRatingA, contactRatingClass } = circuit
  const base = {
    id: 'contact-rating',
    title: 'Contact of the timer',
    limit: contactRatingA === null ? 'rating not known' : `${ampere(contactRatingA)} ${contactRatingClass ?? 'of a class not known'}`,
    caution: `${MAINS_CAUTION} A normally closed contact may carry far less (3 A on a published 30 A relay); a welded one stays on.`,
  }
  if (contactRatingA === null || contactRatingClass === null || loadA === null)
    return notKnown(limit, base, 'Read the resistive or AC-1 rating on the relay or contactor and enter it, and the element’s power.')
  if (contactRatingClass === 'ac-3' || contactRatingClass === 'general-use') {
    return check(limit, {
      ...base,
      figure: ampere(loadA),
      verdict: 'attention',
      reason: 'This is not the resistive rating; ratings of different tests cannot be converted. Find the resistive or AC-1 figure.',
    })
  }
  const fails = loadA > contactRatingA
  const near = loadA > CONTACT_WARNING_FRACTION * contactRatingA
  return check(limit, {
    ...base,
    figure: ampere(loadA),
    verdict: fails ? 'fail' : near ? 'attention' : 'pass',
    reason: fails
      ? 'The load is above the contact’s rating: it can weld closed.'
      : near
        ? 'Above 80 % of the rating: expect a shorter life.'
        : 'The contact carries the load.',
  })
}

function poles({ circuit }: Recorded, profile: RuleProfile): Check {
  const { supplyVoltageV, polesSwitched } = circuit
  const needed = supplyVoltageV === null ? undefined : profile.poles.rows.find((row) => supplyVoltageV <= row.upToV)?.poles
  const base = { id: 'poles', title: 'Poles switched', limit: needed === undefined ? 'supply not known' : `at least ${needed}` }
  if (polesSwitched === null || needed === undefined)
    return notKnown(profile.poles, base, 'Look whether the timer opens every live conductor.')
  const fails = polesSwitched < needed
  return check(profile.poles, {
    ...base,
    figure: `${polesSwitched}`,
    verdict: fails ? 'fail' : 'pass',
    reason: fails ? 'With one pole open the element stays live when it is off.' : 'Every live conductor is opened.',
  })
}
