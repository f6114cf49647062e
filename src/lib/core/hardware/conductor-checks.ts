/** The cable of the load: its capacity in the air and beside the conductors it really has, and the voltage it loses. */
import { ampere, volt } from './figures.ts'
import type { Limit, RuleProfile } from './profiles/profile.ts'
import type { Check, Circuit, Installation } from './types.ts'
import { check } from './verdict.ts'

interface Case {
  readonly installation: Installation
  readonly profile: RuleProfile
  readonly loadA: number
}

/** Two-wire drop: out and back, so twice the one-way length. */
export const twoWireDropV = ({
  currentA,
  ohmPerKm,
  lengthM,
}: {
  readonly currentA: number
  readonly ohmPerKm: number
  readonly lengthM: number
}) => 2 * currentA * (ohmPerKm / 1_000) * lengthM

const rowOf = (profile: RuleProfile, wire: Circuit['conductor']) =>
  wire && profile.conductors.system === wire.system ? profile.conductors.rows.find((row) => row.size === wire.size) : undefined

/** Factors for the air and the neighbours of a conductor; `null` = not recorded, or beyond the table. */
function corrections(circuit: Circuit, profile: RuleProfile): { readonly ambient: number | null; readonly grouping: number | null } {
  const { ambientC, groupedConductors, conductor: wire } = circuit
  const air = ambientC === null ? undefined : profile.ambient.rows.find((row) => ambientC <= row.upToC)
  const beside = groupedConductors === null ? undefined : profile.grouping.rows.find((row) => groupedConductors <= row.upTo)
  return { ambient: (wire && air?.factor[wire.ratingC]) ?? null, grouping: beside?.factor ?? null }
}

/**
 * Capacity before corrections carries the continuous load, capacity after them the load itself, and the device protects what is
 * left. Corrections that nobody recorded leave the verdict at not known, however large the conductor.
 */
export function conductor({ installation, profile, loadA, continuousA }: Case & { readonly continuousA: number }): Check {
  const { conductor: wire, breakerA } = installation.circuit
  const base = { id: 'conductor', title: 'Conductor', limit: `at least ${ampere(Math.max(continuousA, breakerA ?? 0))}` }
  const row = rowOf(profile, wire)
  const tableA = wire?.material === 'copper' ? row?.ampacityA[wire.ratingC] : undefined
  if (!wire || !row || tableA === undefined) {
    return check(profile.conductors, {
      ...base,
      verdict: 'not-known',
      figure: wire ? `${wire.size} ${wire.system} ${wire.material}, ${wire.ratingC} °C` : 'not known',
      reason: 'Size, material and insulation rating are not all known, or this table does not hold them.',
    })
  }
  const { ambient, grouping } = corrections(installation.circuit, profile)
  const correctedA = tableA * (ambient ?? 1) * (grouping ?? 1)
  const largestA = largestDeviceA({ profile, capA: row.capA, correctedA })
  const tooSmall = tableA < continuousA - 1e-9 || correctedA < loadA - 1e-9
  const unprotected = breakerA !== null && breakerA > largestA + 1e-9
  const unknown = ambient === null || grouping === null || breakerA === null
  const figure = `${ampere(correctedA)} for ${wire.size} ${wire.system === 'mm2' ? 'mm²' : 'AWG'}, device at most ${ampere(largestA)}`
  return check(limitOf({ profile, row, ambient, grouping }), {
    ...base,
    figure,
    verdict: tooSmall || unprotected ? 'fail' : unknown ? 'not-known' : 'pass',
    reason: tooSmall
      ? 'The conductor is too small for this load.'
      : unprotected
        ? `A ${ampere(breakerA ?? 0)} device does not protect this conductor.`
        : unknown
          ? 'Large enough in air of 30 °C and on its own; record its breaker, the air around the cable and the conductors beside it.'
          : 'It carries the load in its air and beside its neighbours, and the device protects it.',
  })
}

function largestDeviceA({
  profile,
  capA,
  correctedA,
}: {
  readonly profile: RuleProfile
  readonly capA: number | null
  readonly correctedA: number
}): number {
  const nextA = profile.nextSizeUp ? (profile.deviceSizesA.find((size) => size >= correctedA - 1e-9) ?? correctedA) : correctedA
  return Math.min(capA ?? Infinity, nextA)
}

/** The clauses that decided, and whether any of them is from memory. */
function limitOf({
  profile,
  row,
  ambient,
  grouping,
}: {
  readonly profile: RuleProfile
  readonly row: RuleProfile['conductors']['rows'][number]
  readonly ambient: number | null
  readonly grouping: number | null
}): Limit {
  const used = [
    profile.conductors,
    ...(ambient !== null && ambient !== 1 ? [profile.ambient] : []),
    ...(grouping !== null && grouping !== 1 ? [profile.grouping] : []),
  ]
  return { clause: used.map(({ clause }) => clause).join('; '), confirm: row.confirm === true || used.some(({ confirm }) => confirm) }
}

export function voltageDrop({ installation, profile, loadA }: Case): Check {
  const { conductor: wire, lengthM, supplyVoltageV } = installation.circuit
  // The tables' resistances are copper's.
  const row = wire?.material === 'copper' ? rowOf(profile, wire) : undefined
  const base = { id: 'voltage-drop', title: 'Voltage drop', limit: `${profile.voltageDrop.fraction * 100} % of ${supplyVoltageV} V` }
  if (!row || lengthM === null)
    return check(profile.voltageDrop, { ...base, verdict: 'not-known', figure: 'not known', reason: 'Enter the cable’s size and length.' })
  const dropV = twoWireDropV({ currentA: loadA, ohmPerKm: row.ohmPerKm, lengthM })
  const over = dropV > profile.voltageDrop.fraction * supplyVoltageV
  return check(profile.voltageDrop, {
    ...base,
    figure: `${volt(dropV)} (${((dropV / supplyVoltageV) * 100).toFixed(2)} %)`,
    verdict: over ? 'attention' : 'pass',
    reason: over ? 'More than is advised: the element heats more slowly.' : 'Within what is advised.',
  })
}
