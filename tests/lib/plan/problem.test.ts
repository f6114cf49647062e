/** A house's records as a planning problem, from descriptions by hand: the figures follow from the definitions, each said beside its check. */
import { describe, expect, it } from 'vitest'
import type { UnitId } from '#db/ids.ts'
import { newId } from '#db/ids.ts'
import type { EvaluationOutcome } from '#db/queries/evaluation.ts'
import { checkProblem } from '#lib/core/plan/check-problem.ts'
import type { NeedOutcome } from '#lib/core/tank/types.ts'
import type { Tariff, TariffVersion } from '#lib/core/tariff/types.ts'
import { british, daily, dial, fixed, timeSwitch } from '#lib/demo/installations.ts'
import { at, shower, week } from '#lib/demo/weeks.ts'
import { dayContext } from '#lib/evaluation/day-context.ts'
import type { Site } from '#lib/evaluation/types.ts'
import { demandCharges } from '#lib/plan/prices.ts'
import { HAND_MIN, type PlanCase, planQuestion, type PlanUnit } from '#lib/plan/problem.ts'
import { slotAt, startMsOf, todayStarts } from '#lib/plan/types.ts'
import { figuresOf } from '#lib/plan/compare.ts'
import { coldToHotMin, restartPage } from '#lib/plan/restart.ts'
import { durationOf } from '#lib/evaluation/unit-day.ts'

const DAY = '2026-12-04'
const version: TariffVersion = {
  name: 'Two rates and a demand charge',
  utility: 'invented',
  effectiveFrom: '2026-01-01',
  currency: 'GBP',
  minorPerMajor: 100,
  energyPeriods: [[{ max: null, unit: 'kWh', priceMinorPerKwh: 10 }], [{ max: null, unit: 'kWh', priceMinorPerKwh: 30 }]],
  weekdayGrid: [Array.from({ length: 24 }, (_, hour) => (hour >= 7 && hour < 10 ? 1 : 0))].flatMap((row) =>
    Array.from({ length: 12 }, () => row),
  ),
  weekendGrid: Array.from({ length: 12 }, () => new Array<number>(24).fill(0)),
  specialDays: [],
  flatDemand: { tiersByStructure: [[{ maxKw: null, priceMinorPerKw: 500 }]], structureByMonth: new Array<number>(12).fill(0) },
  periodDemand: null,
  demandWindowMin: 15,
  fixed: null,
  minimum: null,
  fuelAdjustmentMinorPerKwh: null,
}
const tariff: Tariff = { zone: 'Europe/London', versions: [version] }
const site: Site = {
  zone: 'Europe/London',
  supplyVoltageV: 230,
  phases: 1,
  serviceRatingA: 100,
  baseLoadW: 2_000,
  climate: { kind: 'climate', meanAirC: 10, swingAirK: 12, hemisphere: 'north' },
  ruleProfile: 'us-nec-2023',
  hygienePolicy: 'store-60',
  tariff,
}
const context = dayContext(site, DAY)
const NOW_MS = context.startsAtMs - 86_400_000

const need = (startMin: number, over: Partial<NeedOutcome> = {}): NeedOutcome => ({
  need: { readyByMin: at(7), count: 1, minutesEach: 8, gapMin: 5, flowLPerMin: 8, useTemperatureC: 40 },
  status: 'ready',
  reason: '',
  minutesWanted: 8,
  minutesServed: 8,
  requiredRunMin: 60,
  chosenRunMin: 108,
  shortfallMin: 0,
  startByMin: startMin,
  runWindow: { earliestStartMin: startMin - 180, latestStartMin: startMin, endMin: startMin + 132 },
  run: { startMin, endMin: startMin + 120 },
  readyAtMin: at(6),
  nextBestReadyByMin: [],
  ...over,
})
const outcome = (needs: readonly NeedOutcome[], powerW = 3_000): EvaluationOutcome => ({
  reason: '',
  needs,
  runs: needs.flatMap(({ run }) => (run ? [{ ...run, longestEndMin: run.endMin + 10, short: false }] : [])),
  peaks: [],
  dayMin: 1_440,
  clockChange: null,
  powerW,
  charge: null,
})
const unit = (
  code: string,
  over: { controller?: Parameters<typeof british>[0]; needs?: readonly NeedOutcome[]; willing?: PlanUnit['days'][number]['wants'] } = {},
): PlanUnit => ({
  unitId: newId<UnitId>(),
  code,
  floor: 0,
  hardware: { recordId: newId(), installation: british(over.controller ?? fixed(120), 150), measured: [], recordedAtMs: NOW_MS },
  days: [
    {
      context,
      wants: over.willing ?? { kind: 'week', week: week({ weekdays: [shower(at(7))], weekend: [] }), willing: [] },
      outcome: outcome(over.needs ?? [need(at(5, 30))]),
      takesLetters: true,
    },
  ],
})
const asked = (units: readonly PlanUnit[], over: Partial<PlanCase> = {}): PlanCase => ({
  site,
  units,
  contexts: [context],
  otherRuns: [],
  minorPerMajor: 100,
  nowMs: NOW_MS,
  ...over,
})
const OPTIONS = { seed: 1, targetGapFraction: 0.001, effort: 1 }

describe('planQuestion', () => {
  it('holds the service to its rating over the profile’s factor for continuous loads', () => {
    // NEC 2023, 215.2(A)(1) and 230.42(A): 125 % of the continuous load; 100 A × 230 V / 1.25 = 18.4 kW.
    const { problem } = planQuestion(asked([unit('1')]))
    expect(problem.limits[0]?.limitKw).toBeCloseTo(18.4, 9)
    expect(problem.limits[0]?.baseKw.every((baseKw) => baseKw === 2)).toBe(true)
    expect(checkProblem(problem, OPTIONS)).toEqual([])
  })
  it('counts a pressed run at its guaranteed longest, a late hand and its minute in the slot added, in whole slots', () => {
    const { problem, runs } = planQuestion(asked([unit('1', { needs: [need(at(5, 33))] })]))
    const longestMin = runs[0]?.longestMin ?? 0
    expect(longestMin).toBeCloseTo(120 * 1.03, 6) // the demo's fixed timer: 120 min, 3 %
    expect(problem.needs[0]?.runs[0]?.worstSlots).toBe(Math.ceil((longestMin + HAND_MIN + 3) / 5))
  })
  it('keeps the very minute of whoever keeps their slot', () => {
    const question = planQuestion(asked([unit('1', { needs: [need(at(5, 33))] })]))
    const [run] = question.runs
    const slot = slotAt(question.grid, run!.todayMs)
    expect(startMsOf(question.grid, run!, slot)).toBe(context.startsAtMs + at(5, 33) * 60_000)
    expect(startMsOf(question.grid, run!, slot - 1)).toBe(context.startsAtMs + at(5, 25) * 60_000)
  })
  it('opens only the hours in which the tenant is willing, on the day and on its eve', () => {
    const wants = {
      kind: 'week' as const,
      week: week({ weekdays: [], weekend: [] }),
      willing: [{ fromMinuteOfDay: at(4), toMinuteOfDay: at(5) }],
    }
    const question = planQuestion(asked([unit('1', { willing: wants })]))
    const windows = question.problem.needs[0]?.runs[0]?.startWindows ?? []
    expect(windows.map(({ from, to }) => [from, to].map((slot) => question.grid.originMs + slot * 300_000))).toContainEqual([
      context.startsAtMs + at(4) * 60_000,
      context.startsAtMs + at(5) * 60_000,
    ])
  })
  it('counts what stays as load that is there: clocks at both their edges, and what may never stop for a day', () => {
    const question = planQuestion(asked([unit('1'), unit('2', { controller: timeSwitch([daily(at(4, 30), at(7))]) })]))
    expect(question.fixed.map(({ code, why }) => [code, why])).toEqual([['2', 'switch']])
    const slotOf = (minute: number) => slotAt(question.grid, context.startsAtMs + minute * 60_000)
    expect(question.problem.limits[0]?.baseKw[slotOf(at(6))]).toBe(5) // 2 kW and the switch's 3 kW
  })
  it('leaves a cold unit where it is, and moves nobody who could not be told in time', () => {
    const cold = unit('1', { needs: [need(at(5, 30), { status: 'short', shortfallMin: 20 })] })
    const soon = planQuestion(asked([cold, unit('2')], { nowMs: context.startsAtMs + at(5) * 60_000 }))
    expect(soon.fixed.map(({ why }) => why)).toEqual(['cold', 'too-soon'])
    expect(soon.coldUnits).toEqual(['1'])
  })
  it('lets a dial be turned to less, down to what the shower needs, and nothing else', () => {
    const run = (controller: Parameters<typeof british>[0]) => planQuestion(asked([unit('1', { controller })])).problem.needs[0]!.runs[0]!
    expect(run(dial(120)).shortestWorstSlots).toBeLessThan(run(dial(120)).worstSlots)
    expect(run(fixed(120)).shortestWorstSlots).toBe(run(fixed(120)).worstSlots)
  })
  it('costs today’s start what the tariff says', () => {
    // 3 kW for 120 min from 06:30: half an hour at 0.10, an hour and a half at 0.30 a kWh; 5.00 a kW on what the runs add.
    const question = planQuestion(asked([unit('1', { needs: [need(at(6, 30))] })]))
    const figures = figuresOf(question, todayStarts(question))
    expect(figures.energyMinor).toBeCloseTo(3 * (0.5 * 10 + 1.5 * 30), 6)
    expect(figures.demandMinor).toBeCloseTo(3 * 500, 6)
  })
})

describe('demandCharges', () => {
  it('begins from the highest mean that the month’s other runs have made already', () => {
    const { grid } = planQuestion(asked([unit('1')]))
    const before = context.startsAtMs - 2 * 86_400_000
    const others = [{ startsAtMs: before + 7.5 * 60_000, endsAtMs: before + 30 * 60_000, powerW: 4_000 }]
    const [charge] = demandCharges({ tariff, grid, others, baseLoadW: 2_000 })
    // A quarter hour in full beats the half of one before it: 2 kW + 4 kW.
    expect(charge).toMatchObject({ priceMinorPerKw: 500, alreadyKw: 6 })
    // Of the horizon's hours every quarter counts: 24 hours of four, and what the eve adds.
    expect(charge!.windows.length).toBeGreaterThanOrEqual(96)
  })
  it('charges each month its own peak where the days cross into the next', () => {
    const last = dayContext(site, '2026-11-30')
    const first = dayContext(site, '2026-12-01')
    const grid = { originMs: last.startsAtMs, slotMin: 15, slots: 192 }
    const charges = demandCharges({ tariff, grid, others: [], baseLoadW: 0 })
    expect(charges.map(({ id, windows }) => [id, windows.length])).toEqual([
      ['2026-11, any hour', 96],
      ['2026-12, any hour', 96],
    ])
    expect(first.startsAtMs - last.startsAtMs).toBe(86_400_000)
  })
})

describe('restartPage', () => {
  const units = Array.from({ length: 8 }, (_, index) => {
    const installation = british(fixed(120), 150)
    return { unitId: newId<UnitId>(), code: `Flat ${index + 1}`, installation, duration: durationOf({ installation, measured: [] }) }
  })
  const asked = { units, supplyVoltageV: 230, inletC: 8, limitW: 8_500, baseLoadW: 2_000, backAtMs: NOW_MS }
  it('takes from cold to hot at least the energy that the water needs over the element’s power', () => {
    const { tank } = units[0]!.installation.load
    // Water: 4,186 J/kg K, 0.98 kg/L at 60 °C (IAPWS-95); an element heats no more than the share above it, five sixths here.
    const leastMin =
      ((tank.nominalVolumeL * 0.9 * (5 / 6) * 0.98 * 4_186 * (tank.setPointC - 8)) / (tank.lowerElement?.ratedPowerW ?? 1) / 60) * 0.97
    expect(coldToHotMin(units[0]!, asked)).toBeGreaterThan(leastMin)
  })
  it('never passes the limit, serves everybody, and says to press again where the timer ends too soon', () => {
    const page = restartPage(asked)!
    expect(page.lines).toHaveLength(8)
    expect(page.without).toEqual([])
    for (const line of page.lines) {
      const together = page.lines.filter((one) => one.startsAtMs <= line.startsAtMs && one.readyAtMs > line.startsAtMs)
      expect(together.reduce((sum, { powerW }) => sum + powerW, 2_000)).toBeLessThanOrEqual(8_500)
      expect(line.againAtMs.length > 0).toBe((coldToHotMin(units[0]!, asked) ?? 0) > 120 * 0.97)
    }
    expect(page.lastReadyAtMs).toBe(Math.max(...page.lines.map(({ readyAtMs }) => readyAtMs)))
    expect(page.lastReadyAtLeastMs).toBeLessThanOrEqual(page.lastReadyAtMs)
  })
  it('names whoever is too large for the limit alone', () => {
    expect(restartPage({ ...asked, limitW: 3_000 })?.without.map(({ code }) => code)).toEqual(units.map(({ code }) => code))
  })
})
