/** A unit's week as the model sees it, and what one change would make of it. Pure: the page and the browser run the same. */
import type { RunSource } from '#lib/core/controller/types.ts'
import { assessHygiene } from '#lib/core/hygiene/assess-hygiene.ts'
import { assessScald } from '#lib/core/hygiene/scald.ts'
import type { HygieneFinding, HygienePolicyId, ScaldFinding } from '#lib/core/hygiene/types.ts'
import { type Chance, chancesOf } from '#lib/core/tank/chance.ts'
import { type OtherClock, type Outlook, seasonOutlook } from '#lib/core/tank/outlook.ts'
import type { HeatingElement, InletClimate, Readiness, UnitDay } from '#lib/core/tank/types.ts'
import { assessWeek } from '#lib/core/tank/week.ts'
import type { MinuteInterval } from '#lib/core/time/types.ts'
import { energyCost } from '#lib/evaluation/energy-cost.ts'
import type { PriceTable } from '#lib/evaluation/types.ts'
import type { ClockChange } from '#lib/strip/clock.ts'

export interface ModelDay {
  readonly day: string
  readonly dayMin: number
  readonly clockChange: ClockChange | null
  readonly peaks: readonly MinuteInterval[]
  /** Index into the tables; `null` = no tariff in force. */
  readonly table: number | null
  readonly unit: UnitDay
}

/** Seven local days from today on: plain data, so that the browser can compute them again. */
export interface UnitModel {
  readonly days: readonly ModelDay[]
  /** `null` where no clock change changes the week. */
  readonly otherClock: OtherClock | null
  readonly tables: readonly PriceTable[]
  readonly currency: string
  readonly climate: InletClimate
  readonly policy: HygienePolicyId
}

export interface ModelAnswer {
  readonly days: readonly {
    readonly unit: UnitDay
    readonly readiness: Readiness
    readonly chance: Chance | null
    readonly costMinor: number | null
  }[]
  readonly outlook: Outlook
  readonly hygiene: HygieneFinding
  readonly scald: ScaldFinding
  /** Of the week. */
  readonly energyKwh: number
  /** `null` where a day has no price. */
  readonly costMinor: number | null
}

/** The same seed every time: the same records have the same chance. */
const SEED = 1

export function answerOf({ days, otherClock, tables, climate, policy }: UnitModel): ModelAnswer {
  const units = days.map(({ unit }) => unit)
  const readiness = assessWeek(units)
  const chances = chancesOf({ days: units, readiness, seed: SEED })
  const answered = days.map(({ unit, table }, index) => {
    const own = readiness[index]!
    const { costMinor } = energyCost(own.heating, table === null ? null : (tables[table] ?? null))
    return { unit, readiness: own, chance: chances[index] ?? null, costMinor }
  })
  const { setPointC, mixingValveC } = units[0]!.tank
  const [first] = readiness
  return {
    days: answered,
    outlook: seasonOutlook({ days: units, otherClock, climate, fromDay: days[0]!.day }),
    hygiene: assessHygiene({
      days: readiness.map(({ trace }) => ({ coldestC: trace.coldestC, hottestC: trace.outletC })),
      sampleMin: first!.trace.sampleMin,
      setPointC,
      policy,
    }),
    scald: assessScald(setPointC, mixingValveC),
    energyKwh: readiness.reduce((sum, { energyInKwh }) => sum + energyInKwh, 0),
    costMinor: answered.reduce<number | null>((sum, { costMinor }) => (sum === null || costMinor === null ? null : sum + costMinor), 0),
  }
}

/** What may be tried; `null` leaves it as it is. Volume is nominal; flow is that of every shower. */
export interface Change {
  /** Of a pressed timer: the run that can be counted on. */
  readonly runMin: number | null
  /** Of a clock: how much earlier it switches on. */
  readonly earlierMin: number | null
  readonly elementW: number | null
  readonly supplyVoltageV: number | null
  readonly setPointC: number | null
  readonly nominalVolumeL: number | null
  readonly flowLPerMin: number | null
}

export const NO_CHANGE: Change = {
  runMin: null,
  earlierMin: null,
  elementW: null,
  supplyVoltageV: null,
  setPointC: null,
  nominalVolumeL: null,
  flowLPerMin: null,
}

export const changed = (model: UnitModel, change: Change): UnitModel => ({
  ...model,
  days: model.days.map((day) => ({ ...day, unit: changedDay(day.unit, change) })),
  otherClock: model.otherClock && { ...model.otherClock, days: model.otherClock.days.map((day) => changedDay(day, change)) },
})

function changedDay(
  day: UnitDay,
  { runMin, earlierMin, elementW, supplyVoltageV, setPointC, nominalVolumeL, flowLPerMin }: Change,
): UnitDay {
  const { tank } = day
  const element = (one: HeatingElement | null) => (one && elementW !== null ? { ...one, ratedPowerW: elementW } : one)
  return {
    ...day,
    runs: changedRuns(day.runs, { runMin, earlierMin }),
    supplyVoltageV: supplyVoltageV ?? day.supplyVoltageV,
    needs: flowLPerMin === null ? day.needs : day.needs.map((need) => ({ ...need, flowLPerMin })),
    tank: {
      ...tank,
      upperElement: element(tank.upperElement),
      lowerElement: element(tank.lowerElement),
      setPointC: setPointC ?? tank.setPointC,
      // A measured volume belongs to the tank that was measured.
      ...(nominalVolumeL === null ? {} : { nominalVolumeL, actualVolumeL: null }),
    },
  }
}

/** Another run keeps the spread of the one that is installed. */
function changedRuns(runs: RunSource, { runMin, earlierMin }: Pick<Change, 'runMin' | 'earlierMin'>): RunSource {
  if (runs.kind === 'pressed') {
    if (runMin === null) return runs
    const ratio = runs.guaranteedMin > 0 ? runMin / runs.guaranteedMin : 1
    return {
      ...runs,
      guaranteedMin: runMin,
      expectedMin: runs.expectedMin * ratio,
      longestMin: runs.longestMin === null ? null : runs.longestMin * ratio,
    }
  }
  if (earlierMin === null) return runs
  return { ...runs, onIntervals: runs.onIntervals.map((on) => ({ ...on, startMin: on.startMin - earlierMin })) }
}
