/** The hardware of the demo's units: ordinary tanks and timers of our own choosing, and the few that are wrong on purpose. */
import type { Controller, SwitchStep } from '#lib/core/controller/types.ts'
import type { Circuit, Installation } from '#lib/core/hardware/types.ts'
import type { TankSpec } from '#lib/core/tank/types.ts'

/** US gallons as litres, rounded as a label would be. */
const TANK_40_GAL_L = 151
const TANK_50_GAL_L = 189

export const dial = (settingMin: number): Controller => ({ kind: 'dial', settingMin, scaleMaxMin: 180, toleranceFraction: 0.05 })
export const fixed = (settingMin: number): Controller => ({ kind: 'one-shot-fixed', settingMin, toleranceFraction: 0.03 })
export const timeSwitch = (programme: readonly SwitchStep[], driftMin = 0): Controller => ({
  kind: 'time-switch',
  stepMin: 15,
  programme,
  followsClockChange: false,
  driftMin,
  powerReserveH: 100,
})
export const daily = (onMin: number, offMin: number): SwitchStep => ({ weekday: null, onMin, offMin })

/** A one-shot whose capacitor's leakage was measured and is small. */
export const oneShot = (resistanceMegohm: number, capacitanceMicrofarad: number): Controller => ({
  kind: 'one-shot-rc',
  resistanceOhm: resistanceMegohm * 1e6,
  resistanceToleranceFraction: 0.02,
  capacitanceF: capacitanceMicrofarad * 1e-6,
  capacitanceToleranceFraction: 0.1,
  supplyV: 12,
  icFamily: 'cmos',
  leakage: { kind: 'resistance', leakageOhm: 400e6 },
})

/** The dangerous one: a bipolar part with an old electrolytic whose leakage current comes near what the resistor can deliver. */
export const ONE_SHOT_THAT_MAY_NEVER_STOP: Controller = {
  kind: 'one-shot-rc',
  resistanceOhm: 8.2e6,
  resistanceToleranceFraction: 0.05,
  capacitanceF: 470e-6,
  capacitanceToleranceFraction: 0.2,
  supplyV: 12,
  icFamily: 'bipolar',
  leakage: { kind: 'series', series: 'electrolytic', ratedV: 25 },
}

interface TankChoice {
  readonly nominalVolumeL: number
  readonly setPointC: number
  readonly mixingValveC: number | null
}

const americanTank = ({ nominalVolumeL, setPointC, mixingValveC }: TankChoice): TankSpec => ({
  nominalVolumeL,
  actualVolumeL: null,
  heightM: null,
  loss: { kind: 'uef', uef: 0.92, drawPattern: 'medium' },
  upperElement: { ratedPowerW: 4_500, ratedVoltageV: 240 },
  lowerElement: { ratedPowerW: 4_500, ratedVoltageV: 240 },
  shareAboveUpperFraction: 1 / 3,
  setPointC,
  deadBandK: 5.6,
  ambientC: 19,
  mixingValveC,
})

const britishTank = ({ nominalVolumeL, setPointC, mixingValveC }: TankChoice): TankSpec => ({
  nominalVolumeL,
  actualVolumeL: null,
  heightM: null,
  loss: { kind: 'class', label: 'C' },
  upperElement: null,
  lowerElement: { ratedPowerW: 3_000, ratedVoltageV: 230 },
  shareAboveUpperFraction: 1 / 3,
  setPointC,
  deadBandK: 5,
  ambientC: 18,
  mixingValveC,
})

const COMMON_CIRCUIT = {
  groupedConductors: 2,
  contactRatingClass: 'resistive',
  isolatorInSight: true,
  reliefValve: true,
  expansionVessel: null,
  closedSystem: null,
  extraLowVoltageSeparated: true,
  control: null,
} as const

/** 208 V supply of an apartment building, 25 A on 10 AWG. */
const americanCircuit: Circuit = {
  ...COMMON_CIRCUIT,
  supplyVoltageV: 208,
  breakerA: 25,
  conductor: { size: '10', system: 'awg', material: 'copper', ratingC: 60 },
  lengthM: 14,
  ambientC: 26,
  contactRatingA: 30,
  polesSwitched: 2,
}

/** 230 V supply, 16 A on 2.5 mm². */
const britishCircuit: Circuit = {
  ...COMMON_CIRCUIT,
  supplyVoltageV: 230,
  breakerA: 16,
  conductor: { size: '2.5', system: 'mm2', material: 'copper', ratingC: 70 },
  lengthM: 12,
  ambientC: 22,
  contactRatingA: 20,
  polesSwitched: 2,
}

export interface AmericanUnit {
  readonly controller: Controller
  readonly large: boolean
  readonly setPointC?: number
  readonly mixingValveC?: number | null
  readonly circuit?: Partial<Circuit>
}

export const american = ({ controller, large, setPointC = 60, mixingValveC = 49, circuit = {} }: AmericanUnit): Installation => ({
  load: { kind: 'storage-heater', tank: americanTank({ nominalVolumeL: large ? TANK_50_GAL_L : TANK_40_GAL_L, setPointC, mixingValveC }) },
  controller,
  circuit: { ...americanCircuit, ...circuit },
})

export const british = (controller: Controller, nominalVolumeL: number): Installation => ({
  load: { kind: 'storage-heater', tank: britishTank({ nominalVolumeL, setPointC: 60, mixingValveC: 48 }) },
  controller,
  circuit: britishCircuit,
})
