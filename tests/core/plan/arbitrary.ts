/** Planning problems of every shape that a building may bring, and some that none should. */
import fc from 'fast-check'
import type { Need, NeededRun, PlanProblem } from '#lib/core/plan/types.ts'

const powers = [1.2, 2, 3, 3.8, 4.5, 5.521]

interface Shape {
  readonly mostNeeds: number
  readonly slots: number
}

/** `phases`: with a limit a phase beside the whole. */
export function problems({ mostNeeds, slots }: Shape): fc.Arbitrary<PlanProblem> {
  const slot = fc.noBias(fc.integer({ min: 0, max: slots }))
  const run = fc.record({
    power: fc.constantFrom(...powers),
    phase: fc.integer({ min: 0, max: 2 }),
    worstSlots: fc.integer({ min: 1, max: 7 }),
    expectedShare: fc.double({ min: 0.3, max: 1, noNaN: true }),
    from: fc.noBias(fc.integer({ min: 0, max: Math.floor(slots / 2) })),
    length: slot,
    gap: fc.option(fc.integer({ min: 0, max: slots }), { nil: null }),
    latest: slot,
    early: slot,
    step: fc.constantFrom(1, 1, 1, 3, 4),
    offset: fc.integer({ min: -3, max: 3 }),
    loss: fc.double({ min: 0, max: 4, noNaN: true }),
    habit: fc.option(fc.integer({ min: 0, max: slots }), { nil: null }),
    pin: fc.oneof({ weight: 14, arbitrary: fc.constant(null) }, { weight: 1, arbitrary: slot }),
    shorter: fc.integer({ min: 0, max: 3 }),
  })
  type RawRun = typeof run extends fc.Arbitrary<infer Raw> ? Raw : never
  const runs = fc.oneof({ weight: 4, arbitrary: fc.tuple(run) }, { weight: 1, arbitrary: fc.tuple(run, run) })
  const need = fc.record({ unit: fc.noBias(fc.integer({ min: 0, max: 2 * mostNeeds })), runs })
  return fc
    .record({
      needs: fc.array(need, { minLength: Math.floor(mostNeeds / 4), maxLength: mostNeeds, size: 'max' }),
      phases: fc.boolean(),
      limitKw: fc.noBias(fc.double({ min: 4, max: 8 + mostNeeds / 2, noNaN: true })),
      base: fc.array(fc.double({ min: 0, max: 3, noNaN: true }), { minLength: slots, maxLength: slots }),
      prices: fc.array(fc.constantFrom(5, 9, 9, 18, 31, -2), { minLength: slots, maxLength: slots }),
      demandPrice: fc.constantFrom(0, 0, 12, 70),
      alreadyKw: fc.constantFrom(0, 6),
      weights: fc.record({
        standingLoss: fc.constantFrom(0, 1),
        habitMinorPerH: fc.constantFrom(0, 2),
        evennessMinorPerKw: fc.constantFrom(0, 0, 5),
      }),
    })
    .map(({ needs, phases, limitKw, base, prices, demandPrice, alreadyKw, weights }) => {
      const asRun = (raw: RawRun, id: string): NeededRun => ({
        id,
        powerKw: raw.power,
        limitKw: phases ? [raw.power, ...[0, 1, 2].map((phase) => (phase === raw.phase ? raw.power : 0))] : [raw.power],
        worstSlots: raw.worstSlots,
        expectedMin: Math.max(1, raw.worstSlots * 5 * raw.expectedShare),
        startWindows:
          raw.gap === null
            ? [{ from: raw.from, to: raw.from + raw.length }]
            : [
                { from: raw.from, to: raw.from + raw.length },
                { from: raw.gap, to: raw.gap + 4 },
              ],
        earliestStartSlot: Math.max(0, raw.latest - raw.early),
        latestStartSlot: raw.latest,
        startStep: raw.step,
        startOffset: raw.offset,
        readyBySlot: raw.latest + raw.worstSlots,
        standingLossMinorPerH: raw.loss,
        habitSlot: raw.habit,
        pinnedSlot: raw.pin,
        shortestWorstSlots: Math.max(1, raw.worstSlots - raw.shorter),
      })
      const named: Need[] = needs.map(({ unit, runs }, place) => ({
        id: `need ${place}`,
        unitId: `unit ${unit}`,
        runs: runs.map((raw, order) => asRun(raw, `run ${place}-${order}`)),
      }))
      const limits = [
        { id: 'service', limitKw, baseKw: base },
        ...(phases ? [0, 1, 2].map((phase) => ({ id: `phase ${phase}`, limitKw: limitKw / 2, baseKw: base.map((kw) => kw / 3) })) : []),
      ]
      const windows = Array.from({ length: Math.floor(slots / 3) }, (_, place) => ({ from: 3 * place, to: 3 * place + 3 }))
      const demand = demandPrice === 0 ? [] : [{ id: 'demand', priceMinorPerKw: demandPrice, alreadyKw, windows }]
      return { slotMin: 5, slots, needs: named, limits, energyPriceMinorPerKwh: prices, baseKw: base, demand, weights }
    })
}
