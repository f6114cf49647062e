/** The low-voltage side of a home-built timer as formulas: rectified voltage, ripple, transformer load, coil loop, driver. Published, each with its source. */

/** Silicon bridge: two diodes conduct. */
const DIODE_DROP_V = 0.7
/** Hammond, Design Guide for Rectifier Use: capacitor-input bridge, I_DC = 0.62 I_AC. */
const DC_PER_AC = 0.62
/** A toroid maker's rule, 12 % more: I_AC = 1.8 I_DC. */
export const AC_PER_DC = 1.8
/** NE555 output high at 100 mA and more: 12.75 V of 15 V at the least (TI SLFS022); 1.7 V is its typical drop. */
const BIPOLAR_OUTPUT_DROP_V = 1.7
/** 2N4401: 0.75 to 0.95 V at 150 mA (Central Semiconductor). */
const BASE_V = 0.85
/** Copper, per kelvin from 20 °C (IEC 60228; implied by published factors). */
const COPPER_PER_K = 0.00393

/** Peak of a bridge: √2 V_rms less two diodes. `raise` is 1 + transformer regulation at no load, times what the mains may be high. */
export const rectifiedPeakV = (secondaryV: number, raise = 1): number => Math.SQRT2 * secondaryV * raise - 2 * DIODE_DROP_V

/** Ripple, peak to peak, of a full-wave reservoir: I / (2 f C). */
export const rippleV = ({
  currentA,
  mainsHz,
  reservoirF,
}: {
  readonly currentA: number
  readonly mainsHz: 50 | 60
  readonly reservoirF: number
}) => currentA / (2 * mainsHz * reservoirF)

/** Current in the secondary for a direct current behind the reservoir. */
export const secondaryA = (directA: number): number => directA / DC_PER_AC

/** Voltage at a coil at the far end of a pair; the loop is twice the one-way length. */
export const coilV = ({ supplyV, coilOhm, loopOhm }: { readonly supplyV: number; readonly coilOhm: number; readonly loopOhm: number }) =>
  (supplyV * coilOhm) / (coilOhm + loopOhm)

interface Drive {
  readonly supplyV: number
  readonly baseResistorOhm: number
}

/** Base current that the timer's output gives through the base resistor. */
export const baseA = ({ supplyV, baseResistorOhm }: Drive): number => (supplyV - BIPOLAR_OUTPUT_DROP_V - BASE_V) / baseResistorOhm

/** Collector over base current that the timer's output and base resistor force; about 10 saturates, the gain minimum does not. */
export const forcedGain = ({ coilOhm, ...drive }: Drive & { readonly coilOhm: number }): number => drive.supplyV / coilOhm / baseA(drive)

/** What must-operate voltage grows to in a warm coil, as a factor of the cold one at 25 °C. */
export const warmCoilFactor = (coilC: number): number => 1 + COPPER_PER_K * (coilC - 25)
