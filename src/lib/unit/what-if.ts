/** What one tries in a unit: the fields with their limits, and how now and then compare, in words. Pure. */
import type { ModelAnswer, UnitModel } from './model.ts'
import { stateWords } from './view.ts'
import { formatEnergy } from '#lib/format.ts'
import { formatMoney } from '#lib/figures.ts'
import { clockWords } from '#lib/strip/clock.ts'
import { chanceWords } from './outlook-words.ts'
import type { Change } from './model.ts'

export interface TryField {
  readonly name: keyof Change
  readonly label: string
  readonly unit: string
  readonly min: number
  readonly max: number
  readonly now: number | null
}

/** Fields that make sense for what is installed; limits as the records have them. */
export function tryFields({ days }: UnitModel): readonly TryField[] {
  const unit = days[0]!.unit
  const { tank, runs } = unit
  const element = tank.upperElement ?? tank.lowerElement
  const need = days.flatMap((day) => day.unit.needs)[0]
  return [
    runs.kind === 'pressed'
      ? { name: 'runMin', label: 'Run to count on', unit: 'min', min: 1, max: 720, now: Math.floor(runs.guaranteedMin) }
      : { name: 'earlierMin', label: 'Switch on earlier by', unit: 'min', min: 0, max: 360, now: 0 },
    { name: 'elementW', label: 'Element', unit: 'W', min: 300, max: 12_000, now: element?.ratedPowerW ?? null },
    { name: 'supplyVoltageV', label: 'Supply voltage', unit: 'V', min: 100, max: 300, now: unit.supplyVoltageV },
    { name: 'setPointC', label: 'Set point', unit: '°C', min: 40, max: 80, now: tank.setPointC },
    { name: 'nominalVolumeL', label: 'Tank, nominal', unit: 'L', min: 10, max: 1_000, now: tank.nominalVolumeL },
    { name: 'flowLPerMin', label: 'Shower flow', unit: 'L/min', min: 3, max: 20, now: need?.flowLPerMin ?? null },
  ]
}

export interface Compared {
  readonly label: string
  readonly now: string
  readonly then: string
}

export function compare(model: UnitModel, now: ModelAnswer, then: ModelAnswer, index: number): readonly Compared[] {
  const row = (label: string, words: (answer: ModelAnswer) => string): Compared => ({ label, now: words(now), then: words(then) })
  const clockChange = model.days[index]?.clockChange ?? null
  const day = (answer: ModelAnswer) => answer.days[index]!
  return [
    row('That day', (answer) => {
      const { readiness } = day(answer)
      return stateWords({ status: readiness.status, shortfallMin: Math.max(0, ...readiness.needs.map((need) => need.shortfallMin)) })
    }),
    row('Start by', (answer) => {
      const startByMin = day(answer).readiness.needs[0]?.startByMin
      return startByMin === undefined || startByMin === null ? '—' : clockWords(startByMin, clockChange)
    }),
    row('Run the showers need', (answer) => {
      const needs = day(answer).readiness.needs
      if (needs.length === 0) return '—'
      const longest = needs.map((need) => need.requiredRunMin)
      return longest.includes(null) ? 'no run serves them' : `${Math.max(...longest.map((minutes) => minutes ?? 0))} min`
    }),
    row('Chance', (answer) => chanceWords(day(answer).chance) || '—'),
    row('Days warm on time', (answer) => {
      const wanted = answer.days.filter(({ readiness }) => readiness.needs.length > 0)
      return `${wanted.filter(({ readiness }) => readiness.status === 'ready').length} of ${wanted.length} this week`
    }),
    row('Energy', (answer) => `${formatEnergy(answer.energyKwh)} a week`),
    row('Cost', (answer) => (answer.costMinor === null ? 'no tariff in force' : `${formatMoney(answer.costMinor, model.currency)} a week`)),
    row('Coldest water between 20 and 45 °C', ({ hygiene }) =>
      hygiene.status === 'assessed' ? `${Math.round(hygiene.growthRangeFraction * 100)} % of the week` : 'not known',
    ),
    row('Stored water', (answer) => answer.hygiene.reason),
  ]
}
