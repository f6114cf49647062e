/** An installation of the hardware tests: a dial timer on a 240 V, 30 A, 10 AWG circuit, everything recorded but the mains' range and a nameplate maximum. */
import type { Circuit, ControlSupply, Installation } from '#lib/core/hardware/types.ts'

const CIRCUIT: Circuit = {
  supplyVoltageV: 240,
  breakerA: 30,
  conductor: { size: '10', system: 'awg', material: 'copper', ratingC: 60 },
  lengthM: 15,
  ambientC: 25,
  groupedConductors: 2,
  contactRatingA: 30,
  contactRatingClass: 'resistive',
  polesSwitched: 2,
  isolatorInSight: true,
  reliefValve: true,
  expansionVessel: true,
  closedSystem: true,
  extraLowVoltageSeparated: true,
  control: null,
  markedMaxBreakerA: null,
  terminalRatingC: 60,
  inThermalInsulation: false,
  mainsRangeV: null,
}

/** A relay of published data: 12 V, 86 Ω, driven by a 2N4401 from a 9 V transformer. */
export const CONTROL: ControlSupply = {
  transformerSecondaryV: 9,
  transformerVa: 5,
  transformerRegulationFraction: 0.25,
  reservoirF: 1e-3,
  reservoirRatedV: 25,
  coilRatedV: 12,
  coilOhm: 86,
  driver: { maxCurrentA: 0.6, baseResistorOhm: 680, gainMin: 100 },
  suppression: 'diode-zener',
  primaryFuseA: 0.04,
  loopLengthM: 5,
  loopOhmPerKm: 33.3,
}

interface Installed {
  readonly powerW?: number
  readonly ratedVoltageV?: number
  readonly circuit?: Partial<Circuit>
}

export const installed = ({ powerW = 4_500, ratedVoltageV = 240, circuit = {} }: Installed = {}): Installation => ({
  load: {
    kind: 'storage-heater',
    tank: {
      nominalVolumeL: 189,
      actualVolumeL: null,
      heightM: null,
      loss: { kind: 'ua', lossWPerK: 1.2 },
      upperElement: null,
      lowerElement: { ratedPowerW: powerW, ratedVoltageV },
      shareAboveUpperFraction: 1 / 3,
      setPointC: 60,
      deadBandK: 5,
      ambientC: 20,
      mixingValveC: 49,
    },
  },
  controller: { kind: 'dial', settingMin: 60, scaleMaxMin: 120, toleranceFraction: 0.05 },
  circuit: { ...CIRCUIT, ...circuit },
})
