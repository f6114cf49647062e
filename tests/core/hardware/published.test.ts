/** Screening against published figures; each table's source stands beside it. */
import { describe, expect, it } from 'vitest'
import { checkHardware, loadCurrentA } from '#lib/core/hardware/check-hardware.ts'
import { twoWireDropV } from '#lib/core/hardware/conductor-checks.ts'
import { coilV, forcedGain, rectifiedPeakV, rippleV, secondaryA, warmCoilFactor } from '#lib/core/hardware/control-supply.ts'
import { actualPowerW } from '#lib/core/tank/model.ts'
import * as published from '../../fixtures/hardware/published-rows.data.ts'
import { installed } from '../../support/installations.ts'

/** Relative, since the rows are printed to four or five digits: half a unit of the last one is at most 0.06 %. */
const TOLERANCE_FRACTION = 1e-3
/** Printed to three digits. */
const ROUGH_FRACTION = 3e-3
const near = (value: number, expected: number, fraction = TOLERANCE_FRACTION) =>
  expect(Math.abs(value / expected - 1)).toBeLessThan(fraction)
const used = new Set<unknown>()
const of = <Row>(row: Row): Row => {
  used.add(row)
  return row
}
const SIZES_A = [15, 20, 25, 30, 35, 40, 45, 50]

describe('circuits of storage heaters, NEC 2017–2023', () => {
  it.each(published.US_CIRCUITS)('of $powerW W at $volts V: $leastA to $mostA A on $awg AWG ($source)', (row) => {
    const { powerW, volts, currentA, continuousA, leastA, mostA, awg } = of(row)
    const at = (breakerA: number) => installed({ powerW, ratedVoltageV: volts, circuit: { supplyVoltageV: volts, breakerA } })
    near(loadCurrentA(at(30)), currentA)
    const verdict = (breakerA: number, id: string) => checkHardware(at(breakerA), 'us-nec-2023').find((one) => one.id === id)
    near(Number(/\(([\d.]+) A continuous\)/.exec(verdict(30, 'breaker-minimum')?.limit ?? '')?.[1]), continuousA)
    const allowed = SIZES_A.filter(
      (breakerA) => verdict(breakerA, 'breaker-minimum')?.verdict === 'pass' && verdict(breakerA, 'breaker-maximum')?.verdict === 'pass',
    )
    expect([allowed[0], allowed.at(-1)]).toEqual([leastA, mostA])
    const wire = (size: string) =>
      checkHardware(
        installed({
          powerW,
          ratedVoltageV: volts,
          circuit: { supplyVoltageV: volts, breakerA: leastA, conductor: { size, system: 'awg', material: 'copper', ratingC: 60 } },
        }),
        'us-nec-2023',
      ).find((one) => one.id === 'conductor')?.verdict
    expect(['14', '12', '10', '8', '6', '4'].find((size) => wire(size) === 'pass')).toBe(awg)
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
  it('draws 0.258 A from the secondary for 0.16 A direct', () => {
    near(secondaryA(of(published.SECONDARY).directA), published.SECONDARY.alternatingA)
  })
  it.each(published.FORCED_GAINS)('forces a gain of $gain by $baseResistorOhm Ω', (row) => {
    near(forcedGain({ supplyV: 12, coilOhm: 86, baseResistorOhm: of(row).baseResistorOhm }), row.gain)
  })
  it.each(published.WARM_COILS)('needs $volts V at $coilC °C for a 9.0 V coil', (row) =>
    near(9 * warmCoilFactor(of(row).coilC), row.volts, ROUGH_FRACTION),
  )
})

describe('the published rows', () => {
  it('are all checked, none skipped', () => {
    const rows: readonly unknown[] = Object.values(published).flatMap((table): readonly unknown[] =>
      Array.isArray(table) ? table : [table],
    )
    expect(rows.filter((row) => !used.has(row))).toEqual([])
    expect(rows).toHaveLength(32)
  })
})
