/** What a country's rules ask of one storage heater's circuit, as data; every figure with its clause, its edition and how it is known. */
import type { ProfileId } from '../types.ts'

export interface Limit {
  readonly clause: string
  /** Edition of the text that was read, or how it is known where there is none: "common practice, no source". */
  readonly edition: string
  /** Known from memory only: shown as "confirm against your code", and never decides a pass alone. */
  readonly confirm: boolean
}
export interface ConductorRow {
  readonly size: string
  /** Copper, by insulation rating in °C. */
  readonly ampacityA: Readonly<Record<number, number>>
  /** Largest device on this size, where the rules cap it. */
  readonly capA: number | null
  readonly aluminiumCapA?: number
  readonly ohmPerKm: number
  /** This row is from memory, though its table is not. */
  readonly confirm?: true
}
export interface RuleProfile {
  readonly id: ProfileId
  readonly name: string
  /** Overcurrent device and conductor carry at least this times a storage heater's current. */
  readonly continuous: Limit & { readonly factor: number; readonly upToVolumeL: number | null }
  /** Largest device: `of-load`: this times the current, next standard size allowed; `of-conductor`: the conductor's capacity. */
  readonly largestDevice: Limit &
    (
      | { readonly kind: 'of-load'; readonly factor: number; readonly smallLoadA: number; readonly smallDeviceA: number }
      | { readonly kind: 'of-conductor' }
    )
  readonly deviceSizesA: readonly number[]
  readonly conductors: Limit & { readonly system: 'awg' | 'mm2'; readonly rows: readonly ConductorRow[] }
  /** Terminals limit a conductor to this column unless they are recorded as rated for more; `null` = one column only. */
  readonly terminals: (Limit & { readonly usualC: 60 }) | null
  /** What is left of a conductor's capacity in warm air, by insulation rating; the first row whose temperature is not passed. */
  readonly ambient: Limit & { readonly rows: readonly { readonly upToC: number; readonly factor: Readonly<Record<number, number>> }[] }
  /** What is left of it beside other current-carrying conductors, counted together with its own. */
  readonly grouping: Limit & { readonly rows: readonly { readonly upTo: number; readonly factor: number }[] }
  /** What is left of it completely inside thermal insulation; `null` = the profile has no figure and does not ask. */
  readonly insulated: (Limit & { readonly factor: number }) | null
  /** Whether the next standard device above a conductor's capacity protects it (NEC 240.4(B)), or none above does (I_n ≤ I_z). */
  readonly nextSizeUp: boolean
  readonly voltageDrop: Limit & { readonly fraction: number }
  /** Poles to open, by supply voltage; the first row whose voltage is not passed. */
  readonly poles: Limit & { readonly rows: readonly { readonly upToV: number; readonly poles: 1 | 2 }[] }
  readonly isolator: Limit
  readonly reliefValve: Limit
  readonly separation: Limit
  /** How low and high the mains may be, and its frequency. */
  readonly mains: Limit & { readonly lowFactor: number; readonly highFactor: number; readonly frequencyHz: 50 | 60 }
  /** Share of connected storage heaters that a service calculation counts, from this many on. */
  readonly heaterDemand: Limit & { readonly rows: readonly { readonly fromCount: number; readonly factor: number }[] }
  /** Share of whole dwellings' connected load that one may count, by their number; `null` = the profile has no such table. */
  readonly dwellingDemand: (Limit & { readonly rows: readonly { readonly upToUnits: number; readonly factor: number }[] }) | null
  readonly defers: string
}
