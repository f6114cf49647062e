/** The prices of one period: one, or tiers by how much is used. */
import type { EnergyTier } from '#lib/core/tariff/types.ts'
import { NumberField } from './NumberField.tsx'

export interface Tier {
  readonly max: number | null
  readonly priceMinor: number
}
interface Props {
  /** What the prices are of; for the labels. */
  readonly of: string
  readonly tiers: readonly Tier[]
  readonly unit: string
  readonly boundUnit: string
  readonly minorPerMajor: number
  readonly onChange: (tiers: readonly Tier[]) => void
}

export function TierFields({ of, tiers, unit, boundUnit, minorPerMajor, onChange }: Props) {
  const change = (index: number, fields: Partial<Tier>) =>
    onChange(tiers.map((tier, other) => (other === index ? { ...tier, ...fields } : tier)))
  return (
    <div className="flex flex-wrap items-end gap-x-4 gap-y-2">
      {tiers.map(({ max, priceMinor }, index) => (
        <div key={index} className="flex flex-wrap items-end gap-2">
          <NumberField
            label={tiers.length === 1 ? `Price, ${of}` : `Price of tier ${index + 1}, ${of}`}
            value={priceMinor / minorPerMajor}
            unit={unit}
            onChange={(major) => change(index, { priceMinor: Number((major * minorPerMajor).toPrecision(12)) })}
          />
          {index < tiers.length - 1 && (
            <NumberField label="up to" value={max ?? Number.NaN} unit={boundUnit} onChange={(bound) => change(index, { max: bound })} />
          )}
        </div>
      ))}
      <button
        type="button"
        className="min-h-10 underline"
        onClick={() =>
          onChange([...tiers.slice(0, -1), { max: nextBound(tiers), priceMinor: tiers.at(-1)?.priceMinor ?? 0 }, ...tiers.slice(-1)])
        }
      >
        Add a tier<span className="sr-only"> to {of}</span>
      </button>
      {tiers.length > 1 && (
        <button type="button" className="min-h-10 underline" onClick={() => onChange([...tiers.slice(0, -2), ...tiers.slice(-1)])}>
          Take the last bound away<span className="sr-only"> from {of}</span>
        </button>
      )}
    </div>
  )
}

const FIRST_BOUND = 100
const nextBound = (tiers: readonly Tier[]): number => {
  const last = tiers.at(-2)?.max
  return last ? last * 2 : FIRST_BOUND
}

/** Bounds of energy are in the unit that the period's tiers already have. */
export const energyTiers = (tiers: readonly Tier[], unit: EnergyTier['unit']): readonly EnergyTier[] =>
  tiers.map(({ max, priceMinor }) => ({ max, unit, priceMinorPerKwh: priceMinor }))
