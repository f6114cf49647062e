/** What a country's rules ask of one storage heater's circuit, as data; every figure with its clause and how it is known. */
import type { ProfileId } from '../types.ts'

export interface Limit {
  readonly clause: string
  /** Known from memory only: shown as "confirm against your code", and never decides a pass alone. */
  readonly confirm: boolean
}
export interface RuleProfile {
  readonly id: ProfileId
  readonly name: string
  /** Overcurrent device and conductor carry at least this times a storage heater's current. */
  readonly continuous: Limit & { readonly factor: number; readonly upToVolumeL: number | null }
  /** Largest device: this times the current, next standard size allowed; `null` = limited by the conductor alone. */
  readonly largestDevice: (Limit & { readonly factor: number; readonly smallLoadA: number; readonly smallDeviceA: number }) | null
  readonly deviceSizesA: readonly number[]
  /** Current-carrying capacity of copper by size and insulation rating, and the largest device on that size where the rules cap it. */
  readonly conductors: Limit & {
    readonly system: 'awg' | 'mm2'
    readonly rows: readonly {
      readonly size: string
      readonly ampacityA: Readonly<Record<number, number>>
      readonly capA: number | null
      readonly ohmPerKm: number
      /** This row is from memory, though its table is not. */
      readonly confirm?: true
    }[]
  }
  /** What is left of a conductor's capacity in warm air, by insulation rating; the first row whose temperature is not passed. */
  readonly ambient: Limit & { readonly rows: readonly { readonly upToC: number; readonly factor: Readonly<Record<number, number>> }[] }
  /** What is left of it beside other current-carrying conductors, counted together with its own. */
  readonly grouping: Limit & { readonly rows: readonly { readonly upTo: number; readonly factor: number }[] }
  /** Whether the next standard device above a conductor's capacity protects it (NEC 240.4(B)), or none above does (I_n ≤ I_z). */
  readonly nextSizeUp: boolean
  readonly voltageDrop: Limit & { readonly fraction: number }
  readonly polesToSwitch: Limit & { readonly poles: 1 | 2 }
  readonly isolator: Limit
  readonly defers: string
}
