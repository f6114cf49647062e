/** Published tables, cell by cell, and the rating that comes back from the loss derived from it. */
import { describe, expect, it } from 'vitest'
import { inletC } from '#lib/core/tank/inlet.ts'
import { drawPatternL, lossWPerK } from '#lib/core/tank/loss.ts'
import { actualPowerW } from '#lib/core/tank/model.ts'
import { recoveryGalPerH } from '#lib/core/tank/recovery.ts'
import { hotFraction, simulate, uniformState } from '#lib/core/tank/simulate.ts'
import { fFromC } from '#lib/core/units.ts'
import { RATINGS } from '../../fixtures/tank/published-rows.data.ts'
import {
  CLASS_W,
  HOT_SHARE,
  HOT_SHARE_COLD_C,
  MAINS_F,
  MINUTES_SERVED,
  PREHEATS_MIN,
  RECOVERY_GPH,
  RECOVERY_RISES_F,
  UA_FROM_EF,
  UA_FROM_UEF,
} from '../../fixtures/tank/tables.data.ts'
import { dailyMean } from '../../support/certification-day.ts'
import { always, modelOf, OCHRE_WATER } from '../../support/tank-cases.ts'

describe('recoveryGalPerH', () => {
  const cells = RECOVERY_GPH.flatMap(([powerW, ...row]) =>
    row.flatMap((gph, column) => (gph === null ? [] : [{ powerW, riseF: RECOVERY_RISES_F[column] ?? NaN, gph }])),
  )
  it('covers the 54 cells of the table that are no misprint', () => {
    expect(cells).toHaveLength(54)
  })
  // ±0.11: the table was made with a constant between 8.33 and 8.35 lb/gal and rounded to 0.1.
  it.each(cells)('is $gph gal/h at $powerW W through $riseF °F', ({ powerW, riseF, gph }) => {
    expect(Math.abs(recoveryGalPerH({ powerW, riseF }) - gph)).toBeLessThanOrEqual(0.11)
  })
  it('shows the misprint: 5000 W through 80 °F is 25.6, printed 26.6', () => {
    expect(recoveryGalPerH({ powerW: 5_000, riseF: 80 })).toBeCloseTo(25.6, 1)
  })
})

describe('actualPowerW', () => {
  // Computed; 3380 W is also an element’s label, 4131 W a maker’s statement.
  it.each([
    [3_500, 2_629],
    [3_800, 2_854],
    [4_500, 3_380],
    [5_500, 4_131],
  ])('of %d W rated at 240 V is %d W on 208 V', (ratedPowerW, expectedW) => {
    expect(actualPowerW({ ratedPowerW, ratedVoltageV: 240 }, 208)).toBeCloseTo(expectedW, -0.4)
  })
})

describe('hotFraction', () => {
  const cells = HOT_SHARE.flatMap(([hotC, ...row]) => row.map((share, column) => ({ hotC, coldC: HOT_SHARE_COLD_C[column] ?? NaN, share })))
  it.each(cells)('is $share for 41 °C from $hotC and $coldC °C', ({ hotC, coldC, share }) => {
    expect(Math.abs(hotFraction({ useC: 41, hotC, coldC }) - share)).toBeLessThanOrEqual(0.001)
  })
})

describe('inletC', () => {
  const climate = { kind: 'climate', meanAirC: 10, swingAirK: 25, hemisphere: 'north' } as const
  const dayOf = (dayOfYear: number): string => new Date(Date.UTC(2026, 0, dayOfYear)).toISOString().slice(0, 10)
  it.each(MAINS_F.map((mainsF, month) => ({ mainsF, dayOfYear: 30 * (month + 1) - 15 })))(
    'is $mainsF °F on day $dayOfYear (mean 50, swing 45 °F)',
    ({ mainsF, dayOfYear }) => {
      // Printed to 0.1 °F.
      expect(Math.abs(fFromC(inletC(climate, dayOf(dayOfYear))) - mainsF)).toBeLessThanOrEqual(0.06)
    },
  )
  it('is 48.3 and 73.7 °F in February and August at 55 °F with a swing of 50, 66.2 and 85.7 in January and July at 70 with 30', () => {
    const at = (meanF: number, swingF: number, dayOfYear: number) =>
      fFromC(
        inletC({ kind: 'climate', meanAirC: ((meanF - 32) * 5) / 9, swingAirK: (swingF * 5) / 9, hemisphere: 'north' }, dayOf(dayOfYear)),
      )
    expect(at(55, 50, 45)).toBeCloseTo(48.3, 1)
    expect(at(55, 50, 225)).toBeCloseTo(73.7, 1)
    expect(at(70, 30, 15)).toBeCloseTo(66.2, 1)
    expect(at(70, 30, 195)).toBeCloseTo(85.7, 1)
  })
  it('has its cold season half a year later in the south, and never freezes', () => {
    const south = { ...climate, hemisphere: 'south' } as const
    expect(inletC(south, '2026-08-13')).toBeLessThan(inletC(south, '2026-02-14'))
    expect(inletC({ ...climate, meanAirC: -8 }, '2026-02-14')).toBeGreaterThanOrEqual(0)
  })
  it('takes a measured month as it stands', () => {
    expect(inletC({ kind: 'months', inletC: [5, 6, 7, 8, 9, 10, 11, 12, 13, 14, 15, 16] }, '2026-03-31')).toBe(7)
  })
})

describe('lossWPerK', () => {
  // Computed values printed to two decimals at least.
  it.each(UA_FROM_UEF)('of UEF %d in the %s pattern is %d W/K (Maguire and Roberts 2020)', (uef, drawPattern, expected) => {
    expect(Math.abs(lossWPerK({ kind: 'uef', uef, drawPattern }, 170) - expected)).toBeLessThan(0.005)
  })
  it.each(UA_FROM_EF)('of EF %d is %d W/K (Burch and Erickson 2004, simple form)', (ef, expected) => {
    expect(Math.abs(lossWPerK({ kind: 'ef', ef }, 170) - expected)).toBeLessThan(0.005)
  })
  it.each(CLASS_W)('of class %s at %d L is %d W at 45 K', (label, volumeL, expectedW) => {
    expect(lossWPerK({ kind: 'class', label }, volumeL) * 45).toBeCloseTo(expectedW, 1)
  })
  it('of 1.2 kWh in 24 h at 45 K is 1.11 W/K (SANS 151)', () => {
    expect(lossWPerK({ kind: 'kwh-per-day', lossKwhPerDay: 1.2, testDeltaK: 45 }, 150)).toBeCloseTo(1.11, 2)
  })
  it.each(RATINGS)('of UEF $uef brings the $pattern certification day back to that rating within 1 %', ({ pattern, uef, volumeL }) => {
    const ua = lossWPerK({ kind: 'uef', uef, drawPattern: pattern }, volumeL)
    const { inKwh, outKwh } = dailyMean({ lossWPerK: ua, on: [{ startMin: 0, endMin: 1_440 }], pattern, volumeL })
    expect(Math.abs(outKwh / inKwh / uef - 1)).toBeLessThan(0.01)
  })
  it('knows that a medium certification day takes 8.963 kWh at 67 °F rise (computed with WHAM’s water)', () => {
    const energyKwh = ((drawPatternL('medium') / 3.785411784) * 8.293752 * 1.000743 * 67) / 3_412.142
    expect(energyKwh).toBeCloseTo(8.963, 2)
  })
})

describe('the 15-minute and 30-minute rules of the trade (common practice, no source)', () => {
  const cells = MINUTES_SERVED.flatMap(({ served, ...tank }) =>
    served.map((minutes, column) => ({ ...tank, minutes, preheatMin: PREHEATS_MIN[column] ?? NaN })),
  )
  /** Of eight minutes, those that begin with the outlet at 40.5 °C. */
  const minutesServed = ({ volumeL, powerW, flowLPerMin, preheatMin }: (typeof cells)[number]): number => {
    const rated = { ratedPowerW: powerW, ratedVoltageV: 240 }
    const tank = modelOf({ actualVolumeL: volumeL, upperElement: rated, lowerElement: rated }, 15, OCHRE_WATER)
    let state = simulate(tank, uniformState(15, 12), always(preheatMin)).end
    let served = 0
    for (let minute = 0; minute < 8; minute++) {
      if ((state.nodesC[0] ?? 0) >= 40.5) served++
      state = simulate(tank, state, { ...always(1), draws: [{ startMin: 0, endMin: 1, flowLPerMin, useTemperatureC: 40.56 }] }).end
    }
    return served
  }
  it.each(cells)(
    'serves $minutes of 8 minutes of $flowLPerMin L/min after $preheatMin min at $powerW W in $volumeL L (OCHRE, a minute either way)',
    (cell) => {
      expect(Math.abs(minutesServed(cell) - cell.minutes)).toBeLessThanOrEqual(1)
    },
  )
  it('serves no whole shower after 15 min from cold in any of these tanks', () => {
    for (const cell of cells) if (cell.preheatMin === 15) expect(minutesServed(cell)).toBeLessThan(8)
  })
  it('serves a whole one of 7.57 L/min after 30 min at 4.5 kW, and at 3 kW does not', () => {
    for (const cell of cells) {
      if (cell.preheatMin !== 30 || cell.flowLPerMin !== 7.57) continue
      if (cell.powerW === 4_500) expect(minutesServed(cell)).toBe(8)
      else expect(minutesServed(cell)).toBeLessThan(8)
    }
  })
})
