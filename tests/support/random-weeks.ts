/** Random pressed units over a week of showers: small and large tanks, one to three needs a day, weekends that differ. */
import fc from 'fast-check'
import type { ShowerNeed, UnitDay } from '#lib/core/tank/types.ts'
import { pressedFor, showers, UNIT_TANK, unitDay } from './tank-cases.ts'

const DAYS_A_WEEK = 7

const caseArb = fc.record({
  volumeL: fc.integer({ min: 50, max: 250 }),
  powerW: fc.integer({ min: 1_500, max: 5_500 }),
  inletC: fc.integer({ min: 3, max: 20 }),
  elements: fc.constantFrom('both', 'lower', 'upper'),
  setPointC: fc.integer({ min: 50, max: 65 }),
  runMin: fc.integer({ min: 15, max: 240 }),
  pattern: fc.constantFrom('morning', 'twice', 'weekend', 'mixed', 'thrice', 'alternate'),
  count: fc.integer({ min: 1, max: 4 }),
  minutesEach: fc.integer({ min: 4, max: 15 }),
  flowLPerMin: fc.integer({ min: 5, max: 12 }),
  morningMin: fc.integer({ min: 300, max: 600 }),
  eveningMin: fc.integer({ min: 1_000, max: 1_290 }),
})
type Case = typeof caseArb extends fc.Arbitrary<infer T> ? T : never

function needsOn(index: number, { pattern, count, minutesEach, flowLPerMin, morningMin, eveningMin }: Case): readonly ShowerNeed[] {
  const need = (readyByMin: number, people: number): ShowerNeed => showers({ readyByMin, count: people, minutesEach, flowLPerMin })
  const morning = need(morningMin, count)
  const evening = need(eveningMin, Math.max(1, count - 1))
  const late = need(Math.min(700, morningMin + 120), count)
  switch (pattern) {
    case 'morning':
      return [morning]
    case 'twice':
      return [morning, evening]
    case 'weekend':
      return index < 5 ? [morning] : [late]
    case 'mixed':
      return index < 5 ? [morning, evening] : index === 5 ? [late] : []
    case 'thrice':
      return [morning, need(morningMin + 150, 1), evening]
    case 'alternate':
      return index % 2 === 1 ? [morning, need(eveningMin, count + 1)] : [need(morningMin + 200, 1)]
  }
}

export const weekArb: fc.Arbitrary<readonly UnitDay[]> = caseArb.map((one) => {
  const element = { ratedPowerW: one.powerW, ratedVoltageV: 240 }
  const tank = {
    ...UNIT_TANK,
    nominalVolumeL: one.volumeL,
    setPointC: one.setPointC,
    upperElement: one.elements === 'lower' ? null : element,
    lowerElement: one.elements === 'upper' ? null : element,
  }
  return Array.from({ length: DAYS_A_WEEK }, (_, index) =>
    unitDay({ inletC: one.inletC, supplyVoltageV: 240, tank, needs: needsOn(index, one), runs: pressedFor(one.runMin) }),
  )
})
