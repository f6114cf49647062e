/** The low-voltage supply of a home-built timer: transformer, reservoir, primary fuse, and its separation is a check of its own. */
import type { Controller } from '../controller/types.ts'
import { coilChecks } from './coil-checks.ts'
import { type Supply, supplyOf, TIMER_SUPPLY_A } from './control-case.ts'
import { AC_PER_DC, secondaryA } from './control-supply.ts'
import { driverChecks } from './driver-checks.ts'
import { ampere, EQUAL_WITHIN_A, volt } from './figures.ts'
import type { Limit, RuleProfile } from './profiles/profile.ts'
import type { Recorded } from './recorded.ts'
import type { Check } from './types.ts'
import { check, notKnown, published } from './verdict.ts'

/** Capacitor over its highest no-load peak: a rule of thumb, common practice, no source. It only makes the check stricter. */
const RESERVOIR_MARGIN = 1.5
/** A primary fuse between these times the transformer's full-load current; four times protects nothing. Common practice, no source. */
const FUSE_TIMES = { least: 1.5, most: 2, hopeless: 4 } as const
/** IEC 60127 rated currents (R10), A: from 1 A read in a maker's list, below it from memory. UL 248-14 ratings mean other currents. */
const FUSES_A = [
  0.032, 0.04, 0.05, 0.063, 0.08, 0.1, 0.125, 0.16, 0.2, 0.25, 0.315, 0.4, 0.5, 0.63, 0.8, 1, 1.25, 1.6, 2, 2.5, 3.15, 4, 5, 6.3,
]

export function controlChecks(one: Recorded, controller: Controller, profile: RuleProfile): readonly Check[] {
  const { control } = one.circuit
  if (!control) return []
  const supply = supplyOf(one, control, controller, profile)
  return [...coilChecks(supply), ...driverChecks(supply), transformer(supply), reservoir(supply), fuse(supply)]
}

/** Makers' rules differ: 1 / 0.62 (Hammond) and 1.8 (a toroid maker). Below the first it fails; only above the second does it pass. */
function transformer({ control, coilA }: Supply): Check {
  const limit = published('Capacitor-input bridge: I_AC = I_DC / 0.62 (Hammond) to 1.8 I_DC (a toroid maker)', 'makers’ design guides')
  const { transformerSecondaryV: secondaryV, transformerVa } = control
  const neededVa = coilA === null || secondaryV === null ? null : secondaryA(coilA + TIMER_SUPPLY_A) * secondaryV
  const ampleVa = coilA === null || secondaryV === null ? null : AC_PER_DC * (coilA + TIMER_SUPPLY_A) * secondaryV
  const base = {
    id: 'transformer',
    title: 'Transformer',
    limit: neededVa === null || ampleVa === null ? 'coil not known' : `at least ${neededVa.toFixed(1)} VA, better ${ampleVa.toFixed(1)} VA`,
  }
  if (neededVa === null || ampleVa === null || transformerVa === null)
    return notKnown(limit, base, 'Read the VA on the transformer and enter it, and the coil’s resistance.')
  const fails = transformerVa < neededVa
  const near = transformerVa < ampleVa
  return check(limit, {
    ...base,
    figure: `${transformerVa} VA`,
    verdict: fails ? 'fail' : near ? 'attention' : 'pass',
    reason: fails
      ? 'The transformer is overloaded while the relay is on: it can overheat.'
      : near
        ? 'Enough by one maker’s rule and too little by another’s: feel whether it runs hot, or fit the next size.'
        : 'The transformer carries the coil and the timer.',
  })
}

function reservoir({ control, highestV, unloaded }: Supply): Check {
  const limit = unloaded(published('Peak at no load; 1.5 times it', 'margin: common practice, no source'))
  const base = {
    id: 'reservoir',
    title: 'Reservoir capacitor',
    limit: highestV === null ? 'transformer not known' : `above ${volt(highestV)}, better ${volt(highestV * RESERVOIR_MARGIN)}`,
  }
  const { reservoirRatedV } = control
  if (reservoirRatedV === null || highestV === null)
    return notKnown(limit, base, 'Read the voltage on the capacitor and on the transformer and enter them.')
  const fails = reservoirRatedV < highestV
  const narrow = reservoirRatedV < highestV * RESERVOIR_MARGIN
  return check(limit, {
    ...base,
    figure: volt(reservoirRatedV),
    verdict: fails ? 'fail' : narrow ? 'attention' : 'pass',
    reason: fails
      ? 'The unloaded supply rises above its rating: it can burst.'
      : narrow
        ? 'Little margin over the unloaded peak: expect a shorter life.'
        : 'Ample voltage margin.',
  })
}

function fuse({ control, supplyVoltageV }: Supply): Check {
  const limit: Limit = {
    clause: '1.5 to 2 times the primary’s full-load current, next IEC 60127 value up',
    edition: 'from memory',
    confirm: true,
  }
  const { transformerVa, primaryFuseA } = control
  const fullA = transformerVa === null || supplyVoltageV === null ? null : transformerVa / supplyVoltageV
  const sizes = fullA === null ? null : { leastA: nextFuse(FUSE_TIMES.least * fullA), mostA: nextFuse(FUSE_TIMES.most * fullA) }
  const base = {
    id: 'primary-fuse',
    title: 'Primary fuse',
    limit: sizes === null ? 'transformer not known' : `${ampere(sizes.leastA)} to ${ampere(sizes.mostA)}, time-lag`,
  }
  if (fullA === null || sizes === null || primaryFuseA === null)
    return notKnown(limit, base, 'Read the fuse and the transformer’s VA and enter them.')
  const fails = primaryFuseA > FUSE_TIMES.hopeless * fullA && primaryFuseA > sizes.mostA
  const outside = primaryFuseA > sizes.mostA || primaryFuseA < FUSE_TIMES.least * fullA
  return check(limit, {
    ...base,
    figure: ampere(primaryFuseA),
    verdict: fails ? 'fail' : outside ? 'attention' : 'pass',
    reason: fails
      ? 'The fuse does not protect the transformer: it can burn before the fuse opens.'
      : outside
        ? 'Outside the usual size: it blows at switch-on, or opens late.'
        : 'Of the usual size for this transformer.',
  })
}

const nextFuse = (currentA: number): number => FUSES_A.find((size) => size >= currentA - EQUAL_WITHIN_A) ?? currentA
