/**
 * A property's records as a planning problem. What may move is a run that somebody presses for and can be told about; clocks keep
 * their own steps and count as load that is there. Windows and start-by come from the tank model, durations from the controller's,
 * the limit is the one that the over-service check uses. Pure.
 */
import type { UnitId } from '#db/ids.ts'
import type { EvaluationOutcome } from '#db/queries/evaluation.ts'
import { lossWPerK } from '#lib/core/tank/loss.ts'
import { actualVolumeL } from '#lib/core/tank/model.ts'
import type { NeedOutcome } from '#lib/core/tank/types.ts'
import type { Need, NeededRun, PlanProblem, SlotInterval } from '#lib/core/plan/types.ts'
import { addDays, wallWindow } from '#lib/core/time/civil.ts'
import { MIN_PER_DAY, MS_PER_MIN } from '#lib/core/units.ts'
import { type LoadRun, serviceLimitW } from '#lib/evaluation/service-load.ts'
import type { DayContext, Site, UnitHardware, Wants } from '#lib/evaluation/types.ts'
import { durationOf, runsOf } from '#lib/evaluation/unit-day.ts'
import { demandCharges, slotPrices } from './prices.ts'
import {
  type FixedReason,
  type FixedRun,
  type Grid,
  type MovableRun,
  type PlanQuestion,
  SERVICE,
  slotAt,
  slotFrom,
  slotMs,
} from './types.ts'

/** How late a hand may be: so much longer a pressed run may still be on (common practice, no source). */
export const HAND_MIN = 5
/** Whoever is to press must have read the letter: nothing sooner is moved (common practice, no source). */
export const NOTICE_MIN = 120
/** Money that an hour away from today's start counts as, and a kilowatt of the highest load: in hundredths of the currency. */
export const HABIT_HUNDREDTHS_PER_H = 2
export const EVENNESS_HUNDREDTHS_PER_KW = 1
/** Up to this many runs the grid is five minutes fine; beyond it, a quarter of an hour. */
const FINE_RUNS = 250
/** As the over-service check counts a run that may never end. */
const NEVER_ENDING_MS = MIN_PER_DAY * MS_PER_MIN

export interface PlanUnitDay {
  readonly context: DayContext
  readonly wants: Wants
  /** `null`: nothing is computed. */
  readonly outcome: EvaluationOutcome | null
  /** Whether who lives there reads letters about starts. */
  readonly takesLetters: boolean
}
export interface PlanUnit {
  readonly unitId: UnitId
  readonly code: string
  readonly floor: number | null
  readonly hardware: UnitHardware | null
  readonly days: readonly PlanUnitDay[]
}
export interface PlanCase {
  readonly site: Site
  readonly units: readonly PlanUnit[]
  /** Of the days that are planned, in order. */
  readonly contexts: readonly DayContext[]
  /** Expected runs of other days of the months concerned. */
  readonly otherRuns: readonly LoadRun[]
  readonly minorPerMajor: number
  readonly nowMs: number
}

interface Found {
  readonly run: MovableRun
  readonly unit: PlanUnit
  readonly hardware: UnitHardware
  readonly wants: Wants
  readonly requiredMin: number | null
  readonly guaranteedMin: number
}

export function planQuestion(asked: PlanCase): PlanQuestion {
  const found: Found[] = []
  const fixed: FixedRun[] = []
  for (const unit of asked.units) for (const day of unit.days) sort(asked, { unit, day }, { found, fixed })
  const runs = found.map(({ run }) => run)
  const grid = gridOf(asked.contexts, runs)
  const others: readonly LoadRun[] = [...fixed, ...asked.otherRuns]
  const { priceMinorPerKwh, isPriced } = slotPrices(asked.site.tariff, grid)
  const limitBaseKw = baseKw(grid, others, { ends: 'longest', baseLoadW: asked.site.baseLoadW })
  const problem: PlanProblem = {
    slotMin: grid.slotMin,
    slots: grid.slots,
    needs: found.map((one): Need => ({
      id: one.run.id,
      unitId: one.unit.unitId,
      runs: [neededRun(one, { asked, grid, priceMinorPerKwh })],
    })),
    limits: [{ id: SERVICE, limitKw: serviceLimitW(asked.site) / 1_000, baseKw: limitBaseKw }],
    energyPriceMinorPerKwh: priceMinorPerKwh,
    baseKw: baseKw(grid, others, { ends: 'expected', baseLoadW: asked.site.baseLoadW }),
    demand: demandCharges({ tariff: asked.site.tariff, grid, others, baseLoadW: asked.site.baseLoadW }),
    weights: {
      standingLoss: 1,
      habitMinorPerH: (HABIT_HUNDREDTHS_PER_H * asked.minorPerMajor) / 100,
      evennessMinorPerKw: (EVENNESS_HUNDREDTHS_PER_KW * asked.minorPerMajor) / 100,
    },
  }
  const wanted = asked.units.filter(({ days }) => days.some(({ outcome }) => (outcome?.needs.length ?? 0) > 0))
  return {
    problem,
    grid,
    runs,
    fixed,
    fixedEnergyMinor: energyMinor(grid, fixed, priceMinorPerKwh),
    isPriced,
    wantedUnits: wanted.length,
    coldUnits: wanted.filter(({ days }) => days.some(({ outcome }) => outcome?.needs.some(isCold) ?? false)).map(({ code }) => code),
  }
}

const isCold = ({ status }: NeedOutcome): boolean => status !== 'ready'

interface UnitOnDay {
  readonly unit: PlanUnit
  readonly day: PlanUnitDay
}

/** A unit's runs of a day: those that may move, and those that stay with the reason why. */
function sort(asked: PlanCase, { unit, day }: UnitOnDay, into: { readonly found: Found[]; readonly fixed: FixedRun[] }): void {
  const { hardware } = unit
  const { context, outcome, wants } = day
  if (!hardware || !outcome) return
  const at = (minute: number) => context.startsAtMs + minute * MS_PER_MIN
  const source = runsOf(hardware, durationOf(hardware), { site: asked.site, context })
  const stay = (why: FixedReason, run: { readonly startMin: number; readonly endMin: number }, longestEndMin: number | null) =>
    void into.fixed.push({
      code: unit.code,
      day: context.day,
      startsAtMs: at(run.startMin),
      endsAtMs: at(run.endMin),
      longestEndsAtMs: longestEndMin === null ? null : at(longestEndMin),
      powerW: outcome.powerW,
      why,
    })
  if (source.kind === 'clocked') {
    const why = hardware.installation.controller.kind === 'time-switch' ? 'switch' : 'supplier'
    for (const run of outcome.runs) stay(why, run, run.longestEndMin)
    return
  }
  const { longestMin, expectedMin, guaranteedMin } = source
  for (const need of outcome.needs) {
    const { run, runWindow } = need
    if (!run || !runWindow) continue
    const why: FixedReason | null =
      longestMin === null
        ? 'never-stops'
        : isCold(need)
          ? 'cold'
          : !day.takesLetters
            ? 'no-letters'
            : at(run.startMin) < asked.nowMs + NOTICE_MIN * MS_PER_MIN
              ? 'too-soon'
              : null
    if (why !== null || longestMin === null) {
      stay(why ?? 'never-stops', run, longestMin === null ? null : run.startMin + longestMin)
      continue
    }
    const readyByAtMs = at(need.need.readyByMin)
    into.found.push({
      run: {
        id: `${unit.unitId} ${readyByAtMs}`,
        unitId: unit.unitId,
        code: unit.code,
        floor: unit.floor,
        day: context.day,
        readyByAtMs,
        todayMs: at(run.startMin),
        earliestMs: Math.max(at(Math.min(runWindow.earliestStartMin, run.startMin)), asked.nowMs + NOTICE_MIN * MS_PER_MIN),
        latestMs: at(Math.max(runWindow.latestStartMin, run.startMin)),
        powerW: outcome.powerW,
        expectedMin: Math.min(expectedMin, longestMin),
        longestMin,
      },
      unit,
      hardware,
      wants,
      requiredMin: need.requiredRunMin,
      guaranteedMin,
    })
  }
}

/** From the first sensible start to the last possible end, and the planned days whole. */
function gridOf(contexts: readonly DayContext[], runs: readonly MovableRun[]): Grid {
  const slotMin = runs.length <= FINE_RUNS ? 5 : 15
  const stepMs = slotMin * MS_PER_MIN
  const [first, last] = [contexts[0], contexts.at(-1)]
  if (!first || !last) throw new RangeError('a plan is of at least one day')
  let fromMs = first.startsAtMs
  let toMs = last.startsAtMs + last.dayMin * MS_PER_MIN
  for (const run of runs) {
    fromMs = Math.min(fromMs, run.earliestMs, run.todayMs)
    toMs = Math.max(toMs, run.latestMs + (run.longestMin + HAND_MIN) * MS_PER_MIN)
  }
  const originMs = first.startsAtMs - Math.ceil((first.startsAtMs - fromMs) / stepMs) * stepMs
  // A run's start is rounded down and its end up: two slots more than it lasts.
  return { originMs, slotMin, slots: Math.ceil((toMs - originMs) / stepMs) + 2 }
}

function neededRun(
  { run, hardware, wants, requiredMin, guaranteedMin }: Found,
  { asked, grid, priceMinorPerKwh }: { readonly asked: PlanCase; readonly grid: Grid; readonly priceMinorPerKwh: readonly number[] },
): NeededRun {
  const habitSlot = slotAt(grid, run.todayMs)
  // The start that stands may be anywhere in its slot; the others are at a slot's beginning.
  const lateMin = HAND_MIN + (run.todayMs - grid.originMs - habitSlot * slotMs(grid)) / MS_PER_MIN
  const slotsFor = (minutes: number) => Math.max(1, Math.ceil((minutes + lateMin) / grid.slotMin - 1e-9))
  const { tank } = hardware.installation.load
  const lostKw = (lossWPerK(tank.loss, actualVolumeL(tank)) * Math.max(0, tank.setPointC - tank.ambientC)) / 1_000
  const worstSlots = slotsFor(run.longestMin)
  const powerKw = run.powerW / 1_000
  return {
    id: run.id,
    powerKw,
    limitKw: [powerKw],
    worstSlots,
    expectedMin: run.expectedMin,
    startWindows: willingSlots(run, { wants, asked, grid }),
    earliestStartSlot: Math.min(slotFrom(grid, run.earliestMs), habitSlot),
    latestStartSlot: slotAt(grid, run.latestMs),
    startStep: 1,
    startOffset: 0,
    readyBySlot: (run.readyByAtMs - grid.originMs) / slotMs(grid),
    standingLossMinorPerH: lostKw * (priceMinorPerKwh[habitSlot] ?? 0),
    habitSlot,
    pinnedSlot: null,
    shortestWorstSlots:
      hardware.installation.controller.kind === 'dial' && requiredMin !== null && requiredMin < guaranteedMin
        ? Math.min(worstSlots, slotsFor((run.longestMin * requiredMin) / guaranteedMin))
        : worstSlots,
  }
}

/** The hours in which a tenant is willing to press, on the need's day and on its eve; all of them where none are told. */
function willingSlots(
  run: MovableRun,
  { wants, asked, grid }: { readonly wants: Wants; readonly asked: PlanCase; readonly grid: Grid },
): readonly SlotInterval[] {
  const hours = wants.kind === 'week' ? wants.willing : []
  if (hours.length === 0) return [{ from: 0, to: grid.slots }]
  return [addDays(run.day, -1), run.day]
    .flatMap((day) =>
      hours.flatMap(({ fromMinuteOfDay, toMinuteOfDay }) =>
        wallWindow(day, { startMin: fromMinuteOfDay, endMin: toMinuteOfDay }, asked.site.zone),
      ),
    )
    .map(({ startsAtMs, endsAtMs }) => ({
      from: Math.max(0, slotFrom(grid, startsAtMs)),
      to: Math.min(grid.slots, slotFrom(grid, endsAtMs)),
    }))
    .filter(({ from, to }) => to > from)
}

interface BaseCase {
  readonly ends: 'expected' | 'longest'
  readonly baseLoadW: number
}

/** What is on besides the runs that are planned. At its longest a run counts in every slot that it touches; expected, by its share. */
function baseKw(grid: Grid, runs: readonly LoadRun[], { ends, baseLoadW }: BaseCase): readonly number[] {
  const watts = new Float64Array(grid.slots).fill(baseLoadW)
  for (const run of runs) {
    const endsAtMs = ends === 'expected' ? run.endsAtMs : (run.longestEndsAtMs ?? run.startsAtMs + NEVER_ENDING_MS)
    const to = Math.min(grid.slots, slotFrom(grid, endsAtMs))
    for (let slot = Math.max(0, slotAt(grid, run.startsAtMs)); slot < to; slot++) {
      const startsAtMs = grid.originMs + slot * slotMs(grid)
      const sharedMs = Math.min(endsAtMs, startsAtMs + slotMs(grid)) - Math.max(run.startsAtMs, startsAtMs)
      watts[slot] = (watts[slot] ?? 0) + run.powerW * (ends === 'longest' ? 1 : sharedMs / slotMs(grid))
    }
  }
  return [...watts].map((powerW) => powerW / 1_000)
}

const energyMinor = (grid: Grid, runs: readonly FixedRun[], prices: readonly number[]): number =>
  baseKw(grid, runs, { ends: 'expected', baseLoadW: 0 }).reduce(
    (sum, powerKw, slot) => sum + powerKw * (grid.slotMin / 60) * (prices[slot] ?? 0),
    0,
  )
