/** Laws of the screening: more of what protects never makes it worse, what is not known never passes, memory never passes alone. */
import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { checkHardware, PROFILES } from '#lib/core/hardware/check-hardware.ts'
import type { Circuit, Installation, ProfileId, Verdict } from '#lib/core/hardware/types.ts'
import { CONTROL, installed } from '../../support/installations.ts'
import { CIRCUIT_NEEDS, CONTROL_NEEDS, ofControl, ofTank, verdictOf } from '../../support/screening.ts'

const PROFILE_IDS = Object.keys(PROFILES) as readonly ProfileId[]
const BADNESS: Readonly<Record<Verdict, number>> = { pass: 0, attention: 1, 'not-known': 2, fail: 3 }
const badnessOf = (installation: Installation, id: string, profile?: ProfileId): number =>
  BADNESS[verdictOf(installation, id, profile) ?? 'fail']
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
