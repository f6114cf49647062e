/** Screening against published figures and worked examples; each table's source stands beside it in the fixture. */
import { describe, expect, it } from 'vitest'
import { checkHardware, PROFILES } from '#lib/core/hardware/check-hardware.ts'
import { twoWireDropV } from '#lib/core/hardware/conductor-checks.ts'
import { AC_PER_DC, coilV, forcedGain, rectifiedPeakV, rippleV, secondaryA, warmCoilFactor } from '#lib/core/hardware/control-supply.ts'
import { recorded } from '#lib/core/hardware/recorded.ts'
import { dwellingDemandFactor, heaterDemandFactor } from '#lib/core/hardware/service-demand.ts'
import type { Installation, ProfileId } from '#lib/core/hardware/types.ts'
import { actualPowerW } from '#lib/core/tank/model.ts'
import * as published from '../../fixtures/hardware/published-rows.data.ts'
import { installed } from '../../support/installations.ts'

/** What a figure may differ by, and why. */
const TOLERANCE = {
  /** Relative: rows are printed to four or five digits, half a unit of the last one is at most 0.06 %. */
  printed: 1e-3,
  /** Relative: rows printed to three digits. */
  printedToThree: 3e-3,
  /** A: the annex's results are whole amperes. */
  wholeA: 0.5,
  /** Relative: longest runs are printed to 0.1 m or 0.1 ft, at most 0.17 % of the shortest. */
  longest: 2e-3,
} as const

const near = (value: number, expected: number, fraction: number = TOLERANCE.printed) =>
  expect(Math.abs(value / expected - 1)).toBeLessThan(fraction)
const used = new Set<unknown>()
const of = <Row>(row: Row): Row => {
  used.add(row)
  return row
}
const checkOf = (installation: Installation, id: string, profile: ProfileId = 'us-nec-2023') =>
  checkHardware(installation, profile).find((one) => one.id === id)
const loadA = (installation: Installation): number => recorded(installation).loadA ?? NaN

describe('circuits of storage heaters, NEC 2017–2023', () => {
  it.each(published.US_CIRCUITS)('of $powerW W at $volts V: $leastA to $mostA A on $awg AWG ($source)', (row) => {
    const { powerW, volts, currentA, continuousA, leastA, mostA, awg } = of(row)
    const at = (breakerA: number) => installed({ powerW, ratedVoltageV: volts, circuit: { supplyVoltageV: volts, breakerA } })
    near(loadA(at(30)), currentA)
    near(Number(/\(([\d.]+) A continuous\)/.exec(checkOf(at(30), 'breaker-minimum')?.limit ?? '')?.[1]), continuousA)
    const allowed = PROFILES['us-nec-2023'].deviceSizesA.filter(
      (breakerA) =>
        checkOf(at(breakerA), 'breaker-minimum')?.verdict === 'pass' && checkOf(at(breakerA), 'breaker-maximum')?.verdict === 'pass',
    )
    expect([allowed[0], allowed.at(-1)]).toEqual([leastA, mostA])
    const wired = (size: string) => {
      const conductor = { size, system: 'awg', material: 'copper', ratingC: 60 } as const
      const circuit = { supplyVoltageV: volts, breakerA: leastA, conductor }
      return checkOf(installed({ powerW, ratedVoltageV: volts, circuit }), 'conductor')?.verdict
    }
    expect(['14', '12', '10', '8', '6', '4'].find((size) => wired(size) === 'pass')).toBe(awg)
  })
  it('of 4500 W: 12.8 Ω, and 16.25 A at 208 V', () => {
    const { powerW, ratedV, ohm, volts, currentA } = of(published.ELEMENT)
    near(ratedV / loadA(installed({ powerW })), ohm)
    near(loadA(installed({ powerW, circuit: { supplyVoltageV: volts } })), currentA)
  })
  it.each(published.ANNEX_D4B)('of $units dwellings count $demandVa VA, $amperes A (annex D4(b))', (row) => {
    const { units, dwellingVa, factor, demandVa, amperes } = of(row)
    const counted = (dwellingDemandFactor(PROFILES['us-nec-2023'], units) ?? NaN) * units * dwellingVa
    expect(dwellingDemandFactor(PROFILES['us-nec-2023'], units)).toBe(factor)
    near(counted, demandVa)
    expect(Math.abs(counted / 240 - amperes)).toBeLessThanOrEqual(TOLERANCE.wholeA)
  })
  it('of four heaters count three quarters (220.53), and all of them in the United Kingdom', () => {
    const { heaters, connectedW, countedW } = of(published.FASTENED_APPLIANCES)
    expect(heaterDemandFactor(PROFILES['us-nec-2023'], heaters) * connectedW).toBe(countedW)
    expect(heaterDemandFactor(PROFILES['us-nec-2023'], heaters - 1)).toBe(1)
    // Thermostatic water heaters: 100 %, no diversity (Whitfield, Electrician's Guide, table 6.2, from the On-Site Guide).
    expect(heaterDemandFactor(PROFILES['gb-bs7671'], heaters)).toBe(1)
  })
  it.each(published.DWELLINGS_CONFIRMED)('of $units dwellings count $percent %', (row) => {
    near(100 * (dwellingDemandFactor(PROFILES['us-nec-2023'], of(row).units) ?? NaN), row.percent)
  })
  it('of fewer than three dwellings have no factor', () => {
    expect(dwellingDemandFactor(PROFILES['us-nec-2023'], 2)).toBeNull()
  })
})

describe('the longest cable', () => {
  it.each(published.LONGEST_RUNS)('of $size for $powerW W is $longestM m ($profile)', (row) => {
    const { profile, powerW, volts, size, longestM } = of(row)
    const american = profile === 'us-nec-2023'
    const conductor = { size, system: american ? 'awg' : 'mm2', material: 'copper', ratingC: american ? 60 : 70 } as const
    const verdict = (lengthM: number) =>
      checkOf(installed({ powerW, ratedVoltageV: volts, circuit: { supplyVoltageV: volts, conductor, lengthM } }), 'voltage-drop', profile)
        ?.verdict
    expect([verdict(longestM * (1 - TOLERANCE.longest)), verdict(longestM * (1 + TOLERANCE.longest))]).toEqual(['pass', 'attention'])
  })
})

describe('formulas', () => {
  it.each(published.POWER_AT_VOLTAGE)('$ratedW W at $ratedV V takes $powerW W at $volts V', (row) => {
    const { ratedW, ratedV, volts, powerW } = of(row)
    near(actualPowerW({ ratedPowerW: ratedW, ratedVoltageV: ratedV }, volts), powerW)
  })
  it.each(published.VOLTAGE_DROPS)('$currentA A over $lengthM m drops $dropV V ($source)', (row) => {
    near(twoWireDropV(of(row)), row.dropV)
  })
  it.each(published.COIL_LOOPS)('leaves $coilV V at the coil after $feet ft', (row) => {
    const loopOhm = 2 * 0.0333 * of(row).feet * 0.3048
    near(coilV({ supplyV: 12, coilOhm: 86, loopOhm }), row.coilV)
  })
  it.each(published.RECTIFIED)('rectifies $secondaryV V times $raise to $peakV V', (row) => {
    near(rectifiedPeakV(of(row).secondaryV, row.raise), row.peakV)
  })
  it.each(published.RIPPLES)('ripples $rippleV V at $mainsHz Hz', (row) => near(rippleV(of(row)), row.rippleV))
  it('draws 0.258 A from the secondary for 0.16 A direct: 3.10 VA by one maker, 3.46 VA by another', () => {
    const { directA, alternatingA, secondaryV, leastVa, ampleVa } = of(published.SECONDARY)
    near(secondaryA(directA), alternatingA)
    near(secondaryA(directA) * secondaryV, leastVa, TOLERANCE.printedToThree)
    near(AC_PER_DC * directA * secondaryV, ampleVa)
  })
  it.each(published.FORCED_GAINS)('forces a gain of $gain by $baseResistorOhm Ω', (row) => {
    near(forcedGain({ supplyV: 12, coilOhm: 86, baseResistorOhm: of(row).baseResistorOhm }), row.gain)
  })
  it.each(published.WARM_COILS)('needs $volts V at $coilC °C for a 9.0 V coil', (row) =>
    near(9 * warmCoilFactor(of(row).coilC), row.volts, TOLERANCE.printedToThree),
  )
})

describe('the published rows', () => {
  /** How many rows each source prints; a row that is dropped from the fixture, or not checked above, fails here. */
  const PRINTED: Readonly<Record<keyof typeof published, number>> = {
    US_CIRCUITS: 10,
    ELEMENT: 1,
    ANNEX_D4B: 2,
    FASTENED_APPLIANCES: 1,
    DWELLINGS_CONFIRMED: 6,
    LONGEST_RUNS: 7,
    POWER_AT_VOLTAGE: 5,
    VOLTAGE_DROPS: 3,
    COIL_LOOPS: 5,
    RECTIFIED: 5,
    RIPPLES: 2,
    SECONDARY: 1,
    FORCED_GAINS: 3,
    WARM_COILS: 2,
  }
  it.each(Object.keys(PRINTED) as (keyof typeof published)[])('of %s are all there and all checked', (name) => {
    const table: unknown = published[name]
    const rows: readonly unknown[] = Array.isArray(table) ? table : [table]
    expect(rows).toHaveLength(PRINTED[name])
    expect(rows.filter((row) => !used.has(row))).toEqual([])
  })
})
