/**
 * What is really on record: a figure that is absent, zero, negative or no number at all counts as not known, so that a field
 * somebody has just cleared never passes a check.
 */
import { actualPowerW } from '../tank/model.ts'
import type { HeatingElement } from '../tank/types.ts'
import type { Circuit, ControlSupply, Installation } from './types.ts'

export interface RecordedCircuit extends Required<Omit<Circuit, 'supplyVoltageV'>> {
  readonly supplyVoltageV: number | null
}
export interface Recorded {
  readonly circuit: RecordedCircuit
  readonly elements: readonly HeatingElement[]
  /** Current of the largest element at the voltage that is really there; upper and lower never run together. */
  readonly loadA: number | null
}

export const positive = (value: number | null | undefined): number | null =>
  value !== null && value !== undefined && value > 0 && Number.isFinite(value) ? value : null

/** As `null` as a home-built timer's parts can be: it surely has some, and nobody recorded them. */
const NOTHING_KNOWN: ControlSupply = {
  transformerSecondaryV: null,
  transformerVa: null,
  transformerRegulationFraction: null,
  reservoirF: null,
  reservoirRatedV: null,
  coilRatedV: null,
  coilOhm: null,
  driver: null,
  suppression: null,
  primaryFuseA: null,
  loopLengthM: null,
  loopOhmPerKm: null,
}

export function recorded({ load, controller, circuit }: Installation): Recorded {
  const supplyVoltageV = positive(circuit.supplyVoltageV)
  const elements = [load.tank.upperElement, load.tank.lowerElement].filter((element) => element !== null)
  const sound = elements.length > 0 && elements.every((one) => positive(one.ratedPowerW) && positive(one.ratedVoltageV))
  const range = circuit.mainsRangeV ?? null
  return {
    elements: sound ? elements : [],
    loadA: sound && supplyVoltageV !== null ? Math.max(...elements.map((one) => actualPowerW(one, supplyVoltageV))) / supplyVoltageV : null,
    circuit: {
      ...circuit,
      supplyVoltageV,
      breakerA: positive(circuit.breakerA),
      lengthM: positive(circuit.lengthM),
      ambientC: circuit.ambientC !== null && Number.isFinite(circuit.ambientC) ? circuit.ambientC : null,
      groupedConductors: positive(circuit.groupedConductors),
      contactRatingA: positive(circuit.contactRatingA),
      markedMaxBreakerA: positive(circuit.markedMaxBreakerA),
      terminalRatingC: circuit.terminalRatingC ?? null,
      inThermalInsulation: circuit.inThermalInsulation ?? null,
      mainsRangeV: range && positive(range.lowestV) && positive(range.highestV) ? range : null,
      control: circuit.control ? recordedControl(circuit.control) : controller.kind === 'one-shot-rc' ? NOTHING_KNOWN : null,
    },
  }
}

const recordedControl = (control: ControlSupply): ControlSupply => ({
  transformerSecondaryV: positive(control.transformerSecondaryV),
  transformerVa: positive(control.transformerVa),
  // A regulated or very large transformer may not rise at all: 0 is a figure here.
  transformerRegulationFraction:
    control.transformerRegulationFraction !== null && control.transformerRegulationFraction >= 0
      ? control.transformerRegulationFraction
      : null,
  reservoirF: positive(control.reservoirF),
  reservoirRatedV: positive(control.reservoirRatedV),
  coilRatedV: positive(control.coilRatedV),
  coilOhm: positive(control.coilOhm),
  driver:
    control.driver && positive(control.driver.maxCurrentA)
      ? {
          maxCurrentA: control.driver.maxCurrentA,
          baseResistorOhm: positive(control.driver.baseResistorOhm),
          gainMin: positive(control.driver.gainMin),
        }
      : null,
  suppression: control.suppression,
  primaryFuseA: positive(control.primaryFuseA),
  loopLengthM: positive(control.loopLengthM),
  loopOhmPerKm: positive(control.loopOhmPerKm),
})
