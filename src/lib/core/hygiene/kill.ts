/**
 * Minutes at a temperature that leave a tenth of Legionella in suspension alive, for showing why a few degrees matter. A screening
 * figure from the laboratory: biofilm, sediment and unheated water are outside it, and it is never a guarantee.
 */

/** D = 2 min at 60 °C (WHO 2007), z = 5.29 K (Sanden 1989; Schulze-Röbbecke and Buchholtz 1992). "32 min" and "25 min" elsewhere are total kill and 8 logs. */
const D_60_MIN = 2
const Z_K = 5.29
/** Below it the formula says longer than the 80 to 124 min that were measured, and growth competes. */
const LOWEST_C = 50

/** `null` below 50 °C, where the formula does not hold. */
export const decimalReductionMin = (temperatureC: number): number | null =>
  temperatureC < LOWEST_C ? null : D_60_MIN * 10 ** ((60 - temperatureC) / Z_K)
