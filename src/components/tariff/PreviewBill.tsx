/** A month's bill of the property under the rate that is being written, line by line, by the same core as every other cost. */
import { useDeferredValue, useMemo, useState } from 'react'
import { billMonth } from '#lib/core/tariff/bill.ts'
import type { LoadSeries, TariffVersion } from '#lib/core/tariff/types.ts'
import { addMonths, monthOf } from '#lib/core/time/civil.ts'
import { formatMoney } from '#lib/figures.ts'
import { billView } from '#lib/tariff/bill-view.ts'
import type { Draft } from '#lib/tariff/draft.ts'
import { type HeatingWeek, weekThroughMonth } from '#lib/tariff/month-load.ts'
import { NumberField } from './NumberField.tsx'

interface Props {
  readonly draft: Draft
  readonly versions: readonly TariffVersion[]
  readonly zone: string
  readonly today: string
  readonly baseLoadW: number
  readonly week: HeatingWeek | null
  /** The rate cannot be billed yet. */
  readonly isWrong: boolean
}
/** Before any day that is billed: the rate is tried on the whole month, whenever it is to begin. */
const ALWAYS = '0001-01-01'
const MONTH_NAME = new Intl.DateTimeFormat('en', { month: 'long', year: 'numeric', timeZone: 'UTC' })
const NO_HEATING: HeatingWeek = Array.from({ length: 7 }, () => [])

export function PreviewBill({ draft, versions, zone, today, baseLoadW, week, isWrong }: Props) {
  const [month, setMonth] = useState(monthOf(today))
  const [flatKw, setFlatKw] = useState(10)
  const [isFlat, setIsFlat] = useState(week === null)
  // Typing and painting stay quick while the month is billed.
  const tried = useDeferredValue(draft)
  const load = useMemo(
    (): LoadSeries =>
      weekThroughMonth({
        month,
        zone,
        baseLoadW: isFlat ? Math.max(0, Number.isFinite(flatKw) ? flatKw : 0) * 1_000 : baseLoadW,
        week: isFlat || !week ? NO_HEATING : week,
      }),
    [month, zone, baseLoadW, week, isFlat, flatKw],
  )
  const bill = useMemo(
    () => (isWrong ? null : billMonth({ zone, versions: [{ ...tried, effectiveFrom: ALWAYS }] }, month, load)),
    [isWrong, tried, zone, month, load],
  )
  const now = useMemo(() => billMonth({ zone, versions }, month, load), [zone, versions, month, load])
  const view = bill && billView(bill, draft.currency)
  const energyKwh = load.energyKwh.reduce((sum, kwh) => sum + kwh, 0)
  return (
    <section aria-labelledby="preview" className="flex flex-col gap-3">
      <h2 id="preview">Preview: a month’s bill under this rate{view && `: ${view.total}`}</h2>
      <div className="flex flex-wrap items-end gap-4">
        <label className="flex flex-col gap-1">
          <span className="text-small">Month</span>
          <select className="field w-auto" value={month} onChange={(event) => setMonth(event.target.value)}>
            {Array.from({ length: 13 }, (_, index) => addMonths(monthOf(today), index)).map((one) => (
              <option key={one} value={one}>
                {MONTH_NAME.format(new Date(`${one}-15T00:00:00Z`))}
              </option>
            ))}
          </select>
        </label>
        <label className="flex flex-col gap-1">
          <span className="text-small">Load</span>
          <select
            className="field w-auto"
            value={isFlat ? 'flat' : 'expected'}
            onChange={(event) => setIsFlat(event.target.value === 'flat')}
          >
            {week && <option value="expected">expected runs over the base load</option>}
            <option value="flat">the same all day</option>
          </select>
        </label>
        {isFlat && <NumberField label="Power all day" value={flatKw} unit="kW" onChange={setFlatKw} />}
      </div>
      <p className="text-soft">
        {Math.round(energyKwh)} kWh in the month
        {isFlat ? '.' : ', the coming week’s runs repeated over a base load of ' + String(baseLoadW / 1_000) + ' kW.'} Whole month under
        this rate, whenever it begins.
      </p>
      {!view && <p>The preview waits until nothing is missing above.</p>}
      {view && (
        <div className="overflow-x-auto" tabIndex={0} role="region" aria-label="Preview bill">
          <table className="plain-table min-w-[34rem]">
            <thead>
              <tr>
                <th scope="col">For</th>
                <th scope="col">Quantity</th>
                <th scope="col">Price of one</th>
                <th scope="col">Amount</th>
              </tr>
            </thead>
            <tbody>
              {view.lines.map((line, index) => (
                <tr key={index}>
                  <td>{line.label}</td>
                  <td>{line.quantity}</td>
                  <td>{line.price}</td>
                  <td>{line.amount}</td>
                </tr>
              ))}
              <tr>
                <th scope="row" colSpan={3}>
                  Together
                </th>
                <td className="font-bold">{view.total}</td>
              </tr>
            </tbody>
          </table>
        </div>
      )}
      {bill && versions.length > 0 && now.unbilled.length === 0 && (
        <p>
          Under what is recorded for that month: {formatMoney(now.totalMinor, draft.currency)}.{' '}
          {bill.totalMinor === now.totalMinor
            ? 'No difference.'
            : `This rate is ${formatMoney(Math.abs(bill.totalMinor - now.totalMinor), draft.currency)} ${bill.totalMinor > now.totalMinor ? 'dearer' : 'cheaper'}.`}
        </p>
      )}
      {view && view.missing.length > 0 && (
        <ul className="list-disc pl-5">
          {view.missing.map((one) => (
            <li key={one}>{one}</li>
          ))}
        </ul>
      )}
    </section>
  )
}
