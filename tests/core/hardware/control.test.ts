/** The low-voltage side of a home-built timer against published relay, transistor, rectifier and fuse data. */
import { describe, expect, it } from 'vitest'
import { checkHardware } from '#lib/core/hardware/check-hardware.ts'
import type { Installation } from '#lib/core/hardware/types.ts'
import { installed } from '../../support/installations.ts'
import { CONTROL_NEEDS, ofControl, verdictOf } from '../../support/screening.ts'

describe('the control side', () => {
  it('passes a 12 V coil behind a stiff 10 V transformer in full once mains and regulation were read, but for the fuse, sized from memory', () => {
    const sound = ofControl({ transformerSecondaryV: 10, transformerRegulationFraction: 0.1, reservoirF: 2.2e-3 })
    const found = checkHardware(sound, 'us-nec-2023').filter((one) => one.id in CONTROL_NEEDS && one.verdict !== 'pass')
    expect(found.map((one) => [one.id, one.verdict])).toEqual([['primary-fuse', 'attention']])
  })
  it('confirms nothing that leans on the mains’ range or the regulation until somebody read them', () => {
    for (const [circuit, control] of [
      [{ mainsRangeV: null }, {}],
      [{}, { transformerRegulationFraction: null }],
    ] as const) {
      const one = ofControl({ ...control, reservoirRatedV: 63 }, circuit)
      expect(checkHardware(one, 'us-nec-2023').find((check) => check.id === 'reservoir')).toMatchObject({
        verdict: 'attention',
        confirmAgainstCode: true,
      })
    }
    expect(verdictOf(ofControl({ reservoirRatedV: 63 }), 'reservoir')).toBe('pass')
  })
  it('fails a coil on a bare 12 V secondary for heat, and one on 6 V for not pulling in', () => {
    expect(verdictOf(ofControl({ transformerSecondaryV: 12, transformerRegulationFraction: 0.3 }), 'coil-voltage')).toBe('fail')
    expect(verdictOf(ofControl({ transformerSecondaryV: 6 }), 'coil-voltage')).toBe('fail')
  })
  it('calls a 25 V reservoir behind 12 V narrow and a 16 V one too low (no-load peaks of 20 V)', () => {
    const rated = (reservoirRatedV: number) => verdictOf(ofControl({ transformerSecondaryV: 12, reservoirRatedV }), 'reservoir')
    expect([rated(25), rated(16), rated(35)]).toEqual(['attention', 'fail', 'pass'])
  })
  it('fails a transformer below one maker’s rule and passes it only above the other’s', () => {
    // 9 V: 11.33 V at 86 Ω is 132 mA, with 15 mA for the timer 147 mA: 2.13 VA by 0.62, 2.38 VA by 1.8.
    const by = (transformerVa: number) => verdictOf(ofControl({ transformerVa }), 'transformer')
    expect([by(2), by(2.25), by(2.5)]).toEqual(['fail', 'attention', 'pass'])
  })
  it('fails a 577 mA contactor coil on a 600 mA transistor (20.8 Ω: TE P30/P40)', () => {
    expect(verdictOf(ofControl({ coilOhm: 20.8 }), 'driver-current')).toBe('fail')
  })
  it('fails a driver that 10 kΩ does not saturate, and passes 680 Ω (2N4401: least gain 100)', () => {
    const by = (baseResistorOhm: number) =>
      verdictOf(ofControl({ driver: { maxCurrentA: 0.6, baseResistorOhm, gainMin: 100 } }), 'driver-saturation')
    expect([by(680), by(1_000), by(2_200), by(10_000)]).toEqual(['pass', 'attention', 'attention', 'fail'])
  })
  it('fails 14 mA of base current out of a CMOS timer, of which makers test 10 mA at the most', () => {
    const timed = (icFamily: 'bipolar' | 'cmos'): Installation => ({
      ...ofControl({ driver: { maxCurrentA: 0.6, baseResistorOhm: 600, gainMin: 100 } }),
      controller: {
        kind: 'one-shot-rc',
        resistanceOhm: 1e6,
        resistanceToleranceFraction: 0.05,
        capacitanceF: 1e-3,
        capacitanceToleranceFraction: 0.2,
        supplyV: 12,
        icFamily,
        leakage: { kind: 'unknown' },
      },
    })
    expect([verdictOf(timed('cmos'), 'driver-saturation'), verdictOf(timed('bipolar'), 'driver-saturation')]).toEqual(['fail', 'pass'])
  })
  it('fails a coil without any suppressor', () => {
    expect(verdictOf(ofControl({ suppression: 'none' }), 'suppression')).toBe('fail')
    expect(verdictOf(ofControl({ suppression: 'diode' }), 'suppression')).toBe('pass')
  })
  it('wants a primary fuse of 1.5 to 2 times, next value up: 32 to 50 mA for 5 VA at 240 V; passes none of them', () => {
    const reason = (primaryFuseA: number) =>
      checkHardware(ofControl({ primaryFuseA }), 'us-nec-2023').find((one) => one.id === 'primary-fuse')
    expect([0.032, 0.05].map((fuse) => [reason(fuse)?.verdict, reason(fuse)?.reason])).toEqual(
      Array(2).fill(['attention', 'Of the usual size for this transformer.']),
    )
    expect(reason(0.063)?.reason).toContain('Outside the usual size')
    expect(reason(1)?.verdict).toBe('fail')
  })
  it('is asked for where the timer is home-built, and not checked where no such parts are', () => {
    expect(checkHardware(installed(), 'us-nec-2023').some((one) => one.id in CONTROL_NEEDS)).toBe(false)
    const homeBuilt = { ...installed(), controller: { kind: 'one-shot-rc', resistanceOhm: 1e6, resistanceToleranceFraction: 0.05, capacitanceF: 1e-3, capacitanceToleranceFraction: 0.2, supplyV: 12, icFamily: 'bipolar', leakage: { kind: 'unknown' } } } as const // prettier-ignore
    const verdicts = checkHardware(homeBuilt, 'us-nec-2023').filter((one) => one.id in CONTROL_NEEDS)
    expect(verdicts).toHaveLength(Object.keys(CONTROL_NEEDS).length)
    expect(new Set(verdicts.map((one) => one.verdict))).toEqual(new Set(['not-known']))
  })
})
