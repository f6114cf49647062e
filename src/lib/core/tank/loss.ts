/** Standing loss in W/K from whatever rating is known; each formula with its source. */
import { lFromUsGal, W_PER_K_PER_BTU_PER_H_F } from '../units.ts'
import type { LossRating } from './types.ts'

/** Daily volume of the certification draw patterns (10 CFR 430 Subpart B Appendix E), US gallons. */
export const DRAW_PATTERN_GAL = { 'very-small': 10, low: 38, medium: 55, high: 84 } as const

// Appendix E conditions in °F: set point 125, inlet 58, ambient 67.5. Water of the WHAM method: 8.293752 lb/gal, 1.000743 Btu/(lb·°F).
const SET_F = 125
const INLET_F = 58
const AMBIENT_F = 67.5
const BTU_PER_GAL_F = 8.293752 * 1.000743

/** Upper limits of the classes of Regulation (EU) 812/2013, Annex II table 2: a + b·V^0.4 in W, V in litres (read in a secondary copy). */
const CLASS_LIMIT = {
  'A+': [5.5, 3.16],
  A: [8.5, 4.25],
  B: [12, 5.93],
  C: [16.66, 8.33],
  D: [21, 10.33],
  E: [26, 13.66],
  F: [31, 16.66],
} as const
/** EN 12897: stored 65 °C, ambient 20 °C (from memory; SANS 151 also states 45 K). */
const CLASS_TEST_DELTA_K = 45

export function lossWPerK(rating: LossRating, actualVolumeL: number): number {
  switch (rating.kind) {
    case 'ua':
      return rating.lossWPerK
    case 'uef': {
      // Maguire and Roberts 2020, as in OpenStudio-HPXML `calc_tank_UA`.
      const loadBtu = DRAW_PATTERN_GAL[rating.drawPattern] * BTU_PER_GAL_F * (SET_F - INLET_F)
      const bracket = 0.8 + (0.2 * (INLET_F - AMBIENT_F)) / (SET_F - AMBIENT_F)
      return ((loadBtu * (1 / rating.uef - 1)) / (24 * (SET_F - AMBIENT_F) * bracket)) * W_PER_K_PER_BTU_PER_H_F
    }
    case 'ef': {
      // Burch and Erickson 2004 (NREL); simple form. The WHAM form differs by 5 % at EF 0.90 and is ill-conditioned near 0.98.
      const loadBtu = 64.3 * BTU_PER_GAL_F * 77
      return ((loadBtu * (1 / rating.ef - 1)) / (67.5 * 24)) * W_PER_K_PER_BTU_PER_H_F
    }
    case 'kwh-per-day':
      return (rating.lossKwhPerDay * 1_000) / 24 / rating.testDeltaK
    case 'class': {
      const [fixedW, perVolume] = CLASS_LIMIT[rating.label]
      return (fixedW + perVolume * actualVolumeL ** 0.4) / CLASS_TEST_DELTA_K
    }
  }
}

/** Volume of a certification day in litres. */
export const drawPatternL = (pattern: keyof typeof DRAW_PATTERN_GAL): number => lFromUsGal(DRAW_PATTERN_GAL[pattern])
