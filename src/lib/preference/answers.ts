/** Whether a heater can do a week of showers, and what it costs: computed in the browser by the core of the nightly evaluation. Pure. */
import type { RunSource } from '#lib/core/controller/types.ts'
import type { NeedOutcome, Readiness, ShowerNeed, UnitDay } from '#lib/core/tank/types.ts'
import { assessReadiness, assessWeek } from '#lib/core/tank/week.ts'
import { MIN_PER_DAY } from '#lib/core/units.ts'
import { energyCost } from '#lib/evaluation/energy-cost.ts'
import type { PriceTable } from '#lib/evaluation/types.ts'
import { formatMoney } from '#lib/figures.ts'
import { clockWords } from '#lib/strip/clock.ts'
import { daysLabel } from './form-fields.ts'
import type { Shower, Week } from './week.ts'

const clockOf = (minuteOfDay: number): string => clockWords(minuteOfDay, null)

/** A tenant's own heater as the browser is told it: ordinary days of the coming week, Monday first. */
export interface Heater {
  readonly unit: Omit<UnitDay, 'needs' | 'runs'>
  readonly days: readonly {
    readonly runs: RunSource
    /** Index into `tables`; `null` = no tariff in force. */
    readonly table: number | null
  }[]
  readonly tables: readonly PriceTable[]
  readonly currency: string
}
export interface Answer {
  readonly label: string
  readonly words: string
  readonly bad: boolean
}

/** A cheaper time is worth a word from a tenth of the day's cost on. */
const WORTH_FRACTION = 0.1
/** Days of a week differ by what the day before left in the tank. Less than this apart they are told as one, by the worst of them. */
const SAME = { startMin: 15, shortfallMin: 5, costFraction: 0.25 } as const

/** One answer for days that come to the same. */
export function answersOf(heater: Heater, week: Week): readonly Answer[] {
  const groups: DayCase[][] = []
  const days = heater.days.map((day, weekday): UnitDay => ({ ...heater.unit, runs: day.runs, needs: needsOf(week[weekday] ?? []) }))
  const assessed = assessWeek(days)
  days.forEach((day, weekday) => {
    const one: DayCase = { weekday, day, readiness: assessed[weekday]!, cost: dayCost(heater, weekday, assessed[weekday]!) }
    const known = groups.find(([first]) => first && isSame(first, one))
    if (known) known.push(one)
    else groups.push([one])
  })
  return groups.map((cases) => ({ label: daysLabel(cases.map(({ weekday }) => weekday)), ...answerOf(heater, cases) }))
}

const needsOf = (showers: readonly Shower[]): readonly ShowerNeed[] =>
  showers.map(({ readyByMinuteOfDay, ...shower }) => ({ ...shower, readyByMin: readyByMinuteOfDay }))

interface DayCase {
  readonly weekday: number
  readonly day: UnitDay
  readonly readiness: Readiness
  readonly cost: DayCost | null
}

function isSame(one: DayCase, other: DayCase): boolean {
  if (one.day.needs.length !== other.day.needs.length) return false
  const { needs } = other.readiness
  if (!one.readiness.needs.every((need, index) => needs[index] !== undefined && isSameNeed(need, needs[index]))) return false
  // What a day costs tells days apart only where they do what is wanted.
  if (one.readiness.status !== 'ready') return true
  if (!one.cost || !other.cost) return one.cost === other.cost
  const [cost, otherCost] = [one.cost.costMinor, other.cost.costMinor]
  return Math.abs(cost - otherCost) <= SAME.costFraction * Math.max(cost, otherCost)
}

const isSameNeed = (one: NeedOutcome, other: NeedOutcome): boolean =>
  one.status === other.status &&
  JSON.stringify(one.need) === JSON.stringify(other.need) &&
  Math.abs((one.startByMin ?? 0) - (other.startByMin ?? 0)) <= SAME.startMin &&
  Math.abs(one.shortfallMin - other.shortfallMin) <= SAME.shortfallMin

/** Of days that are the same: each need as it is on its worst day, and the cost of their mean. */
function answerOf(heater: Heater, cases: readonly DayCase[]): Omit<Answer, 'label'> {
  const [first] = cases
  if (!first || first.day.needs.length === 0) return { words: 'no shower.', bad: false }
  const pressed = first.day.runs.kind === 'pressed'
  const needs = first.readiness.needs.map((_, index) => worstOf(cases.flatMap(({ readiness }) => readiness.needs[index] ?? [])))
  return {
    words: [...needs.map((need) => needWords(need, pressed)), costWords(heater, first, meanCost(cases))].filter(Boolean).join(' '),
    bad: first.readiness.status !== 'ready',
  }
}

const worstOf = (needs: readonly NeedOutcome[]): NeedOutcome =>
  needs.reduce((worst, need) =>
    need.shortfallMin > worst.shortfallMin || (need.shortfallMin === worst.shortfallMin && (need.startByMin ?? 0) < (worst.startByMin ?? 0))
      ? need
      : worst,
  )

function meanCost(cases: readonly DayCase[]): DayCost | null {
  const costs = cases.flatMap(({ cost }) => cost ?? [])
  const mean = (of: (cost: DayCost) => number): number => costs.reduce((sum, cost) => sum + of(cost), 0) / costs.length
  return costs.length === 0 ? null : { costMinor: mean((cost) => cost.costMinor), peakMinor: mean((cost) => cost.peakMinor) }
}

function needWords(need: NeedOutcome, pressed: boolean): string {
  const at = clockOf(need.need.readyByMin)
  const start = need.startByMin === null || !pressed ? '' : ` Press the timer by ${startWords(need.startByMin)}.`
  if (need.status === 'ready') return `works at ${at}.${start}`
  if (need.status === 'impossible') return need.reason
  const better =
    need.nextBestReadyByMin.length > 0
      ? ` Works at ${need.nextBestReadyByMin.map(clockOf).join(', ')}.`
      : ' A shorter or a single shower may work.'
  return `at ${at} the run is ${need.shortfallMin} min too short: warm for ${Math.floor(need.minutesServed)} of ${need.minutesWanted} minutes.${better}`
}

/** Told to five minutes, the earlier: neighbouring days differ by a minute or two and are one answer. */
const START_STEP_MIN = 5

function startWords(startByMin: number): string {
  const minute = Math.floor(startByMin / START_STEP_MIN) * START_STEP_MIN
  return minute < 0 ? `${clockOf(minute + MIN_PER_DAY)} the evening before` : clockOf(minute)
}

interface DayCost {
  readonly costMinor: number
  readonly peakMinor: number
}

function dayCost(heater: Heater, weekday: number, { heating }: Readiness): DayCost | null {
  const index = heater.days[weekday]?.table ?? null
  const table = index === null ? undefined : heater.tables[index]
  if (!table) return null
  const { costMinor, peakMinor } = energyCost(heating, table)
  return costMinor === null ? null : { costMinor, peakMinor }
}

function costWords(heater: Heater, one: DayCase, cost: DayCost | null): string {
  if (!cost) return ''
  const money = (minor: number) => formatMoney(minor, heater.currency)
  if (cost.peakMinor <= 0) return `Costs about ${money(cost.costMinor)} a day, none of it on-peak.`
  const said = `Costs about ${money(cost.costMinor)} a day, ${money(cost.peakMinor)} of it on-peak.`
  const better = one.readiness.status === 'ready' ? cheaperTime(heater, one) : null
  return better ? `${said} At ${clockOf(better.readyByMin)} instead: ${money(better.costMinor)}.` : said
}

const STEP_MIN = 30
const REACH_MIN = 180

/** The nearest time to which the first on-peak shower could move to cost notably less and still be warm. */
function cheaperTime(
  heater: Heater,
  { weekday, day, readiness, cost: now }: DayCase,
): { readonly readyByMin: number; readonly costMinor: number } | null {
  const [first, ...rest] = day.needs
  if (!now || !first || rest.length > 0 || day.runs.kind !== 'pressed') return null
  const start = { kind: 'nodes', nodesC: readiness.startNodesC } as const
  for (let awayMin = STEP_MIN; awayMin <= REACH_MIN; awayMin += STEP_MIN) {
    for (const readyByMin of [first.readyByMin - awayMin, first.readyByMin + awayMin]) {
      if (readyByMin < 0 || readyByMin >= MIN_PER_DAY) continue
      const moved = assessReadiness({ ...day, needs: [{ ...first, readyByMin }], start })
      const cost = moved.status === 'ready' ? dayCost(heater, weekday, moved) : null
      if (cost && cost.costMinor <= now.costMinor * (1 - WORTH_FRACTION)) return { readyByMin, costMinor: cost.costMinor }
    }
  }
  return null
}
