/** Constants and the few conversions of the core, each written once. SI inside; a name ends in its unit. */

export const MS_PER_MIN = 60_000
export const MIN_PER_DAY = 1_440
export const MIN_PER_HOUR = 60
export const J_PER_KWH = 3_600_000
/** US liquid gallon, exact (NIST SP 811, appendix B.8). */
export const L_PER_US_GAL = 3.785411784
/** 1 Btu(IT)/(h·°F) in W/K (NIST SP 811, appendix B.8). */
export const W_PER_K_PER_BTU_PER_H_F = 0.527_528

export const kwhFromJ = (energyJ: number): number => energyJ / J_PER_KWH
export const cFromF = (temperatureF: number): number => ((temperatureF - 32) * 5) / 9
export const fFromC = (temperatureC: number): number => (temperatureC * 9) / 5 + 32
export const lFromUsGal = (volumeUsGal: number): number => volumeUsGal * L_PER_US_GAL
export const usGalFromL = (volumeL: number): number => volumeL / L_PER_US_GAL
