/** Hardware screening against published worked examples: EC&M code Q&A (4500 W, 5500 W), makers' statements, trade tables. */
import { describe, expect, it } from 'vitest'
import { checkHardware, loadCurrentA } from '#lib/core/hardware/check-hardware.ts'
import type { Circuit, Installation, ProfileId } from '#lib/core/hardware/types.ts'

const CIRCUIT: Circuit = {
  supplyVoltageV: 240,
  breakerA: 30,
  conductor: { size: '10', system: 'awg', material: 'copper', ratingC: 60 },
  lengthM: 15,
  ambientC: 25,
  groupedConductors: 2,
  contactRatingA: 30,
  contactRatingClass: 'resistive',
  polesSwitched: 2,
  isolatorInSight: true,
  reliefValve: true,
  expansionVessel: null,
  closedSystem: null,
  extraLowVoltageSeparated: true,
  control: null,
}
const install = (powerW: number, circuit: Partial<Circuit> = {}, ratedVoltageV = 240): Installation => ({
  load: {
    kind: 'storage-heater',
    tank: {
      nominalVolumeL: 189,
      actualVolumeL: null,
      heightM: null,
      loss: { kind: 'ua', lossWPerK: 1.2 },
      upperElement: null,
      lowerElement: { ratedPowerW: powerW, ratedVoltageV },
      shareAboveUpperFraction: 1 / 3,
      setPointC: 60,
      deadBandK: 5,
      ambientC: 20,
      mixingValveC: 49,
    },
  },
  controller: { kind: 'dial', settingMin: 60, scaleMaxMin: 120, toleranceFraction: 0.05 },
  circuit: { ...CIRCUIT, ...circuit },
})
const verdict = (installation: Installation, id: string, profile: ProfileId = 'us-nec-2023') =>
  checkHardware(installation, profile).find((check) => check.id === id)?.verdict

describe('checkHardware, NEC', () => {
  // Power, volts, current, smallest and largest device: 125 % and 150 % rules with standard sizes, 2017–2023.
  it.each([
    [3_800, 240, 15.833, 20, 25],
    [4_500, 240, 18.75, 25, 30],
    [5_500, 240, 22.917, 30, 35],
    [3_000, 240, 12.5, 20, 20],
    [6_000, 240, 25, 35, 40],
  ])('asks for the published devices at %d W, %d V', (powerW, volts, currentA, smallestA, largestA) => {
    const base = { supplyVoltageV: volts }
    expect(loadCurrentA(install(powerW, base))).toBeCloseTo(currentA, 2)
    const sizes = [15, 20, 25, 30, 35, 40, 45, 50]
    const allowed = sizes.filter(
      (breakerA) =>
        verdict(install(powerW, { ...base, breakerA }), 'breaker-minimum') === 'pass' &&
        verdict(install(powerW, { ...base, breakerA }), 'breaker-maximum') === 'pass',
    )
    expect([allowed[0], allowed.at(-1)]).toEqual([smallestA, largestA])
  })
  it('fails 20 A on 12 AWG for a 4500 W element at 208 V: 16.25 A continuous needs 20.31 A', () => {
    const wrong = install(4_500, {
      supplyVoltageV: 208,
      breakerA: 20,
      conductor: { size: '12', system: 'awg', material: 'copper', ratingC: 60 },
    })
    expect(verdict(wrong, 'breaker-minimum')).toBe('fail')
    expect(verdict(wrong, 'conductor')).toBe('fail')
  })
  it('fails a 35 A device on 10 AWG, which 240.4(D) caps at 30 A', () => {
    expect(verdict(install(5_500, { breakerA: 35 }), 'conductor')).toBe('fail')
  })
  it('fails a 208 V element on 240 V: 133 % of its power', () => {
    const check = checkHardware(install(4_500, {}, 208), 'us-nec-2023').find((one) => one.id === 'element-voltage')
    expect(check).toMatchObject({ verdict: 'fail', figure: expect.stringContaining('133 %') })
  })
})

describe('checkHardware, BS 7671 and IEC', () => {
  it('drops 4.70 V (2.04 %) for 3 kW over 20 m of 2.5 mm²', () => {
    const unit = install(
      3_000,
      { supplyVoltageV: 230, lengthM: 20, breakerA: 16, conductor: { size: '2.5', system: 'mm2', material: 'copper', ratingC: 70 } },
      230,
    )
    const check = checkHardware(unit, 'gb-bs7671').find((one) => one.id === 'voltage-drop')
    expect(check).toMatchObject({ verdict: 'pass', figure: '4.70 V (2.04 %)' })
  })
  it('never lets a capacity known from memory pass alone', () => {
    const unit = install(
      3_000,
      { supplyVoltageV: 230, breakerA: 16, conductor: { size: '2.5', system: 'mm2', material: 'copper', ratingC: 70 } },
      230,
    )
    const check = checkHardware(unit, 'iec-60364').find((one) => one.id === 'conductor')
    expect(check).toMatchObject({ verdict: 'attention', confirmAgainstCode: true })
  })
})

describe('checkHardware, what is not known', () => {
  it('shows not known, never pass, for every field nobody recorded', () => {
    const blank = install(4_500, {
      breakerA: null,
      conductor: null,
      lengthM: null,
      contactRatingA: null,
      contactRatingClass: null,
      polesSwitched: null,
      isolatorInSight: null,
      reliefValve: null,
      extraLowVoltageSeparated: null,
    })
    const verdicts = checkHardware(blank, 'us-nec-2023').filter((check) => !['element-voltage', 'mixing-valve'].includes(check.id))
    expect(verdicts.length).toBeGreaterThanOrEqual(8)
    expect(new Set(verdicts.map((check) => check.verdict))).toEqual(new Set(['not-known']))
  })
  it('carries a caution and a clause on every check', () => {
    for (const check of checkHardware(install(4_500), 'gb-bs7671')) {
      expect(check.caution).not.toBe('')
      expect(check.clause).not.toBe('')
    }
  })
})
