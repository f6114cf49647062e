/** Laws of the screening: more of what protects never makes it worse, what is not known never passes, memory never passes alone. */
import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { checkHardware, PROFILES } from '#lib/core/hardware/check-hardware.ts'
import type { Circuit, ControlSupply, Installation, ProfileId, Verdict } from '#lib/core/hardware/types.ts'
import type { TankSpec } from '#lib/core/tank/types.ts'
import { CONTROL, installed } from '../../support/installations.ts'

const PROFILE_IDS = Object.keys(PROFILES) as readonly ProfileId[]
const BADNESS: Readonly<Record<Verdict, number>> = { pass: 0, attention: 1, 'not-known': 2, fail: 3 }
const verdictOf = (installation: Installation, id: string, profile: ProfileId = 'us-nec-2023'): Verdict | undefined =>
  checkHardware(installation, profile).find((one) => one.id === id)?.verdict
const badnessOf = (installation: Installation, id: string, profile?: ProfileId): number =>
  BADNESS[verdictOf(installation, id, profile) ?? 'fail']
const MAINS_READ = { lowestV: 234, highestV: 246 } as const
const ofControl = (patch: Partial<ControlSupply> = {}, circuit: Partial<Circuit> = {}) =>
  installed({ circuit: { mainsRangeV: MAINS_READ, ...circuit, control: { ...CONTROL, ...patch } } })
const ofTank = (patch: Partial<TankSpec>): Installation => {
  const one = installed()
  return { ...one, load: { ...one.load, tank: { ...one.load.tank, ...patch } } }
}

/** Every check that the screening is to make, with what it needs to know. */
const CIRCUIT_NEEDS: Readonly<Record<string, readonly (keyof Circuit)[]>> = {
  'element-voltage': ['supplyVoltageV'],
  'contact-rating': ['supplyVoltageV', 'contactRatingA', 'contactRatingClass'],
  poles: ['supplyVoltageV', 'polesSwitched'],
  'breaker-minimum': ['supplyVoltageV', 'breakerA'],
  'breaker-maximum': ['supplyVoltageV', 'breakerA'],
  conductor: ['supplyVoltageV', 'breakerA', 'conductor', 'ambientC', 'groupedConductors'],
  'voltage-drop': ['supplyVoltageV', 'conductor', 'lengthM'],
  isolator: ['isolatorInSight'],
  'relief-valve': ['reliefValve'],
  separation: ['extraLowVoltageSeparated'],
  'mixing-valve': [],
  expansion: ['closedSystem', 'expansionVessel'],
}
const CONTROL_NEEDS: Readonly<Record<string, readonly (keyof ControlSupply)[]>> = {
  'coil-voltage': ['transformerSecondaryV', 'coilRatedV', 'coilOhm', 'reservoirF'],
  'control-loop': ['transformerSecondaryV', 'coilRatedV', 'coilOhm', 'reservoirF', 'loopLengthM', 'loopOhmPerKm'],
  'driver-current': ['transformerSecondaryV', 'driver', 'coilOhm'],
  'driver-saturation': ['transformerSecondaryV', 'driver', 'coilOhm'],
  suppression: ['suppression'],
  transformer: ['transformerSecondaryV', 'transformerVa', 'coilOhm'],
  reservoir: ['transformerSecondaryV', 'reservoirRatedV'],
  'primary-fuse': ['transformerVa', 'primaryFuseA'],
}
const everyId = [...Object.keys(CIRCUIT_NEEDS), ...Object.keys(CONTROL_NEEDS)]
const oneOf = <T>(...values: readonly T[]) => fc.constantFrom(...values)

describe('checkHardware', () => {
  it.each(PROFILE_IDS)(
    'makes every check of %s, each with a figure, a limit, a clause with its edition, a reason and a caution',
    (profile) => {
      const checks = checkHardware(ofControl(), profile)
      expect(checks.map((one) => one.id).toSorted()).toEqual(everyId.toSorted())
      for (const one of checks) {
        for (const text of [one.title, one.figure, one.limit, one.reason, one.caution]) expect(text).not.toBe('')
        expect(one.clause).toMatch(/\(.+\)/)
      }
    },
  )
  it.each(PROFILE_IDS)('says in %s that the adopted code and licensed practice decide', (profile) => {
    expect(PROFILES[profile].defers).toMatch(/edition|code in force/)
    expect(PROFILES[profile].defers).toMatch(/electrician/)
    expect(PROFILES[profile].defers).toMatch(/decide/)
  })
  it('passes a sound circuit in full', () => {
    const found = checkHardware(installed(), 'us-nec-2023').filter((one) => one.verdict !== 'pass')
    expect(found.map((one) => one.id)).toEqual([])
  })
  it('never passes what nobody recorded, nor a field that was cleared to zero', () => {
    for (const [id, fields] of Object.entries(CIRCUIT_NEEDS))
      for (const field of fields) {
        expect(verdictOf(installed({ circuit: { [field]: null } }), id), `${field} for ${id}`).toBe('not-known')
        if (typeof installed().circuit[field] === 'number' && !['ambientC', 'polesSwitched'].includes(field))
          expect(verdictOf(installed({ circuit: { [field]: 0 } }), id), `${field} = 0 for ${id}`).toBe('not-known')
      }
    for (const [id, fields] of Object.entries(CONTROL_NEEDS))
      for (const field of fields) expect(verdictOf(ofControl({ [field]: null }), id), `${field} for ${id}`).toBe('not-known')
  })
  it('passes nothing that leans on the load where no element, or none with its figures, is on record', () => {
    const ids = ['element-voltage', 'contact-rating', 'breaker-minimum', 'breaker-maximum', 'conductor', 'voltage-drop']
    const nothing = { upperElement: null, lowerElement: null }
    for (const tank of [
      nothing,
      { lowerElement: { ratedPowerW: 0, ratedVoltageV: 240 } },
      { lowerElement: { ratedPowerW: 4_500, ratedVoltageV: 0 } },
    ])
      for (const id of ids) expect(verdictOf(ofTank(tank), id), id).toBe('not-known')
    expect(verdictOf(ofTank({ setPointC: 0 }), 'mixing-valve')).toBe('not-known')
  })
  it('is never better for one figure less, whatever else is on record', () => {
    const fields = [...new Set(Object.values(CIRCUIT_NEEDS).flat())]
    const some = fc.record({
      breakerA: oneOf(null, 15, 30, 50),
      contactRatingA: oneOf(null, 16, 30),
      polesSwitched: oneOf<1 | 2 | null>(null, 1, 2),
      ambientC: oneOf(null, 25, 38),
      groupedConductors: oneOf(null, 2, 6),
      reliefValve: oneOf(null, true, false),
      closedSystem: oneOf(null, true, false),
      inThermalInsulation: oneOf(null, true, false),
    })
    fc.assert(
      fc.property(some, oneOf(...fields), oneOf(...PROFILE_IDS), (circuit, field, profile) => {
        const before = checkHardware(installed({ circuit }), profile)
        const after = new Map(
          checkHardware(installed({ circuit: { ...circuit, [field]: null } }), profile).map((one) => [one.id, one.verdict]),
        )
        for (const one of before) if (after.get(one.id) === 'pass') expect(one.verdict, `${one.id} without ${field}`).toBe('pass')
      }),
    )
  })
  it('never lets a figure from memory pass alone', () => {
    let confirmed = 0
    fc.assert(
      fc.property(
        oneOf(...PROFILE_IDS),
        oneOf('1', '1.5', '2.5', '4', '6', '10'),
        fc.integer({ min: 10, max: 50 }),
        fc.integer({ min: 2, max: 12 }),
        fc.boolean(),
        (profile, size, ambientC, groupedConductors, read) => {
          const circuit = {
            supplyVoltageV: 230,
            breakerA: 16,
            conductor: { size, system: 'mm2', material: 'copper', ratingC: 70 },
            ambientC,
            groupedConductors,
            mainsRangeV: read ? { lowestV: 225, highestV: 238 } : null,
            control: { ...CONTROL, transformerRegulationFraction: read ? 0.25 : null },
          } as const
          for (const one of checkHardware(installed({ powerW: 3_000, ratedVoltageV: 230, circuit }), profile))
            if (one.confirmAgainstCode) {
              confirmed++
              expect(one.verdict).not.toBe('pass')
            }
        },
      ),
    )
    expect(confirmed).toBeGreaterThan(100)
  })
  it('is never worse for a larger conductor, in cooler air, with fewer neighbours, out of insulation, over a shorter way', () => {
    const sizes = { awg: ['14', '12', '10', '8', '6', '4'], mm2: ['1', '1.5', '2.5', '4', '6', '10'] } as const
    fc.assert(
      fc.property(
        fc.record({
          powerW: fc.integer({ min: 1_000, max: 9_000 }),
          system: oneOf<'awg' | 'mm2'>('awg', 'mm2'),
          size: fc.integer({ min: 0, max: 4 }),
          insulationC: oneOf<60 | 75 | 90>(60, 75, 90),
          ambientC: fc.integer({ min: 10, max: 45 }),
          groupedConductors: fc.integer({ min: 2, max: 20 }),
          inThermalInsulation: fc.boolean(),
          lengthM: fc.integer({ min: 1, max: 80 }),
          breakerA: oneOf(15, 16, 20, 25, 30, 32, 40),
        }),
        ({ powerW, system, size, insulationC, ...rest }) => {
          const profile = system === 'awg' ? 'us-nec-2023' : 'gb-bs7671'
          const wire = (index: number) =>
            ({ size: sizes[system][index]!, system, material: 'copper', ratingC: system === 'awg' ? insulationC : 70 }) as const
          const badness = (patch: Partial<Circuit>, id: string) =>
            badnessOf(installed({ powerW, circuit: { ...rest, conductor: wire(size), ...patch } }), id, profile)
          // Small rows of 4D5 are from memory: a larger row may be attention where a smaller one is, never worse.
          for (const id of ['conductor', 'breaker-maximum', 'voltage-drop']) {
            const now = badness({}, id)
            for (const better of [
              { conductor: wire(size + 1) },
              { ambientC: rest.ambientC - 10 },
              { groupedConductors: Math.max(2, rest.groupedConductors - 3) },
              { inThermalInsulation: false },
              { lengthM: rest.lengthM / 2 },
            ])
              expect(badness(better, id), `${id} with ${JSON.stringify(better)}`).toBeLessThanOrEqual(now)
          }
        },
      ),
    )
  })
  it('never turns a fail to a pass for a larger load', () => {
    // A larger load may have a larger device (422.11(E)), so that one check is not in this law.
    const ids = ['contact-rating', 'breaker-minimum', 'conductor', 'voltage-drop']
    fc.assert(
      fc.property(
        fc.integer({ min: 1_000, max: 8_000 }),
        fc.integer({ min: 0, max: 3_000 }),
        oneOf(...PROFILE_IDS),
        (powerW, moreW, profile) => {
          for (const id of ids)
            expect(badnessOf(installed({ powerW: powerW + moreW }), id, profile)).toBeGreaterThanOrEqual(
              badnessOf(installed({ powerW }), id, profile),
            )
        },
      ),
    )
  })
})

describe('the circuit', () => {
  const wired = (ratingC: 60 | 75 | 90, terminalRatingC: 60 | 75 | null, breakerA = 40) =>
    verdictOf(
      installed({
        powerW: 6_720,
        circuit: { breakerA, terminalRatingC, conductor: { size: '10', system: 'awg', material: 'copper', ratingC } },
      }),
      'conductor',
    )
  it('keeps the 60 °C column at 60 °C terminals, whatever the insulation (NEC 110.14(C)): 28 A continuous is 35 A', () => {
    expect([wired(90, null, 30), wired(90, 60, 30), wired(90, 75, 30)]).toEqual(['fail', 'fail', 'pass'])
  })
  it('fails 35 A on 10 AWG and 30 A on 10 AWG aluminium, which 240.4(D) caps at 30 and 25 A', () => {
    expect(wired(75, 75, 35)).toBe('fail')
    const aluminium = { size: '10', system: 'awg', material: 'aluminium', ratingC: 75 } as const
    expect(verdictOf(installed({ circuit: { breakerA: 30, conductor: aluminium } }), 'conductor')).toBe('fail')
    expect(verdictOf(installed({ circuit: { breakerA: 25, conductor: aluminium } }), 'conductor')).toBe('not-known')
    // The tables' resistances are copper's.
    expect(verdictOf(installed({ circuit: { conductor: aluminium } }), 'voltage-drop')).toBe('not-known')
  })
  it('says not known where a table does not hold the air around the cable', () => {
    expect(verdictOf(installed({ circuit: { ambientC: 60 } }), 'conductor')).toBe('not-known')
  })
  // Regulation 523 as a trade page reads it: 2.5 mm² flat twin in insulation carries 13.5 A, so 16 A does not protect it.
  it('fails 16 A on 2.5 mm² in thermal insulation and passes 13 A', () => {
    const lagged = (breakerA: number) =>
      verdictOf(
        installed({
          powerW: 2_900,
          ratedVoltageV: 230,
          circuit: {
            supplyVoltageV: 230,
            breakerA,
            inThermalInsulation: true,
            conductor: { size: '2.5', system: 'mm2', material: 'copper', ratingC: 70 },
          },
        }),
        'conductor',
        'gb-bs7671',
      )
    expect([lagged(16), lagged(13)]).toEqual(['fail', 'pass'])
  })
  it('lets the nameplate’s largest device come first (422.11(E)(1))', () => {
    const marked = (breakerA: number) => verdictOf(installed({ circuit: { breakerA, markedMaxBreakerA: 25 } }), 'breaker-maximum')
    expect([marked(25), marked(30)]).toEqual(['pass', 'fail'])
  })
  it('asks for one pole at 120 V and two at 240 V (404.15(B)), and for two in the United Kingdom', () => {
    const one = (supplyVoltageV: number, profile: ProfileId) =>
      verdictOf(installed({ circuit: { supplyVoltageV, polesSwitched: 1 } }), 'poles', profile)
    expect([one(120, 'us-nec-2023'), one(240, 'us-nec-2023'), one(230, 'gb-bs7671')]).toEqual(['pass', 'fail', 'fail'])
  })
  it('fails a 208 V element on 240 V (133 %), passes a 240 V one on 240 V, and asks to confirm 230 V on 240 V', () => {
    const on240 = (ratedVoltageV: number) =>
      checkHardware(installed({ ratedVoltageV }), 'us-nec-2023').find((one) => one.id === 'element-voltage')
    expect(on240(208)).toMatchObject({ verdict: 'fail', figure: expect.stringContaining('133 %') })
    expect([on240(240)?.verdict, on240(230)?.verdict, on240(230)?.confirmAgainstCode]).toEqual(['pass', 'attention', true])
  })
  it('does not take a general-use or AC-3 rating for the resistive one', () => {
    for (const contactRatingClass of ['general-use', 'ac-3'] as const)
      expect(verdictOf(installed({ circuit: { contactRatingA: 300, contactRatingClass } }), 'contact-rating')).toBe('attention')
  })
  it('does not count a mixing valve that lets scalding water through', () => {
    const mixed = (mixingValveC: number | null) => verdictOf(ofTank({ setPointC: 65, mixingValveC }), 'mixing-valve')
    expect([mixed(49), mixed(60), mixed(null)]).toEqual(['pass', 'attention', 'attention'])
  })
})

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
