/** The periods of a layer: which one paints, its name and its prices. */
import { type Draft, type Layer, LETTERS, letterOf } from '#lib/tariff/draft.ts'
import { addPeriod, periodNamesOf, removePeriod, withPeriodName } from '#lib/tariff/draft-shape.ts'
import { patternsOf } from '#lib/tariff/patterns.ts'
import { energyTiers, type Tier, TierFields } from './TierFields.tsx'

interface Props {
  readonly draft: Draft
  readonly layer: Layer
  readonly brush: number
  readonly onBrush: (period: number) => void
  readonly onChange: (draft: Draft, said: string) => void
}

export function PeriodList({ draft, layer, brush, onBrush, onChange }: Props) {
  const names = periodNamesOf(draft, layer)
  const patterns = patternsOf(draft, layer)
  const perUnit = layer === 'energy' ? 'kWh' : 'kW'
  return (
    <fieldset>
      <legend className="font-bold">{layer === 'energy' ? 'Periods and prices' : 'Demand periods and prices'}</legend>
      <ul className="ledger mt-2">
        {names.map((name, period) => (
          <li key={period} className="flex flex-wrap items-end gap-x-4 gap-y-2 py-3">
            <label className="flex min-h-10 cursor-pointer items-center gap-2">
              <input type="radio" name={`brush-${layer}`} className="size-5" checked={brush === period} onChange={() => onBrush(period)} />
              <span className={`week-swatch week-${patterns[period] ?? 'plain'}`}>
                <span>{letterOf(period)}</span>
              </span>
              <span className="sr-only">paints {name}</span>
            </label>
            <label className="flex flex-col gap-1">
              <span className="text-small">Name of {letterOf(period)}</span>
              <input
                className="field w-44"
                value={name}
                maxLength={120}
                onChange={(event) => onChange(withPeriodName(draft, layer, period, event.target.value), '')}
              />
            </label>
            <TierFields
              of={letterOf(period)}
              tiers={tiersOf(draft, layer, period)}
              unit={`${draft.currency}/${perUnit}`}
              boundUnit={layer === 'energy' ? (draft.energyPeriods[period]?.[0]?.unit ?? 'kWh') : 'kW'}
              minorPerMajor={draft.minorPerMajor}
              onChange={(tiers) => onChange(withTiers(draft, layer, period, tiers), '')}
            />
            {names.length > 1 && (
              <button
                type="button"
                className="min-h-10 underline"
                onClick={() =>
                  onChange(removePeriod(draft, layer, period), `${letterOf(period)}, ${name}, is gone; its hours are ${letterOf(0)}.`)
                }
              >
                Take {letterOf(period)} away
              </button>
            )}
          </li>
        ))}
      </ul>
      {names.length < LETTERS.length && (
        <button
          type="button"
          className="button mt-2"
          onClick={() => onChange(addPeriod(draft, layer), `Period ${letterOf(names.length)} is there to paint with.`)}
        >
          Add a period
        </button>
      )}
    </fieldset>
  )
}

const tiersOf = (draft: Draft, layer: Layer, period: number): readonly Tier[] =>
  layer === 'energy'
    ? (draft.energyPeriods[period] ?? []).map(({ max, priceMinorPerKwh }) => ({ max, priceMinor: priceMinorPerKwh }))
    : (draft.periodDemand?.tiersByPeriod[period] ?? []).map(({ maxKw, priceMinorPerKw }) => ({ max: maxKw, priceMinor: priceMinorPerKw }))

function withTiers(draft: Draft, layer: Layer, period: number, tiers: readonly Tier[]): Draft {
  if (layer === 'energy') {
    const unit = draft.energyPeriods[period]?.[0]?.unit ?? 'kWh'
    return { ...draft, energyPeriods: draft.energyPeriods.map((was, index) => (index === period ? energyTiers(tiers, unit) : was)) }
  }
  if (!draft.periodDemand) return draft
  const next = tiers.map(({ max, priceMinor }) => ({ maxKw: max, priceMinorPerKw: priceMinor }))
  const tiersByPeriod = draft.periodDemand.tiersByPeriod.map((was, index) => (index === period ? next : was))
  return { ...draft, periodDemand: { ...draft.periodDemand, tiersByPeriod } }
}
