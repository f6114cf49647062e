/** The 555-type chips as their datasheets print them, and what a family as a whole promises: figures with source and status, no arithmetic of time. */

/** How surely a figure is known: read on the page named, or read in a copy whose columns are damaged. */
type SourceStatus = 'read' | 'read in a damaged copy'

export interface ChipLimits {
  readonly chip: string
  readonly source: string
  readonly status: SourceStatus
  /** `room` = 25 °C; `hot` = the industrial grade's 85 °C. */
  readonly at: 'room' | 'hot'
  /** Into the threshold pin; `null` = not printed. */
  readonly thresholdTypicalA: number | null
  readonly thresholdWorstA: number | null
  /** Into the open discharge pin, which sits on the same node; `null` = not printed. */
  readonly dischargeTypicalA: number | null
  readonly dischargeWorstA: number | null
}

export type IcFamily = 'bipolar' | 'cmos'

const CHIPS: Readonly<Record<IcFamily, readonly ChipLimits[]>> = {
  bipolar: [
    {
      chip: 'NE555',
      source: 'TI SLFS022 (1992) p. 5; discharge also ST Doc 2182 rev. 6 table 3',
      status: 'read',
      at: 'room',
      thresholdTypicalA: 30e-9,
      thresholdWorstA: 250e-9,
      dischargeTypicalA: 20e-9,
      dischargeWorstA: 100e-9,
    },
    {
      chip: 'LM555',
      source: 'Fairchild LM555 rev. 1.1.0 (2002) p. 3; Hitachi HA17555 p. 6 prints the same',
      status: 'read',
      at: 'room',
      thresholdTypicalA: 100e-9,
      thresholdWorstA: 250e-9,
      dischargeTypicalA: null,
      dischargeWorstA: null,
    },
  ],
  cmos: [
    {
      chip: 'TLC555',
      source: 'TI SLFS043C (1997) pp. 8-9',
      status: 'read',
      at: 'room',
      thresholdTypicalA: 10e-12,
      thresholdWorstA: null,
      dischargeTypicalA: 0.1e-9,
      dischargeWorstA: null,
    },
    {
      // Printed in the typical column, at the highest rated temperature: the least that has to be reckoned with there.
      chip: 'TLC555I',
      source: 'TI SLFS043C (1997) p. 8',
      status: 'read',
      at: 'hot',
      thresholdTypicalA: null,
      thresholdWorstA: 150e-12,
      dischargeTypicalA: null,
      dischargeWorstA: 120e-9,
    },
    {
      chip: 'TS555',
      source: 'ST TS555 p. 7',
      status: 'read',
      at: 'room',
      thresholdTypicalA: 10e-12,
      thresholdWorstA: null,
      dischargeTypicalA: 1e-9,
      dischargeWorstA: 100e-9,
    },
    {
      chip: 'ICM7555',
      source: 'Philips ICM7555 (1994) p. 339; discharge Intersil p. 8-172',
      status: 'read in a damaged copy',
      at: 'room',
      thresholdTypicalA: 10e-12,
      thresholdWorstA: 50e-12,
      dischargeTypicalA: null,
      dischargeWorstA: 10e-9,
    },
  ],
}

export interface FamilyLimits {
  readonly chips: readonly ChipLimits[]
  /** What an ordinary part takes from the node: the greatest sum of typicals that one datasheet prints for both pins. */
  readonly typicalBiasA: number
  /** What the worst part may take: the greatest sum of worst figures of one row. */
  readonly worstBiasA: number
  /** The greater of the two pins' worst figures; the makers' rule for the highest resistor is written with it. */
  readonly worstPinA: number
}

/** A chip whose datasheet leaves one pin out says nothing about the node, and is left out. */
function limitsOf(chips: readonly ChipLimits[]): FamilyLimits {
  const sums = (threshold: 'thresholdTypicalA' | 'thresholdWorstA', discharge: 'dischargeTypicalA' | 'dischargeWorstA') =>
    chips.flatMap((chip) => {
      const thresholdA = chip[threshold] ?? chip.thresholdTypicalA
      const dischargeA = chip[discharge]
      return thresholdA === null || dischargeA === null ? [] : [thresholdA + dischargeA]
    })
  return {
    chips,
    typicalBiasA: Math.max(...sums('thresholdTypicalA', 'dischargeTypicalA')),
    worstBiasA: Math.max(...sums('thresholdWorstA', 'dischargeWorstA')),
    worstPinA: Math.max(...chips.flatMap((chip) => [chip.thresholdWorstA ?? 0, chip.dischargeWorstA ?? 0])),
  }
}

export const IC_FAMILIES: Readonly<Record<IcFamily, FamilyLimits>> = { bipolar: limitsOf(CHIPS.bipolar), cmos: limitsOf(CHIPS.cmos) }

/**
 * Initial error of the interval, 3 % at most (TI SLFS022A p. 5; TLC555 SLFS043C p. 9). The makers give it against the mean of a
 * production run, with resistors to 100 kΩ; nothing better is published for large ones. The same sheets allow the threshold itself
 * 8.8 to 11.2 V of 15 V (TI SLFS022 p. 5), which by itself would be −19.6 / +25 % of the interval. The narrower figure is chosen: it
 * is the maximum of the interval as a whole, and what it says of the threshold does not depend on the resistor; what does, leakage
 * and bias, is reckoned apart. A stop-watch reading overrides both.
 */
export const IC_TOLERANCE_FRACTION = 0.03
