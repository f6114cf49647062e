/** Whether a heater can do a week of showers, and what it costs: computed in the browser by the core of the nightly evaluation. Pure. */
import type { RunSource } from '#lib/core/controller/types.ts'
import { assessReadiness } from '#lib/core/tank/readiness.ts'
import type { NeedOutcome, Readiness, ShowerNeed, UnitDay } from '#lib/core/tank/types.ts'
import { MIN_PER_DAY } from '#lib/core/units.ts'
import { energyCost } from '#lib/evaluation/energy-cost.ts'
import type { PriceTable } from '#lib/evaluation/types.ts'
import { formatMinuteOfDay, formatMoney } from '#lib/format.ts'
import { daysLabel } from './form-fields.ts'
import type { Shower, Week } from './schemas.ts'

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

/** A day's answer before days that come to the same are joined. */
interface DayAnswer {
  readonly needs: string
  readonly cost: string
  readonly costMinor: number | null
  readonly bad: boolean
}

/** A difference in a day's cost is worth a word from a tenth of it on. */
const WORTH_FRACTION = 0.1

/** One answer for days that come to the same. */
export function answersOf(heater: Heater, week: Week): readonly Answer[] {
  const found: { readonly days: number[]; readonly answer: DayAnswer }[] = []
  const computed = new Map<string, DayAnswer>()
  heater.days.forEach((day, weekday) => {
    const showers = week[weekday] ?? []
    const key = JSON.stringify([day, showers])
    const answer = computed.get(key) ?? answerOf(heater, weekday, showers)
    computed.set(key, answer)
    const known = found.find((one) => isSame(one.answer, answer))
    if (known) known.days.push(weekday)
    else found.push({ days: [weekday], answer })
  })
  return found.map(({ days, answer: { needs, cost, bad } }) => ({
    label: daysLabel(days),
    words: [needs, cost].filter(Boolean).join(' '),
    bad,
  }))
}

function isSame(one: DayAnswer, other: DayAnswer): boolean {
  if (one.needs !== other.needs) return false
  if (one.costMinor === null || other.costMinor === null) return one.costMinor === other.costMinor
  return Math.abs(one.costMinor - other.costMinor) <= WORTH_FRACTION * Math.max(one.costMinor, other.costMinor)
}

function answerOf(heater: Heater, weekday: number, showers: readonly Shower[]): DayAnswer {
  const day = heater.days[weekday]
  if (!day || showers.length === 0) return { needs: 'no shower.', cost: '', costMinor: null, bad: false }
  const needs = showers.map(({ readyByMinuteOfDay, ...shower }) => ({ ...shower, readyByMin: readyByMinuteOfDay }))
  const readiness = readinessOn(heater, weekday, needs)
  const pressed = day.runs.kind === 'pressed'
  return {
    needs: readiness.needs.map((need) => needWords(need, pressed)).join(' '),
    cost: costWords({ heater, weekday, needs, readiness }),
    costMinor: dayCost(heater, weekday, readiness)?.costMinor ?? null,
    bad: readiness.status !== 'ready',
  }
}

const readinessOn = ({ unit, days }: Heater, weekday: number, needs: readonly ShowerNeed[]): Readiness =>
  assessReadiness({ ...unit, runs: days[weekday]?.runs ?? { kind: 'clocked', onIntervals: [], uncertaintyMin: 0 }, needs })

function needWords(need: NeedOutcome, pressed: boolean): string {
  const at = formatMinuteOfDay(need.need.readyByMin)
  const start = need.startByMin === null || !pressed ? '' : ` Press the timer by ${startWords(need.startByMin)}.`
  if (need.status === 'ready') return `works at ${at}.${start}`
  if (need.status === 'impossible') return need.reason
  const better =
    need.nextBestReadyByMin.length > 0
      ? ` Works at ${need.nextBestReadyByMin.map(formatMinuteOfDay).join(', ')}.`
      : ' A shorter or a single shower may work.'
  return `at ${at} the run is ${need.shortfallMin} min too short: warm for ${Math.floor(need.minutesServed)} of ${need.minutesWanted} minutes.${better}`
}

const startWords = (minute: number): string =>
  minute < 0 ? `${formatMinuteOfDay(minute + MIN_PER_DAY)} the evening before` : formatMinuteOfDay(minute)

interface CostCase {
  readonly heater: Heater
  readonly weekday: number
  readonly needs: readonly ShowerNeed[]
  readonly readiness: Readiness
}
interface DayCost {
  readonly costMinor: number
  readonly peakMinor: number
}

function dayCost(heater: Heater, weekday: number, { heating }: Readiness): DayCost | null {
  const index = heater.days[weekday]?.table ?? null
  const table = index === null ? undefined : heater.tables[index]
  if (!table) return null
  const { costMinor } = energyCost(heating, table)
  const onPeak = table.priceMinorPerKwh.map((price, slot) => (table.onPeak[slot] ? price : 0))
  const peak = energyCost(heating, { ...table, priceMinorPerKwh: onPeak })
  return costMinor === null || peak.costMinor === null ? null : { costMinor, peakMinor: peak.costMinor }
}

function costWords({ heater, weekday, needs, readiness }: CostCase): string {
  const cost = dayCost(heater, weekday, readiness)
  if (!cost) return ''
  const money = (minor: number) => formatMoney(minor, heater.currency)
  if (cost.peakMinor <= 0) return `Costs about ${money(cost.costMinor)} a day, none of it on-peak.`
  const said = `Costs about ${money(cost.costMinor)} a day, ${money(cost.peakMinor)} of it on-peak.`
  const better = readiness.status === 'ready' ? cheaperTime({ heater, weekday, needs, readiness }) : null
  return better ? `${said} At ${formatMinuteOfDay(better.readyByMin)} instead: ${money(better.costMinor)}.` : said
}

const STEP_MIN = 30
const REACH_MIN = 180

/** The nearest time to which the first on-peak shower could move to cost notably less and still be warm. */
function cheaperTime({ heater, weekday, needs, readiness }: CostCase): { readonly readyByMin: number; readonly costMinor: number } | null {
  const now = dayCost(heater, weekday, readiness)
  const [first, ...rest] = needs
  if (!now || !first || rest.length > 0 || heater.days[weekday]?.runs.kind !== 'pressed') return null
  for (let awayMin = STEP_MIN; awayMin <= REACH_MIN; awayMin += STEP_MIN) {
    for (const readyByMin of [first.readyByMin - awayMin, first.readyByMin + awayMin]) {
      if (readyByMin < 0 || readyByMin >= MIN_PER_DAY) continue
      const moved = readinessOn(heater, weekday, [{ ...first, readyByMin }])
      const cost = moved.status === 'ready' ? dayCost(heater, weekday, moved) : null
      if (cost && cost.costMinor <= now.costMinor * (1 - WORTH_FRACTION)) return { readyByMin, costMinor: cost.costMinor }
    }
  }
  return null
}
