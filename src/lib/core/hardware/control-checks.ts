/** The control side of a home-built timer: coil, transformer, reservoir, driver, suppression, fuse, loop. Only where one is on record. */
import { coilChecks } from './coil-checks.ts'
import { known, notKnown, type Supply, supplyOf, TIMER_SUPPLY_A } from './control-case.ts'
import { secondaryA } from './control-supply.ts'
import { ampere, volt } from './figures.ts'
import type { Limit } from './profiles/profile.ts'
import type { Check, Installation } from './types.ts'
import { check } from './verdict.ts'

/** Capacitor over its highest no-load peak (common practice, no source). */
const RESERVOIR_MARGIN = 1.5
/** A primary fuse between these times the transformer's full-load current (common practice, no source); four times protects nothing. */
const FUSE_TIMES = { least: 1.5, most: 2, hopeless: 4 } as const
/** IEC 60127 rated currents (R10), A. */
const FUSES_A = [
  0.032, 0.04, 0.05, 0.063, 0.08, 0.1, 0.125, 0.16, 0.2, 0.25, 0.315, 0.4, 0.5, 0.63, 0.8, 1, 1.25, 1.6, 2, 2.5, 3.15, 4, 5, 6.3,
]

export function controlChecks({ circuit }: Installation): readonly Check[] {
  const { control, supplyVoltageV } = circuit
  if (!control) return []
  const supply = supplyOf(control, supplyVoltageV)
  return [...coilChecks(supply), transformer(supply), reservoir(supply), fuse(supply)]
}

function transformer({ control, coilA }: Supply): Check {
  const limit = known('Capacitor-input bridge, I_DC = 0.62 I_AC (Hammond, Design Guide for Rectifier Use)')
  const neededVa = coilA === null ? null : secondaryA(coilA + TIMER_SUPPLY_A) * control.transformerSecondaryV
  const base = {
    id: 'transformer',
    title: 'Transformer',
    limit: neededVa === null ? 'coil not known' : `at least ${neededVa.toFixed(1)} VA`,
  }
  if (neededVa === null || control.transformerVa === null)
    return notKnown(limit, base, 'Read the VA on the transformer and enter it, and the coil’s resistance.')
  const fails = control.transformerVa < neededVa
  return check(limit, {
    ...base,
    figure: `${control.transformerVa} VA`,
    verdict: fails ? 'fail' : 'pass',
    reason: fails
      ? 'The transformer is overloaded while the relay is on: it can overheat.'
      : 'The transformer carries the coil and the timer.',
  })
}

function reservoir({ control, highestV }: Supply): Check {
  const assumed = control.transformerRegulationFraction === null
  const limit: Limit = {
    clause: `Peak at no load${assumed ? ', regulation of 30 % from memory' : ''}; 1.5 times it is common practice, no source`,
    confirm: assumed,
  }
  const base = {
    id: 'reservoir',
    title: 'Reservoir capacitor',
    limit: `above ${volt(highestV)}, better ${volt(highestV * RESERVOIR_MARGIN)}`,
  }
  if (control.reservoirRatedV === null) return notKnown(limit, base, 'Read the voltage on the capacitor and enter it.')
  const fails = control.reservoirRatedV < highestV
  const narrow = control.reservoirRatedV < highestV * RESERVOIR_MARGIN
  return check(limit, {
    ...base,
    figure: volt(control.reservoirRatedV),
    verdict: fails ? 'fail' : narrow ? 'attention' : 'pass',
    reason: fails
      ? 'The unloaded supply rises above its rating: it can burst.'
      : narrow
        ? 'Little margin over the unloaded peak: expect a shorter life.'
        : 'Ample voltage margin.',
  })
}

function fuse({ control, supplyVoltageV }: Supply): Check {
  const limit = known('1.5 to 2 times the primary’s full-load current, next IEC 60127 value up: common practice, no source')
  const fullA = control.transformerVa === null ? null : control.transformerVa / supplyVoltageV
  const sizes = fullA === null ? null : { least: nextFuse(FUSE_TIMES.least * fullA), most: nextFuse(FUSE_TIMES.most * fullA) }
  const base = {
    id: 'primary-fuse',
    title: 'Primary fuse',
    limit: sizes === null ? 'transformer not known' : `${ampere(sizes.least)} to ${ampere(sizes.most)}, time-lag`,
  }
  if (fullA === null || sizes === null || control.primaryFuseA === null)
    return notKnown(limit, base, 'Read the fuse and the transformer’s VA and enter them.')
  const fails = control.primaryFuseA > FUSE_TIMES.hopeless * fullA && control.primaryFuseA > sizes.most
  const outside = control.primaryFuseA > sizes.most || control.primaryFuseA < FUSE_TIMES.least * fullA
  return check(limit, {
    ...base,
    figure: ampere(control.primaryFuseA),
    verdict: fails ? 'fail' : outside ? 'attention' : 'pass',
    reason: fails
      ? 'The fuse does not protect the transformer: it can burn before the fuse opens.'
      : outside
        ? 'Outside the usual size: it blows at switch-on, or opens late.'
        : 'The fuse suits the transformer.',
  })
}

const nextFuse = (currentA: number): number => FUSES_A.find((size) => size >= currentA - 1e-9) ?? currentA
