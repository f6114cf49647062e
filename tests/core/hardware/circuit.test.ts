/** The circuit's checks against clauses as published copies read them, and which limits of the profiles are from memory. */
import { describe, expect, it } from 'vitest'
import { checkHardware, PROFILES } from '#lib/core/hardware/check-hardware.ts'
import type { Limit } from '#lib/core/hardware/profiles/profile.ts'
import type { ProfileId } from '#lib/core/hardware/types.ts'
import { installed } from '../../support/installations.ts'
import { ofTank, verdictOf } from '../../support/screening.ts'

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
  it('lets no device above the terminals’ column either: 50 A on 8 AWG of 90 °C at 60 °C terminals, which carry 40 A', () => {
    const conductor = { size: '8', system: 'awg', material: 'copper', ratingC: 90 } as const
    const behind = (breakerA: number) =>
      verdictOf(installed({ powerW: 7_680, circuit: { breakerA, terminalRatingC: 60, conductor } }), 'conductor')
    expect([behind(40), behind(50)]).toEqual(['pass', 'fail'])
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

describe('the profiles', () => {
  /** What could be read, if only in secondary copies, decides; everything else is from memory and is to be confirmed. */
  const FROM_MEMORY: Readonly<Record<ProfileId, readonly string[]>> = {
    'us-nec-2023': ['dwellingDemand', 'mains'],
    'gb-bs7671': ['ambient', 'grouping', 'mains', 'reliefValve', 'separation'],
    'iec-60364': [
      'ambient',
      'conductors',
      'grouping',
      'heaterDemand',
      'insulated',
      'isolator',
      'mains',
      'poles',
      'reliefValve',
      'separation',
      'voltageDrop',
    ],
  }
  it.each(Object.keys(FROM_MEMORY) as ProfileId[])('of %s mark what is from memory, and give every limit a clause and an edition', (id) => {
    const limits = Object.entries(PROFILES[id]).filter(
      (entry): entry is [string, Limit] => typeof entry[1] === 'object' && entry[1] !== null && 'clause' in entry[1],
    )
    expect(limits.length).toBeGreaterThanOrEqual(12)
    expect(limits.filter(([, limit]) => limit.confirm).map(([name]) => name)).toEqual(expect.arrayContaining([...FROM_MEMORY[id]]))
    expect(limits.filter(([, limit]) => limit.confirm)).toHaveLength(FROM_MEMORY[id].length)
    for (const [name, limit] of limits) expect([limit.clause, limit.edition], name).not.toContain('')
  })
  it('mark the two small rows of table 4D5 that no copy showed', () => {
    const rows = PROFILES['gb-bs7671'].conductors.rows.filter((row) => row.confirm)
    expect(rows.map((row) => row.size)).toEqual(['1', '1.5'])
  })
})
