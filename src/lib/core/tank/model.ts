/** A tank made ready for stepping: node capacities, losses, conduction, elements at their heights and at the real voltage. */
import {
  ACTUAL_VOLUME_FRACTION,
  CONDUCTIVITY_W_PER_M_K,
  HEAT_CAPACITY_J_PER_L_K,
  HEIGHT_TO_DIAMETER,
  NODES,
  SHARE_BELOW_LOWER_FRACTION,
} from './defaults.ts'
import { lossWPerK } from './loss.ts'
import type { HeatingElement, TankSpec } from './types.ts'

export interface PlacedElement {
  readonly node: number
  readonly powerW: number
}
export interface TankModel {
  readonly volumeL: number
  readonly nodeVolumeL: number
  readonly nodeHeatJPerK: number
  readonly lossWPerK: readonly number[]
  readonly conductionWPerK: number
  readonly upper: PlacedElement | null
  readonly lower: PlacedElement | null
  readonly setPointC: number
  readonly deadBandK: number
  readonly ambientC: number
  readonly inletC: number
}

/** What an element draws at the voltage that is really there: P (V / V_rated)². */
export const actualPowerW = (element: HeatingElement, supplyVoltageV: number): number =>
  element.ratedPowerW * (supplyVoltageV / element.ratedVoltageV) ** 2

export const actualVolumeL = (tank: TankSpec): number => tank.actualVolumeL ?? tank.nominalVolumeL * ACTUAL_VOLUME_FRACTION

/** The load a tank puts on its circuit: one element at a time. */
export const tankPowerW = (tank: TankSpec, supplyVoltageV: number): number =>
  Math.max(...[tank.upperElement, tank.lowerElement].map((element) => (element ? actualPowerW(element, supplyVoltageV) : 0)))

export interface TankSite {
  readonly supplyVoltageV: number
  readonly inletC: number
  /** Another model's water, to reproduce its published figures. */
  readonly water?: { readonly heatCapacityJPerLK: number; readonly conductivityWPerMK: number }
}

const WATER = { heatCapacityJPerLK: HEAT_CAPACITY_J_PER_L_K, conductivityWPerMK: CONDUCTIVITY_W_PER_M_K }

export function tankModel(tank: TankSpec, site: TankSite): TankModel {
  const { heatCapacityJPerLK, conductivityWPerMK } = site.water ?? WATER
  const volumeL = actualVolumeL(tank)
  const volumeM3 = volumeL / 1_000
  const diameterM = tank.heightM
    ? Math.sqrt((4 * volumeM3) / (Math.PI * tank.heightM))
    : Math.cbrt((4 * volumeM3) / (Math.PI * HEIGHT_TO_DIAMETER))
  const heightM = tank.heightM ?? diameterM * HEIGHT_TO_DIAMETER
  const endM2 = (Math.PI * diameterM ** 2) / 4
  const sideM2 = (Math.PI * diameterM * heightM) / NODES
  const totalM2 = 2 * endM2 + NODES * sideM2
  const totalWPerK = lossWPerK(tank.loss, volumeL)
  const area = (node: number) => sideM2 + (node === 0 || node === NODES - 1 ? endM2 : 0)
  const place = (element: HeatingElement | null, node: number): PlacedElement | null =>
    element ? { node, powerW: actualPowerW(element, site.supplyVoltageV) } : null
  return {
    volumeL,
    nodeVolumeL: volumeL / NODES,
    nodeHeatJPerK: (volumeL / NODES) * heatCapacityJPerLK,
    lossWPerK: Array.from({ length: NODES }, (_, node) => (totalWPerK * area(node)) / totalM2),
    conductionWPerK: (conductivityWPerMK * endM2) / (heightM / NODES),
    upper: place(tank.upperElement, Math.max(0, Math.round(tank.shareAboveUpperFraction * NODES) - 1)),
    lower: place(tank.lowerElement, NODES - 1 - Math.round((tank.shareBelowLowerFraction ?? SHARE_BELOW_LOWER_FRACTION) * NODES)),
    setPointC: tank.setPointC,
    deadBandK: tank.deadBandK,
    ambientC: tank.ambientC,
    inletC: site.inletC,
  }
}
