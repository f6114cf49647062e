/** Tanks and shorthand of the tank tests: the cylinder and the 50 gal tank of the published runs, and a plain unit day. */
import { NODES } from '#lib/core/tank/defaults.ts'
import { tankModel, type TankModel } from '#lib/core/tank/model.ts'
import { type Programme, simulate, type Simulation, type TankState, uniformState } from '#lib/core/tank/simulate.ts'
import type { ShowerNeed, TankSpec, UnitDay } from '#lib/core/tank/types.ts'

/** OCHRE's constants of water, to reproduce its figures. */
export const OCHRE_WATER = { heatCapacityJPerLK: 4_183, conductivityWPerMK: 0.6406 } as const
export const ELEMENT_4500 = { ratedPowerW: 4_500, ratedVoltageV: 240 } as const

/** 50 US gal nominal, 170.34 L, 1.22 m, two elements of 4.5 kW, a quarter above the upper and a sixth below the lower. */
export const FIFTY_GAL: TankSpec = {
  nominalVolumeL: 189.27,
  actualVolumeL: 170.34,
  heightM: 1.22,
  loss: { kind: 'ua', lossWPerK: 1.147 },
  upperElement: ELEMENT_4500,
  lowerElement: ELEMENT_4500,
  shareAboveUpperFraction: 1 / 4,
  shareBelowLowerFraction: 1 / 6,
  setPointC: 60,
  deadBandK: 5.56,
  ambientC: 20,
  mixingValveC: null,
}

export const modelOf = (patch: Partial<TankSpec> = {}, inletC = 15, water?: typeof OCHRE_WATER): TankModel =>
  tankModel({ ...FIFTY_GAL, ...patch }, { supplyVoltageV: 240, inletC, ...(water ? { water } : {}) })

export const always = (minutes: number): Pick<Programme, 'startMin' | 'endMin' | 'on' | 'draws'> => ({
  startMin: 0,
  endMin: minutes,
  on: [{ startMin: 0, endMin: minutes }],
  draws: [],
})
export const idle = (minutes: number): Programme => ({ startMin: 0, endMin: minutes, on: [], draws: [] })

export const from = (tank: TankModel, temperatureC: number, programme: Programme): Simulation =>
  simulate(tank, uniformState(temperatureC, NODES), programme)

export const meanOf = (nodesC: readonly number[]): number => nodesC.reduce((sum, value) => sum + value, 0) / nodesC.length

/** Draws straight from the tank for one minute; what leaves, in J above the inlet, and the state after. */
export const drawnInAMinute = (
  tank: TankModel,
  nodesC: readonly number[],
  litres: number,
  useTemperatureC: number | null = null,
): Simulation => {
  const start: TankState = { nodesC, upperCalls: false, lowerCalls: false }
  return simulate(tank, start, { ...idle(1), draws: [{ startMin: 0, endMin: 1, flowLPerMin: litres, useTemperatureC }] })
}

/** 40 US gal of US make at 240 V, one shower of 8 min at seven. */
export const UNIT_TANK: TankSpec = {
  ...FIFTY_GAL,
  nominalVolumeL: 151,
  actualVolumeL: null,
  heightM: null,
  loss: { kind: 'uef', uef: 0.92, drawPattern: 'medium' },
  deadBandK: 5.6,
}
export const showers = (patch: Partial<ShowerNeed> = {}): ShowerNeed => ({
  readyByMin: 420,
  count: 1,
  minutesEach: 8,
  gapMin: 5,
  flowLPerMin: 7.57,
  useTemperatureC: 41.5,
  ...patch,
})
export const pressedFor = (guaranteedMin: number, expectedMin = guaranteedMin, longestMin = expectedMin): UnitDay['runs'] => ({
  kind: 'pressed',
  guaranteedMin,
  expectedMin,
  longestMin,
})
export const unitDay = (patch: Partial<UnitDay> = {}): UnitDay => ({
  tank: UNIT_TANK,
  supplyVoltageV: 240,
  inletC: 15,
  runs: pressedFor(60, 62, 65),
  needs: [showers()],
  willing: [],
  start: { kind: 'periodic' },
  ...patch,
})
