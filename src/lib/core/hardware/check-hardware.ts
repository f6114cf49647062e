/**
 * Screens what is installed in a unit against a rule profile. Every check says figure, limit and clause; what is not known is
 * "not known", never a pass; a limit from memory never decides a pass alone. It screens; it does not certify.
 */
import { actualPowerW, actualVolumeL } from '../tank/model.ts'
import { conductor, voltageDrop } from './conductor-checks.ts'
import { controlChecks } from './control-checks.ts'
import { ampere } from './figures.ts'
import { gbBs7671 } from './profiles/gb-bs7671.ts'
import { iec60364 } from './profiles/iec-60364.ts'
import type { RuleProfile } from './profiles/profile.ts'
import { usNec2023 } from './profiles/us-nec-2023.ts'
import { safetyChecks } from './safety-checks.ts'
import { check } from './verdict.ts'
import type { Check, Installation, ProfileId, Verdict } from './types.ts'

export const PROFILES: Readonly<Record<ProfileId, RuleProfile>> = { 'us-nec-2023': usNec2023, 'gb-bs7671': gbBs7671, 'iec-60364': iec60364 }

/** Above this share of a contact's rating a warning is given: common practice, no source. */
const CONTACT_WARNING_FRACTION = 0.8

export function checkHardware(installation: Installation, profileId: ProfileId): readonly Check[] {
  const profile = PROFILES[profileId]
  const loadA = loadCurrentA(installation)
  return [
    elementVoltage(installation),
    contact(installation, loadA),
    smallestDevice({ installation, profile, loadA }),
    ...(profile.largestDevice ? [largestDevice({ installation, profile, loadA })] : []),
    conductor({ installation, profile, loadA, continuousA: continuousA({ installation, profile, loadA }) }),
    voltageDrop({ installation, profile, loadA }),
    poles(installation, profile),
    ...safetyChecks(installation, profile),
    ...controlChecks(installation),
  ]
}

/** Current of the largest element at the voltage that is really there; upper and lower never run together. */
export function loadCurrentA({ load, circuit }: Installation): number {
  const { upperElement, lowerElement } = load.tank
  const powersW = [upperElement, lowerElement].map((element) => (element ? actualPowerW(element, circuit.supplyVoltageV) : 0))
  return Math.max(...powersW) / circuit.supplyVoltageV
}

interface Case {
  readonly installation: Installation
  readonly profile: RuleProfile
  readonly loadA: number
}

function elementVoltage({ load, circuit }: Installation): Check {
  const rated = [load.tank.upperElement, load.tank.lowerElement].flatMap((element) => (element ? [element.ratedVoltageV] : []))
  const lowestV = Math.min(...rated)
  const ratio = circuit.supplyVoltageV / lowestV
  // 110 % covers the top of common supply tolerances (230 V +10 %); a 208 V element on 240 V is 115 % and 133 % of its power.
  const verdict: Verdict = ratio > 1.1 ? 'fail' : ratio < 0.94 ? 'attention' : 'pass'
  return check(
    { clause: 'P = P_rated (V / V_rated)²; maker’s down-rating statement', confirm: false },
    {
      id: 'element-voltage',
      title: 'Element for this supply',
      verdict,
      figure: `${circuit.supplyVoltageV} V on an element rated ${lowestV} V: ${Math.round(ratio ** 2 * 100)} % of rated power`,
      limit: '94 to 110 % of rated voltage',
      reason:
        verdict === 'fail'
          ? 'The element is overloaded: fit one rated for this supply.'
          : verdict === 'attention'
            ? 'It heats more slowly than its label says; the computation uses the real power.'
            : 'The element suits the supply.',
    },
  )
}

function contact({ circuit }: Installation, loadA: number): Check {
  const limit = {
    clause: 'Resistive or AC-1 rating of the contact (IEC 60947-4-1); 80 % warning is common practice, no source',
    confirm: false,
  }
  const base = { id: 'contact-rating', title: 'Contact of the timer', figure: ampere(loadA) }
  if (circuit.contactRatingA === null || circuit.contactRatingClass === null) {
    return check(limit, {
      ...base,
      verdict: 'not-known',
      limit: 'rating not known',
      reason: 'Read the resistive or AC-1 rating on the relay or contactor and enter it.',
    })
  }
  if (circuit.contactRatingClass === 'ac-3' || circuit.contactRatingClass === 'general-use') {
    return check(limit, {
      ...base,
      verdict: 'attention',
      limit: `${ampere(circuit.contactRatingA)} ${circuit.contactRatingClass}`,
      reason: 'This is not the resistive rating; ratings of different tests cannot be converted. Find the resistive or AC-1 figure.',
    })
  }
  const verdict: Verdict =
    loadA > circuit.contactRatingA ? 'fail' : loadA > CONTACT_WARNING_FRACTION * circuit.contactRatingA ? 'attention' : 'pass'
  const reason = {
    fail: 'The load is above the contact’s rating: it can weld closed.',
    attention: 'Above 80 % of the rating: expect a shorter life.',
    pass: 'The contact carries the load.',
    'not-known': '',
  }[verdict]
  return check(limit, { ...base, verdict, limit: `${ampere(circuit.contactRatingA)} ${circuit.contactRatingClass}`, reason })
}

function continuousA({ installation, profile, loadA }: Case): number {
  const { upToVolumeL, factor } = profile.continuous
  return upToVolumeL !== null && actualVolumeL(installation.load.tank) > upToVolumeL ? loadA : loadA * factor
}

function smallestDevice(one: Case): Check {
  const { installation, profile } = one
  const neededA = continuousA(one)
  const sizeA = profile.deviceSizesA.find((size) => size >= neededA - 1e-9) ?? neededA
  const { breakerA } = installation.circuit
  const base = { id: 'breaker-minimum', title: 'Breaker large enough', limit: `at least ${ampere(sizeA)} (${ampere(neededA)} continuous)` }
  if (breakerA === null)
    return check(profile.continuous, {
      ...base,
      verdict: 'not-known',
      figure: 'not known',
      reason: 'Read the rating on the overcurrent device and enter it.',
    })
  const fails = breakerA < neededA - 1e-9
  return check(profile.continuous, {
    ...base,
    figure: ampere(breakerA),
    verdict: fails ? 'fail' : 'pass',
    reason: fails
      ? `A ${ampere(breakerA)} device is too small for this continuous load: it may trip or overheat. Fit ${ampere(sizeA)} if the conductor allows it.`
      : 'The device carries the load.',
  })
}

function largestDevice({ installation, profile, loadA }: Case): Check {
  const rule = profile.largestDevice ?? { factor: 1, smallLoadA: 0, smallDeviceA: 0, clause: '', confirm: true }
  const capA =
    loadA <= rule.smallLoadA
      ? rule.smallDeviceA
      : (profile.deviceSizesA.find((size) => size >= rule.factor * loadA - 1e-9) ?? rule.factor * loadA)
  const { breakerA } = installation.circuit
  const base = { id: 'breaker-maximum', title: 'Breaker not too large', limit: `at most ${ampere(capA)}` }
  if (breakerA === null)
    return check(rule, {
      ...base,
      verdict: 'not-known',
      figure: 'not known',
      reason: 'Read the rating on the overcurrent device and enter it.',
    })
  const fails = breakerA > capA + 1e-9
  return check(rule, {
    ...base,
    figure: ampere(breakerA),
    verdict: fails ? 'fail' : 'pass',
    reason: fails
      ? 'The device is too large to protect this appliance. A marked maximum on the nameplate comes first.'
      : 'Within the largest size for this appliance.',
  })
}

function poles({ circuit }: Installation, profile: RuleProfile): Check {
  const base = { id: 'poles', title: 'Poles switched', limit: `${profile.polesToSwitch.poles}` }
  if (circuit.polesSwitched === null)
    return check(profile.polesToSwitch, {
      ...base,
      verdict: 'not-known',
      figure: 'not known',
      reason: 'Look whether the timer opens every live conductor.',
    })
  const fails = circuit.polesSwitched < profile.polesToSwitch.poles
  return check(profile.polesToSwitch, {
    ...base,
    figure: `${circuit.polesSwitched}`,
    verdict: fails ? 'fail' : 'pass',
    reason: fails ? 'With one pole open the element stays live when it is off.' : 'Every live conductor is opened.',
  })
}
