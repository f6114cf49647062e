/** Water against IAPWS-95, the formulation that both formulas approximate. */
import { describe, expect, it } from 'vitest'
import { densityKgPerM3, expansionL, heatCapacityJPerLK, specificHeatKjPerKgK } from '#lib/core/tank/water.ts'
import { IAPWS95_WATER } from '../../fixtures/tank/iapws95-water.data.ts'

/** 0.01 %: the table is printed to 1e-6 (density) and 1.2e-5 (heat), so rounding is no excuse for more. */
const TOLERANCE_FRACTION = 1e-4
const away = (value: number, published: number) => Math.abs(value / published - 1)

describe('densityKgPerM3', () => {
  it.each(IAPWS95_WATER)(
    'is within 0.01 % of IAPWS-95 at $temperatureC °C (CV-14 at 60 °C)',
    ({ temperatureC, densityKgPerM3: published }) => {
      expect(away(densityKgPerM3(temperatureC), published)).toBeLessThan(TOLERANCE_FRACTION)
    },
  )
})

describe('specificHeatKjPerKgK', () => {
  it.each(IAPWS95_WATER)(
    'is within 0.01 % of IAPWS-95 at $temperatureC °C (CV-14 at 60 °C)',
    ({ temperatureC, specificHeatKjPerKgK: published }) => {
      expect(away(specificHeatKjPerKgK(temperatureC), published)).toBeLessThan(TOLERANCE_FRACTION)
    },
  )
})

describe('heatCapacityJPerLK', () => {
  it.each(IAPWS95_WATER)('is within 0.01 % of IAPWS-95 at $temperatureC °C', ({ temperatureC, heatMjPerM3K }) => {
    expect(away(heatCapacityJPerLK(temperatureC), heatMjPerM3K * 1_000)).toBeLessThan(TOLERANCE_FRACTION)
  })
})

describe('expansionL', () => {
  it('pushes 2.76 L out of 170.3 L heated from 15 to 60 °C (CV-15, IAPWS-95, 1 %)', () => {
    expect(away(expansionL(170.3, { fromC: 15, toC: 60 }), 2.76)).toBeLessThan(0.01)
  })
})
