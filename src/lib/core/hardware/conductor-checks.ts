/** The cable of the load: its capacity in the air and beside the conductors it really has, and the voltage it loses. */
import { ampere, EQUAL_WITHIN_A, volt } from './figures.ts'
import type { ConductorRow, Limit, RuleProfile } from './profiles/profile.ts'
import type { Recorded, RecordedCircuit } from './recorded.ts'
import type { Check, CableSize } from './types.ts'
import { check, notKnown, together } from './verdict.ts'

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

const rowOf = (profile: RuleProfile, wire: CableSize | null): ConductorRow | undefined =>
  wire && profile.conductors.system === wire.system ? profile.conductors.rows.find((row) => row.size === wire.size) : undefined

interface Capacity {
  /** By the column of the terminals, before corrections. */
  readonly tableA: number
  readonly correctedA: number
  /** Everything that corrects it is on record and in the tables. */
  readonly sure: boolean
  readonly limit: Limit
  readonly capA: number | null
}

/**
 * Corrections apply to the insulation's own column, and the terminals' column still caps the result (NEC 110.14(C)). What nobody
 * recorded is taken as if it corrected nothing, so that even then a conductor can fail; it cannot pass.
 */
export function capacityOf(circuit: RecordedCircuit, profile: RuleProfile): Capacity | null {
  const { conductor: wire, ambientC, groupedConductors } = circuit
  const row = rowOf(profile, wire)
  if (!wire || !row || wire.material !== 'copper') return null
  const insulationA = row.ampacityA[wire.ratingC]
  const terminalC = profile.terminals === null ? wire.ratingC : Math.min(wire.ratingC, circuit.terminalRatingC ?? profile.terminals.usualC)
  const tableA = row.ampacityA[terminalC]
  if (insulationA === undefined || tableA === undefined) return null
  const air = ambientC === null ? undefined : profile.ambient.rows.find((one) => ambientC <= one.upToC)?.factor[wire.ratingC]
  const beside = groupedConductors === null ? undefined : profile.grouping.rows.find((one) => groupedConductors <= one.upTo)?.factor
  const lagged = profile.insulated === null || circuit.inThermalInsulation === false ? 1 : circuit.inThermalInsulation ? profile.insulated.factor : undefined // prettier-ignore
  const factor = (air ?? 1) * (beside ?? 1) * (lagged ?? 1)
  return {
    tableA,
    correctedA: Math.min(insulationA * factor, tableA),
    sure: air !== undefined && beside !== undefined && lagged !== undefined,
    capA: row.capA,
    limit: together([
      { ...profile.conductors, confirm: profile.conductors.confirm || row.confirm === true },
      ...(profile.terminals && terminalC < wire.ratingC ? [profile.terminals] : []),
      ...(air !== undefined && air !== 1 ? [profile.ambient] : []),
      ...(beside !== undefined && beside !== 1 ? [profile.grouping] : []),
      ...(profile.insulated && lagged !== undefined && lagged !== 1 ? [profile.insulated] : []),
    ]),
  }
}

/**
 * Capacity before corrections carries the continuous load, capacity after them the load itself, and the device protects what is
 * left. Corrections that nobody recorded leave the verdict at not known, however large the conductor.
 */
export function conductor({ circuit, loadA }: Recorded, continuousA: number | null, profile: RuleProfile): Check {
  const { conductor: wire, breakerA } = circuit
  const base = {
    id: 'conductor',
    title: 'Conductor',
    limit: continuousA === null ? 'load not known' : `at least ${ampere(Math.max(continuousA, breakerA ?? 0))}`,
  }
  const capacity = capacityOf(circuit, profile)
  const aluminiumCapA = wire?.material === 'aluminium' ? rowOf(profile, wire)?.aluminiumCapA : undefined
  if (wire && aluminiumCapA !== undefined && breakerA !== null && breakerA > aluminiumCapA + EQUAL_WITHIN_A) {
    return check(profile.conductors, {
      ...base,
      figure: `${wire.size} AWG aluminium, device at most ${ampere(aluminiumCapA)}`,
      verdict: 'fail',
      reason: `A ${ampere(breakerA)} device does not protect this conductor. Aluminium needs terminals marked for it.`,
    })
  }
  if (!wire || !capacity || loadA === null || continuousA === null)
    return check(profile.conductors, {
      ...base,
      verdict: 'not-known',
      figure: wire ? `${wire.size} ${wire.system === 'mm2' ? 'mm²' : 'AWG'} ${wire.material}, ${wire.ratingC} °C` : 'not known',
      reason: 'Size, material, insulation rating and load are not all known, or this profile’s table does not hold them.',
    })
  const largestA = largestDeviceA(capacity, profile)
  const tooSmall = capacity.tableA < continuousA - EQUAL_WITHIN_A || capacity.correctedA < loadA - EQUAL_WITHIN_A
  const unprotected = breakerA !== null && breakerA > largestA + EQUAL_WITHIN_A
  const sure = capacity.sure && breakerA !== null
  return check(capacity.limit, {
    ...base,
    figure: `${ampere(capacity.correctedA)} for ${wire.size} ${wire.system === 'mm2' ? 'mm²' : 'AWG'}, device at most ${ampere(largestA)}`,
    verdict: tooSmall || unprotected ? 'fail' : sure ? 'pass' : 'not-known',
    reason: tooSmall
      ? 'The conductor is too small for this load.'
      : unprotected
        ? `A ${ampere(breakerA)} device does not protect this conductor.`
        : sure
          ? 'It carries the load in its air and beside its neighbours, and the device protects it.'
          : 'Large enough in air of 30 °C and on its own; record the device, the air around the cable and what lies beside or around it.',
  })
}

function largestDeviceA({ correctedA, capA }: Capacity, profile: RuleProfile): number {
  const nextA = profile.nextSizeUp ? (profile.deviceSizesA.find((size) => size >= correctedA - EQUAL_WITHIN_A) ?? correctedA) : correctedA
  return Math.min(capA ?? Infinity, nextA)
}

/** The published recommendation of each profile; a drop above it costs time and is no hazard by itself. */
export function voltageDrop({ circuit, loadA }: Recorded, profile: RuleProfile): Check {
  const { conductor: wire, lengthM, supplyVoltageV } = circuit
  const row = rowOf(profile, wire)
  const base = { id: 'voltage-drop', title: 'Voltage drop', limit: `${profile.voltageDrop.fraction * 100} % of the supply` }
  if (!row || wire?.material !== 'copper' || lengthM === null || loadA === null || supplyVoltageV === null)
    return notKnown(profile.voltageDrop, base, 'Enter the load and the copper cable’s size and length.')
  const dropV = twoWireDropV({ currentA: loadA, ohmPerKm: row.ohmPerKm, lengthM })
  const over = dropV > profile.voltageDrop.fraction * supplyVoltageV
  return check(profile.voltageDrop, {
    ...base,
    limit: `${base.limit}, ${volt(profile.voltageDrop.fraction * supplyVoltageV)}`,
    figure: `${volt(dropV)} (${((dropV / supplyVoltageV) * 100).toFixed(2)} %)`,
    verdict: over ? 'attention' : 'pass',
    reason: over ? 'More than is advised: the element heats more slowly.' : 'Within what is advised.',
  })
}
