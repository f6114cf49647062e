import { describe, expect, it } from 'vitest'
import { evaluatePlan } from '#lib/core/plan/evaluate.ts'
import { planRuns } from '#lib/core/plan/plan-runs.ts'
import type { Need, NeededRun, PlanOptions, PlanProblem } from '#lib/core/plan/types.ts'

const SLOTS = 96
const options: PlanOptions = { seed: 1, targetGapFraction: 0, effort: 1 }
const flat = (value: number) => new Array<number>(SLOTS).fill(value)

const run = (id: string, change: Partial<NeededRun> = {}): NeededRun => ({
  id,
  powerKw: 4,
  limitKw: [4],
  worstSlots: 12,
  expectedMin: 60,
  startWindows: [{ from: 0, to: SLOTS }],
  earliestStartSlot: 0,
  latestStartSlot: 60,
  startStep: 1,
  startOffset: 0,
  readyBySlot: 72,
  standingLossMinorPerH: 1,
  habitSlot: null,
  pinnedSlot: null,
  shortestWorstSlots: 12,
  ...change,
})
const need = (unitId: string, ...runs: NeededRun[]): Need => ({ id: `need of ${unitId}`, unitId, runs })
const problem = (needs: Need[], change: Partial<PlanProblem> = {}): PlanProblem => ({
  slotMin: 5,
  slots: SLOTS,
  needs,
  limits: [{ id: 'service', limitKw: 10, baseKw: flat(1) }],
  energyPriceMinorPerKwh: flat(20),
  baseKw: flat(1),
  demand: [],
  weights: { standingLoss: 1, habitMinorPerH: 0, evennessMinorPerKw: 0 },
  ...change,
})

function planned(asked: PlanProblem) {
  const outcome = planRuns(asked, options)
  if (outcome.status !== 'planned') throw new Error(JSON.stringify(outcome.faults))
  return outcome
}

describe('planRuns', () => {
  it('starts as late as ready-by allows when nothing else counts', () => {
    const { starts, cost, bound } = planned(problem([need('a', run('a'))]))
    expect(starts).toEqual([{ runId: 'a', startSlot: 60 }])
    // 4 kW for an hour at 20; ready at slot 72, so nothing is lost.
    expect(cost).toMatchObject({ energyMinor: 80, standingLossMinor: 0, totalMinor: 80 })
    expect(bound.gapFraction).toBe(0)
  })

  it('moves to the cheap hours when they save more than the heat that waits', () => {
    const prices = flat(20).map((price, slot) => (slot < 48 ? 10 : price))
    const { starts, cost } = planned(problem([need('a', run('a'))], { energyPriceMinorPerKwh: prices }))
    // The last start that ends within the cheap hours; two hours of waiting at 1 an hour.
    expect(starts).toEqual([{ runId: 'a', startSlot: 36 }])
    expect(cost).toMatchObject({ energyMinor: 40, standingLossMinor: 2, totalMinor: 42 })
  })

  it('takes three runs apart that only fit two at a time, and proves that it must', () => {
    const { starts, unserved, cost, bound } = planned(problem([need('a', run('a')), need('b', run('b')), need('c', run('c'))]))
    expect(unserved).toEqual([])
    expect(starts.map(({ startSlot }) => startSlot).sort((one, other) => one - other)).toEqual([48, 60, 60])
    // One of them waits for one hour.
    expect(cost.totalMinor).toBe(241)
    expect(bound.costAtLeastMinor).toBeLessThanOrEqual(241)
  })

  it('pays for a second press only when the first has surely ended', () => {
    const { starts } = planned(problem([need('a', run('first', { latestStartSlot: 48 }), run('second'))]))
    expect(starts).toEqual([
      { runId: 'first', startSlot: 48 },
      { runId: 'second', startSlot: 60 },
    ])
  })

  it('leaves a pinned run where it is and moves the others around it', () => {
    const needs = [need('a', run('a', { pinnedSlot: 55 })), need('b', run('b')), need('c', run('c'))]
    const { starts, unserved } = planned(problem(needs))
    expect(unserved).toEqual([])
    expect(starts.find(({ runId }) => runId === 'a')?.startSlot).toBe(55)
  })

  it('spreads runs when the peak costs more than the wait', () => {
    const windows = Array.from({ length: SLOTS / 3 }, (_, place) => ({ from: 3 * place, to: 3 * place + 3 }))
    const demand = [{ id: 'month', priceMinorPerKw: 50, alreadyKw: 0, windows }]
    const { starts, cost } = planned(problem([need('a', run('a')), need('b', run('b'))], { demand }))
    expect(starts.map(({ startSlot }) => startSlot).sort((one, other) => one - other)).toEqual([48, 60])
    // 4 kW above the base's own 1 kW, at 50.
    expect(cost.demandMinor).toBeCloseTo(200, 9)
  })

  it('lets a peak that the month already has be used for nothing', () => {
    const windows = Array.from({ length: SLOTS / 3 }, (_, place) => ({ from: 3 * place, to: 3 * place + 3 }))
    const demand = [{ id: 'month', priceMinorPerKw: 50, alreadyKw: 9, windows }]
    const { starts, cost } = planned(problem([need('a', run('a')), need('b', run('b'))], { demand }))
    expect(starts.map(({ startSlot }) => startSlot)).toEqual([60, 60])
    expect(cost.demandMinor).toBe(0)
  })

  it('serves two of three when only two fit, and says what would serve the third', () => {
    const narrow = { earliestStartSlot: 58, shortestWorstSlots: 6 }
    const { starts, unserved, bound } = planned(
      problem([need('a', run('a', narrow)), need('b', run('b', narrow)), need('c', run('c', narrow))]),
    )
    expect(starts).toHaveLength(2)
    expect(bound.unservedAtLeast).toBe(1)
    expect(unserved).toHaveLength(1)
    expect(unserved[0]?.reason).toBe('service-full')
    const changes = new Map(unserved[0]?.changes.map((change) => [change.kind, change]))
    // 1 kW of base and three times 4 kW under 10 kW: 3 kW are missing.
    expect(changes.get('more-service')).toMatchObject({ limits: [{ limitId: 'service', moreKw: 3 }] })
    // The others end at slot 72 at the latest: 12 slots after slot 60.
    expect(changes.get('later-ready-by')).toMatchObject({ laterSlots: 12 })
    // Even the shortest run would begin beside the other two.
    expect(changes.has('shorter-run')).toBe(false)
  })

  it.each([
    ['no-allowed-start', run('x', { startWindows: [{ from: 70, to: 90 }] })],
    ['too-large-alone', run('x', { powerKw: 9.5, limitKw: [9.5] })],
    ['pin-not-allowed', run('x', { pinnedSlot: 80 })],
  ] as const)('says %s of a need that no plan can serve', (reason, impossible) => {
    expect(planned(problem([need('x', impossible), need('a', run('a'))]))).toMatchObject({
      unserved: [{ needId: 'need of x', reason }],
      starts: [{ runId: 'a' }],
    })
  })

  it('says pin-over-limit of the pin that does not fit beside earlier ones', () => {
    const pin = { pinnedSlot: 60 }
    const { unserved } = planned(problem([need('a', run('a', pin)), need('b', run('b', pin)), need('c', run('c', pin))]))
    expect(unserved).toMatchObject([{ needId: 'need of c', reason: 'pin-over-limit' }])
  })

  it('answers a problem without needs with an empty plan', () => {
    expect(planned(problem([]))).toMatchObject({
      starts: [],
      unserved: [],
      cost: { totalMinor: 0 },
      bound: { gapFraction: 0, unservedAtLeast: 0 },
    })
  })

  it('names every field that cannot be planned with', () => {
    const faulty = problem([need('a', run('a', { powerKw: NaN, expectedMin: 90 }))], { energyPriceMinorPerKwh: [1] })
    const outcome = planRuns(faulty, options)
    expect(outcome).toMatchObject({
      status: 'invalid',
      faults: [{ where: 'energyPriceMinorPerKwh' }, { where: 'needs.need of a.a.powerKw' }, { where: 'needs.need of a.a.expectedMin' }],
    })
  })
})

describe('evaluatePlan', () => {
  it('draws the load by the longest and by the expected run, and shows where the limit is passed', () => {
    const short = run('a', { expectedMin: 32.5 })
    const { limits, expectedKw, worstKw, notAllowed } = evaluatePlan(
      problem([need('a', short), need('b', run('b')), need('c', run('c'))]),
      [
        { runId: 'a', startSlot: 20 },
        { runId: 'b', startSlot: 20 },
        { runId: 'c', startSlot: 31 },
      ],
    )
    expect(expectedKw.slice(19, 33)).toEqual([1, 9, 9, 9, 9, 9, 9, 7, 5, 5, 5, 5, 9, 5])
    expect(worstKw.slice(19, 33)).toEqual([1, 9, 9, 9, 9, 9, 9, 9, 9, 9, 9, 9, 13, 5])
    expect(limits[0]).toMatchObject({ peakKw: 13, peakSlot: 31, overSlots: [31] })
    expect(notAllowed).toEqual([])
  })

  it('names the runs that break their own rules', () => {
    const asked = problem([need('a', run('a'), run('b')), need('c', run('c', { pinnedSlot: 3 }))])
    const starts = [
      { runId: 'a', startSlot: 70 },
      { runId: 'b', startSlot: 40 },
      { runId: 'c', startSlot: 4 },
      { runId: 'nobody', startSlot: 4 },
    ]
    expect(evaluatePlan(asked, starts).notAllowed).toEqual(['nobody', 'a', 'b', 'c'])
  })
})
