/** The overcurrent device: large enough for a continuous load, not too large to protect the heater and its conductor. */
import { actualVolumeL } from '../tank/model.ts'
import type { TankSpec } from '../tank/types.ts'
import { capacityOf } from './conductor-checks.ts'
import { ampere, EQUAL_WITHIN_A } from './figures.ts'
import type { RuleProfile } from './profiles/profile.ts'
import type { Recorded } from './recorded.ts'
import type { Check } from './types.ts'
import { check, notKnown, published, together } from './verdict.ts'

const ENTER_DEVICE = 'Read the rating on the overcurrent device and enter it, and the element’s power.'

/** What the profile counts a storage heater's current as. */
export function continuousA(loadA: number, tank: TankSpec, { continuous }: RuleProfile): number {
  return continuous.upToVolumeL !== null && actualVolumeL(tank) > continuous.upToVolumeL ? loadA : loadA * continuous.factor
}

export function smallestDevice({ circuit, loadA }: Recorded, tank: TankSpec, profile: RuleProfile): Check {
  const base = { id: 'breaker-minimum', title: 'Breaker large enough' }
  if (loadA === null) return notKnown(profile.continuous, { ...base, limit: 'load not known' }, ENTER_DEVICE)
  const neededA = continuousA(loadA, tank, profile)
  const sizeA = profile.deviceSizesA.find((size) => size >= neededA - EQUAL_WITHIN_A) ?? neededA
  const limit = `at least ${ampere(sizeA)} (${ampere(neededA)} continuous)`
  const { breakerA } = circuit
  if (breakerA === null) return notKnown(profile.continuous, { ...base, limit }, ENTER_DEVICE)
  const fails = breakerA < neededA - EQUAL_WITHIN_A
  return check(profile.continuous, {
    ...base,
    limit,
    figure: ampere(breakerA),
    verdict: fails ? 'fail' : 'pass',
    reason: fails
      ? `A ${ampere(breakerA)} device is too small for this continuous load: it may trip or overheat. Fit ${ampere(sizeA)} if the conductor allows it.`
      : 'The device carries the load.',
  })
}

/** A marked maximum on the nameplate comes first; without one the profile's rule decides. */
export function largestDevice(one: Recorded, profile: RuleProfile): Check {
  const { breakerA, markedMaxBreakerA } = one.circuit
  const base = { id: 'breaker-maximum', title: 'Breaker not too large' }
  const rule = largestOf(one, profile)
  const marked = published('Largest device marked on the heater', 'its nameplate')
  const limit = markedMaxBreakerA === null ? rule.limit : profile.largestDevice.kind === 'of-load' ? marked : together([marked, rule.limit])
  const capA =
    markedMaxBreakerA === null
      ? rule.capA
      : profile.largestDevice.kind === 'of-load'
        ? markedMaxBreakerA
        : Math.min(markedMaxBreakerA, rule.capA ?? markedMaxBreakerA)
  const sure = profile.largestDevice.kind === 'of-load' || rule.sure
  if (capA === null || breakerA === null) {
    const said = capA === null ? 'load or conductor not known' : `at most ${ampere(capA)}`
    return notKnown(limit, { ...base, limit: said }, ENTER_DEVICE)
  }
  const fails = breakerA > capA + EQUAL_WITHIN_A
  return check(limit, {
    ...base,
    limit: `at most ${ampere(capA)}`,
    figure: ampere(breakerA),
    verdict: fails ? 'fail' : sure ? 'pass' : 'not-known',
    reason: fails
      ? 'The device is too large to protect what is behind it. A marked maximum on the nameplate comes first.'
      : sure
        ? 'Within the largest size for this circuit.'
        : 'The conductor’s own capacity is not fully known; record its size, its air and what lies beside it.',
  })
}

function largestOf(one: Recorded, profile: RuleProfile) {
  const rule = profile.largestDevice
  if (rule.kind === 'of-conductor') {
    const capacity = capacityOf(one.circuit, profile)
    return capacity
      ? { capA: capacity.correctedA, sure: capacity.sure, limit: together([rule, capacity.limit]) }
      : { capA: null, sure: false, limit: rule }
  }
  const { loadA } = one
  if (loadA === null) return { capA: null, sure: false, limit: rule }
  const sizeA = profile.deviceSizesA.find((size) => size >= rule.factor * loadA - EQUAL_WITHIN_A) ?? rule.factor * loadA
  return { capA: loadA <= rule.smallLoadA ? rule.smallDeviceA : sizeA, sure: true, limit: rule }
}
