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
    }[]
  }
  readonly voltageDrop: Limit & { readonly fraction: number }
  readonly polesToSwitch: Limit & { readonly poles: 1 | 2 }
  readonly isolator: Limit
  readonly defers: string
}
