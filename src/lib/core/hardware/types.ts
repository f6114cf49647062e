/** What carries and protects a load, and the verdicts of screening it against a country's rule profile. */
import type { Controller } from '../controller/types.ts'
import type { TankSpec } from '../tank/types.ts'

export type ProfileId = 'us-nec-2023' | 'gb-bs7671' | 'iec-60364'

export interface CableSize {
  /** AWG for `awg`, mm² for `mm2`. */
  readonly size: string
  readonly system: 'awg' | 'mm2'
}
/** The circuit of one unit's load. A `null` is "not known" and is never shown as a pass. */
export interface Circuit {
  readonly supplyVoltageV: number
  readonly breakerA: number | null
  readonly conductor: (CableSize & { readonly material: 'copper' | 'aluminium'; readonly ratingC: 60 | 70 | 75 | 90 }) | null
  readonly lengthM: number | null
  readonly ambientC: number | null
  readonly groupedConductors: number | null
  readonly contactRatingA: number | null
  readonly contactRatingClass: 'resistive' | 'ac-1' | 'general-use' | 'ac-3' | null
  readonly polesSwitched: 1 | 2 | 3 | null
  readonly isolatorInSight: boolean | null
  readonly reliefValve: boolean | null
  readonly expansionVessel: boolean | null
  readonly closedSystem: boolean | null
  readonly extraLowVoltageSeparated: boolean | null
  /** Low-voltage control parts of a home-built timer; `null` when there are none. */
  readonly control: ControlSupply | null
  // What follows is younger than the first revisions: absent there, which is "not known".
  /** Largest device that the heater's nameplate allows. */
  readonly markedMaxBreakerA?: number | null
  /** What the terminals are marked for; not known counts as 60 °C where the profile asks. */
  readonly terminalRatingC?: 60 | 75 | null
  /** More than half a metre of the cable lies completely inside thermal insulation. */
  readonly inThermalInsulation?: boolean | null
  /** Lowest and highest mains voltage that somebody read. */
  readonly mainsRangeV?: { readonly lowestV: number; readonly highestV: number } | null
}
export interface ControlSupply {
  readonly transformerSecondaryV: number | null
  readonly transformerVa: number | null
  readonly transformerRegulationFraction: number | null
  readonly reservoirF: number | null
  readonly reservoirRatedV: number | null
  readonly coilRatedV: number | null
  readonly coilOhm: number | null
  readonly driver: { readonly maxCurrentA: number; readonly baseResistorOhm: number | null; readonly gainMin: number | null } | null
  readonly suppression: 'none' | 'diode' | 'diode-zener' | 'varistor' | null
  readonly primaryFuseA: number | null
  readonly loopLengthM: number | null
  readonly loopOhmPerKm: number | null
}

export type Verdict = 'pass' | 'attention' | 'fail' | 'not-known'
export interface Check {
  readonly id: string
  readonly title: string
  readonly verdict: Verdict
  /** What was found, with unit. */
  readonly figure: string
  /** What it was held against, with unit. */
  readonly limit: string
  /** Clause and edition, or "common practice, no source". */
  readonly clause: string
  readonly reason: string
  readonly caution: string
  /** The limit is from memory: shown as "confirm against your code", never decides a pass alone. */
  readonly confirmAgainstCode: boolean
}

/** Everything installed in a unit, as one revision records it. */
export interface Installation {
  readonly load: { readonly kind: 'storage-heater'; readonly tank: TankSpec }
  readonly controller: Controller
  readonly circuit: Circuit
}
