/** Laws of the screening: more of what protects never makes it worse, what is not known never passes, memory never passes alone. */
import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { checkHardware, PROFILES } from '#lib/core/hardware/check-hardware.ts'
import type { Circuit, ControlSupply, Installation, ProfileId, Verdict } from '#lib/core/hardware/types.ts'
import { CONTROL, installed } from '../../support/installations.ts'

const PROFILE_IDS = Object.keys(PROFILES) as readonly ProfileId[]
const BADNESS: Readonly<Record<Verdict, number>> = { pass: 0, attention: 1, 'not-known': 2, fail: 3 }
const verdictOf = (installation: Installation, id: string, profile: ProfileId = 'us-nec-2023') =>
  checkHardware(installation, profile).find((one) => one.id === id)?.verdict ?? 'not-known'
const ofControl = (patch: Partial<ControlSupply>) => installed({ circuit: { control: { ...CONTROL, ...patch } } })

describe('checkHardware', () => {
  it('makes every check that is asked for, each with a title, a limit, a clause, a reason and a caution', () => {
    const ids = checkHardware(ofControl({}), 'us-nec-2023').map((one) => one.id)
    expect(ids).toEqual([
      'element-voltage',
      'contact-rating',
      'breaker-minimum',
      'breaker-maximum',
      'conductor',
      'voltage-drop',
      'poles',
      'isolator',
      'relief-valve',
      'separation',
      'mixing-valve',
      'expansion',
      'coil-voltage',
      'control-loop',
      'driver-current',
      'driver-saturation',
      'suppression',
      'transformer',
      'reservoir',
      'primary-fuse',
    ])
    for (const profile of PROFILE_IDS)
      for (const one of checkHardware(ofControl({}), profile))
        for (const text of [one.title, one.figure, one.limit, one.clause, one.reason, one.caution]) expect(text).not.toBe('')
  })
  it('passes a sound installation in full', () => {
    const found = checkHardware(installed({ circuit: { control: CONTROL } }), 'us-nec-2023').filter((one) => one.verdict !== 'pass')
    // A 9 V secondary barely holds a 12 V coil: published must-operate voltages say so.
    expect(found.map((one) => one.id)).toEqual(['coil-voltage', 'control-loop'])
  })
  it('never passes what nobody recorded', () => {
    const needs: readonly (readonly [keyof Circuit, string])[] = [
      ['breakerA', 'breaker-minimum'],
      ['breakerA', 'breaker-maximum'],
      ['conductor', 'conductor'],
      ['breakerA', 'conductor'],
      ['ambientC', 'conductor'],
      ['groupedConductors', 'conductor'],
      ['lengthM', 'voltage-drop'],
      ['contactRatingA', 'contact-rating'],
      ['contactRatingClass', 'contact-rating'],
      ['polesSwitched', 'poles'],
      ['isolatorInSight', 'isolator'],
      ['reliefValve', 'relief-valve'],
      ['expansionVessel', 'expansion'],
      ['extraLowVoltageSeparated', 'separation'],
    ]
    for (const [field, id] of needs)
      expect(verdictOf(installed({ circuit: { [field]: null } }), id), `${field} for ${id}`).toBe('not-known')
    const controlNeeds: readonly (readonly [keyof ControlSupply, string])[] = [
      ['coilRatedV', 'coil-voltage'],
      ['reservoirF', 'coil-voltage'],
      ['loopLengthM', 'control-loop'],
      ['loopOhmPerKm', 'control-loop'],
      ['transformerVa', 'transformer'],
      ['coilOhm', 'transformer'],
      ['reservoirRatedV', 'reservoir'],
      ['driver', 'driver-current'],
      ['driver', 'driver-saturation'],
      ['suppression', 'suppression'],
      ['primaryFuseA', 'primary-fuse'],
    ]
    for (const [field, id] of controlNeeds) expect(verdictOf(ofControl({ [field]: null }), id), `${field} for ${id}`).toBe('not-known')
  })
  it('never lets a figure from memory pass alone', () => {
    fc.assert(
      fc.property(
        fc.constantFrom(...PROFILE_IDS),
        fc.constantFrom('1', '1.5', '2.5', '4', '6', '10'),
        fc.integer({ min: 10, max: 50 }),
        fc.integer({ min: 2, max: 12 }),
        (profile, size, ambientC, groupedConductors) => {
          const circuit = {
            supplyVoltageV: 230,
            breakerA: 16,
            conductor: { size, system: 'mm2', material: 'copper', ratingC: 70 },
            ambientC,
            groupedConductors,
          } as const
          for (const one of checkHardware(installed({ powerW: 3_000, ratedVoltageV: 230, circuit }), profile))
            if (one.confirmAgainstCode) expect(one.verdict).not.toBe('pass')
        },
      ),
    )
  })
  it('is never worse for a larger conductor, in cooler air, with fewer neighbours, over a shorter way', () => {
    const awg = ['14', '12', '10', '8', '6', '4']
    fc.assert(
      fc.property(
        fc.integer({ min: 1_000, max: 9_000 }),
        fc.integer({ min: 0, max: 4 }),
        fc.integer({ min: 10, max: 45 }),
        fc.integer({ min: 2, max: 20 }),
        fc.integer({ min: 1, max: 80 }),
        fc.constantFrom(15, 20, 25, 30, 40),
        (powerW, size, ambientC, groupedConductors, lengthM, breakerA) => {
          const badness = (patch: Partial<Circuit>, id: string) =>
            BADNESS[
              verdictOf(
                installed({
                  powerW,
                  circuit: {
                    breakerA,
                    ambientC,
                    groupedConductors,
                    lengthM,
                    conductor: { size: awg[size]!, system: 'awg', material: 'copper', ratingC: 60 },
                    ...patch,
                  },
                }),
                id,
              )
            ]
          const now = badness({}, 'conductor')
          expect(
            badness({ conductor: { size: awg[size + 1]!, system: 'awg', material: 'copper', ratingC: 60 } }, 'conductor'),
          ).toBeLessThanOrEqual(now)
          expect(badness({ ambientC: ambientC - 10 }, 'conductor')).toBeLessThanOrEqual(now)
          expect(badness({ groupedConductors: Math.max(2, groupedConductors - 3) }, 'conductor')).toBeLessThanOrEqual(now)
          expect(badness({ lengthM: lengthM / 2 }, 'voltage-drop')).toBeLessThanOrEqual(badness({}, 'voltage-drop'))
        },
      ),
    )
  })
  it('is never better for a larger load', () => {
    fc.assert(
      fc.property(
        fc.integer({ min: 1_000, max: 8_000 }),
        fc.integer({ min: 0, max: 3_000 }),
        fc.constantFrom(...PROFILE_IDS),
        (powerW, moreW, profile) => {
          const at = (watts: number, id: string) => BADNESS[verdictOf(installed({ powerW: watts }), id, profile)]
          for (const id of ['contact-rating', 'breaker-minimum', 'conductor', 'voltage-drop'])
            expect(at(powerW + moreW, id)).toBeGreaterThanOrEqual(at(powerW, id))
        },
      ),
    )
  })
  it('says not known where a table does not hold the conductor', () => {
    expect(
      verdictOf(installed({ circuit: { conductor: { size: '10', system: 'awg', material: 'aluminium', ratingC: 60 } } }), 'conductor'),
    ).toBe('not-known')
    expect(verdictOf(installed({ circuit: { ambientC: 60 } }), 'conductor')).toBe('not-known')
    const aluminium = { size: '10', system: 'awg', material: 'aluminium', ratingC: 60 } as const
    expect(verdictOf(installed({ circuit: { conductor: aluminium } }), 'voltage-drop')).toBe('not-known')
  })
})

describe('the control side', () => {
  it('fails a coil on a bare 12 V secondary for heat, and one on 6 V for not pulling in', () => {
    expect(verdictOf(ofControl({ transformerSecondaryV: 12, transformerRegulationFraction: 0.3 }), 'coil-voltage')).toBe('fail')
    expect(verdictOf(ofControl({ transformerSecondaryV: 6 }), 'coil-voltage')).toBe('fail')
  })
  it('calls a 25 V reservoir behind 12 V narrow and a 16 V one too low (no-load peaks of 20 to 22 V)', () => {
    const behind12V = { transformerSecondaryV: 12 } as const
    expect(verdictOf(ofControl({ ...behind12V, reservoirRatedV: 25 }), 'reservoir')).toBe('attention')
    expect(verdictOf(ofControl({ ...behind12V, reservoirRatedV: 16 }), 'reservoir')).toBe('fail')
    expect(verdictOf(ofControl({ ...behind12V, reservoirRatedV: 35 }), 'reservoir')).toBe('pass')
  })
  it('never passes a reservoir on a regulation that nobody read', () => {
    expect(verdictOf(ofControl({ transformerRegulationFraction: null, reservoirRatedV: 63 }), 'reservoir')).toBe('attention')
  })
  it('asks for 3.1 VA and more behind 12 V for a coil of 160 mA with its timer', () => {
    expect(verdictOf(ofControl({ transformerVa: 2 }), 'transformer')).toBe('fail')
    expect(verdictOf(ofControl({ transformerVa: 5 }), 'transformer')).toBe('pass')
  })
  it('fails a 577 mA contactor coil on a 600 mA transistor (20.8 Ω: TE P30/P40)', () => {
    expect(verdictOf(ofControl({ coilOhm: 20.8 }), 'driver-current')).toBe('fail')
  })
  it('fails a driver that 10 kΩ does not saturate, and passes 680 Ω (2N4401: least gain 100)', () => {
    const by = (baseResistorOhm: number) =>
      verdictOf(ofControl({ driver: { maxCurrentA: 0.6, baseResistorOhm, gainMin: 100 } }), 'driver-saturation')
    expect([by(680), by(2_200), by(10_000)]).toEqual(['pass', 'attention', 'fail'])
  })
  it('fails a coil without any suppressor', () => {
    expect(verdictOf(ofControl({ suppression: 'none' }), 'suppression')).toBe('fail')
    expect(verdictOf(ofControl({ suppression: 'diode' }), 'suppression')).toBe('pass')
  })
  it('wants a primary fuse of 1.5 to 2 times, next value up: 32 to 50 mA for 5 VA at 240 V', () => {
    const by = (primaryFuseA: number) => verdictOf(ofControl({ primaryFuseA }), 'primary-fuse')
    expect([by(0.032), by(0.05), by(0.063), by(1)]).toEqual(['pass', 'pass', 'attention', 'fail'])
  })
  it('is not checked where no such parts are on record', () => {
    expect(checkHardware(installed(), 'us-nec-2023').some((one) => one.id === 'coil-voltage')).toBe(false)
  })
})
