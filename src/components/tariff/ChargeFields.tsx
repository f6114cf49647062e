/** What is charged beside energy: fixed, minimum, and the month's highest demand. */
import type { TariffVersion } from '#lib/core/tariff/types.ts'
import { type Draft, openDemand } from '#lib/tariff/draft.ts'
import { withoutPeriodDemand, withPeriodDemand } from '#lib/tariff/draft-shape.ts'
import { NumberField } from './NumberField.tsx'
import { TierFields } from './TierFields.tsx'

interface Props {
  readonly draft: Draft
  readonly onChange: (draft: Draft, said: string) => void
}
const WINDOWS = [15, 30, 60] as const
const PERS = ['month', 'day', 'year'] as const

export function ChargeFields({ draft, onChange }: Props) {
  const { flatDemand, periodDemand, lookback, coincidentDemand, fuelAdjustmentMinorPerKwh: fuel } = draft
  return (
    <div className="flex flex-col gap-6">
      <fieldset className="flex flex-wrap items-end gap-x-8 gap-y-3">
        <legend className="mb-2 font-bold">Fixed and minimum charge</legend>
        <Charge label="Fixed charge" charge={draft.fixed} draft={draft} onChange={(fixed) => onChange({ ...draft, fixed }, '')} />
        <Charge label="Minimum charge" charge={draft.minimum} draft={draft} onChange={(minimum) => onChange({ ...draft, minimum }, '')} />
      </fieldset>
      <fieldset className="flex flex-col gap-3">
        <legend className="mb-2 font-bold">Demand charge</legend>
        <label className="flex items-center gap-2">
          <span className="text-small">Demand is the highest mean of</span>
          <select
            className="field w-auto"
            value={draft.demandWindowMin}
            onChange={(event) =>
              onChange({ ...draft, demandWindowMin: WINDOWS.find((one) => one === Number(event.target.value)) ?? 15 }, '')
            }
          >
            {WINDOWS.map((one) => (
              <option key={one} value={one}>
                {one} minutes
              </option>
            ))}
          </select>
        </label>
        <Toggle
          label="On the month’s highest, at any hour"
          isOn={flatDemand !== null}
          onToggle={(isOn) => onChange(isOn ? withFlatDemand(draft) : withoutFlatDemand(draft), '')}
        />
        {flatDemand && <FlatDemand draft={draft} flatDemand={flatDemand} onChange={onChange} />}
        <Toggle
          label="On the highest within each demand period, painted on a grid of its own"
          isOn={periodDemand !== null}
          onToggle={(isOn) =>
            onChange(isOn ? withPeriodDemand(draft) : withoutPeriodDemand(draft), isOn ? 'The demand grid is below the energy grid.' : '')
          }
        />
      </fieldset>
      {(lookback ?? coincidentDemand?.length ?? fuel) && (
        <p className="text-soft">
          Kept as it was read, and billed:{' '}
          {[
            lookback && `a lookback of ${Math.round(lookback.fraction * 100)} % to earlier months’ demand`,
            coincidentDemand?.length && 'demand at the hours of the system’s peak',
            fuel && 'a fuel adjustment by month',
          ]
            .filter(Boolean)
            .join('; ')}
          .
        </p>
      )}
    </div>
  )
}

const withFlatDemand = (draft: Draft): Draft => ({
  ...draft,
  flatDemand: { tiersByStructure: [openDemand(0)], structureByMonth: Array.from({ length: 12 }, () => 0) },
})
/** A lookback is to the flat demand: it goes with it. */
function withoutFlatDemand(draft: Draft): Draft {
  const rest = { ...draft, flatDemand: null }
  delete (rest as { lookback?: unknown }).lookback
  return rest
}

interface FlatProps extends Props {
  readonly flatDemand: NonNullable<TariffVersion['flatDemand']>
}
const MONTHS = ['Jan', 'Feb', 'Mar', 'Apr', 'May', 'Jun', 'Jul', 'Aug', 'Sep', 'Oct', 'Nov', 'Dec']

function FlatDemand({ draft, flatDemand, onChange }: FlatProps) {
  const { tiersByStructure, structureByMonth } = flatDemand
  const change = (fields: Partial<typeof flatDemand>) => onChange({ ...draft, flatDemand: { ...flatDemand, ...fields } }, '')
  return (
    <div className="flex flex-col gap-3 border-l-4 border-rule pl-4">
      {tiersByStructure.map((tiers, index) => (
        <TierFields
          key={index}
          of={tiersByStructure.length === 1 ? 'demand' : `demand price ${index + 1}`}
          tiers={tiers.map(({ maxKw, priceMinorPerKw }) => ({ max: maxKw, priceMinor: priceMinorPerKw }))}
          unit={`${draft.currency}/kW`}
          boundUnit="kW"
          minorPerMajor={draft.minorPerMajor}
          onChange={(next) =>
            change({
              tiersByStructure: tiersByStructure.map((was, other) =>
                other === index ? next.map(({ max, priceMinor }) => ({ maxKw: max, priceMinorPerKw: priceMinor })) : was,
              ),
            })
          }
        />
      ))}
      <button
        type="button"
        className="min-h-10 self-start underline"
        onClick={() => change({ tiersByStructure: [...tiersByStructure, openDemand(0)] })}
      >
        Add a demand price for other months
      </button>
      {tiersByStructure.length > 1 && (
        <div className="flex flex-wrap gap-3">
          {MONTHS.map((month, index) => (
            <label key={month} className="flex flex-col gap-1">
              <span className="text-small">{month}</span>
              <select
                className="field w-auto"
                value={structureByMonth[index]}
                onChange={(event) =>
                  change({ structureByMonth: structureByMonth.map((was, other) => (other === index ? Number(event.target.value) : was)) })
                }
              >
                {tiersByStructure.map((_, structure) => (
                  <option key={structure} value={structure}>
                    price {structure + 1}
                  </option>
                ))}
              </select>
            </label>
          ))}
        </div>
      )}
    </div>
  )
}

interface ToggleProps {
  readonly label: string
  readonly isOn: boolean
  readonly onToggle: (isOn: boolean) => void
}

const Toggle = ({ label, isOn, onToggle }: ToggleProps) => (
  <label className="flex min-h-8 items-center gap-2">
    <input type="checkbox" className="size-5" checked={isOn} onChange={(event) => onToggle(event.target.checked)} />
    {label}
  </label>
)

interface ChargeProps {
  readonly label: string
  readonly charge: TariffVersion['fixed']
  readonly draft: Draft
  readonly onChange: (charge: TariffVersion['fixed']) => void
}

/** Nothing is no charge. */
function Charge({ label, charge, draft, onChange }: ChargeProps) {
  const per = charge?.per ?? 'month'
  const write = (amountMinor: number, next: (typeof PERS)[number]) => onChange(amountMinor === 0 ? null : { amountMinor, per: next })
  return (
    <div className="flex items-end gap-2">
      <NumberField
        label={label}
        value={(charge?.amountMinor ?? 0) / draft.minorPerMajor}
        unit={draft.currency}
        onChange={(major) => write(Number((major * draft.minorPerMajor).toPrecision(12)), per)}
      />
      <label className="flex flex-col gap-1">
        <span className="sr-only">{label} per</span>
        <select
          className="field w-auto"
          value={per}
          onChange={(event) => charge && write(charge.amountMinor, PERS.find((one) => one === event.target.value) ?? 'month')}
        >
          {PERS.map((one) => (
            <option key={one} value={one}>
              a {one}
            </option>
          ))}
        </select>
      </label>
    </div>
  )
}
