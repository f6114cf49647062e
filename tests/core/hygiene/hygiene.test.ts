/** Scald times and growth range against the published tables. */
import { describe, expect, it } from 'vitest'
import { assessHygiene } from '#lib/core/hygiene/assess-hygiene.ts'
import { assessScald } from '#lib/core/hygiene/scald.ts'
import { cFromF } from '#lib/core/units.ts'

describe('assessScald', () => {
  // CPSC document 5098 publishes 5 min, 30 s, 6 s and 2 s at 120, 130, 140 and 150 °F; the shortest published time is shown.
  it.each([
    [120, 300],
    [130, 30],
    [140, 6],
    [150, 2],
  ])('is never longer than CPSC’s time at %d °F', (temperatureF, seconds) => {
    const found = assessScald(cFromF(temperatureF) + 0.05, null).secondsToBurn
    expect(found).not.toBeNull()
    expect(found ?? Infinity).toBeLessThanOrEqual(seconds)
  })
  it('counts the temperature behind a mixing valve', () => {
    expect(assessScald(60, 45)).toMatchObject({ atRisk: false, secondsToBurn: null })
    expect(assessScald(60, null)).toMatchObject({ atRisk: true, secondsToBurn: 5 })
  })
})

describe('assessHygiene', () => {
  const day = (coldestC: readonly number[]) => assessHygiene({ coldestC, sampleMin: 60, setPointC: 60, policy: 'store-60-daily-hour' })
  it('counts the hours between 20 and 45 °C (HSE) and whether 60 °C was held for an hour', () => {
    expect(day([...Array<number>(22).fill(30), 60, 60])).toMatchObject({ growthRangeHours: 22, sincePasteurisedH: 0 })
    expect(day(Array<number>(24).fill(30))).toMatchObject({ growthRangeHours: 24, sincePasteurisedH: null })
  })
})
