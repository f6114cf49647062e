/** Tries a change on a unit: readiness, cost and hygiene at once, computed in the browser by the core of the nightly evaluation. Saves nothing. */
import { useDeferredValue, useEffect, useId, useMemo, useState } from 'react'
import { answerOf, type Change, changed, NO_CHANGE, type UnitModel } from '#lib/unit/model.ts'
import { outlookWords } from '#lib/unit/outlook-words.ts'
import { compare, type TryField, tryFields } from '#lib/unit/what-if.ts'
import { formatDay } from '#lib/format.ts'
import { DayChart } from './DayChart.tsx'

interface Props {
  readonly model: UnitModel
  /** The day shown first. */
  readonly firstDay: string
  /** The form that would record what is tried of the installation; it asks again before anything is saved. */
  readonly recordHref: string
}

export function WhatIfIsland({ model, firstDay, recordHref }: Props) {
  const [change, setChange] = useState<Change>(NO_CHANGE)
  const [index, setIndex] = useState(
    Math.max(
      0,
      model.days.findIndex(({ day }) => day === firstDay),
    ),
  )
  const [turn, setTurn] = useState(0)
  // What is typed before the script has taken over would be lost, so nothing can be typed until then.
  const [ready, setReady] = useState(false)
  useEffect(() => setReady(true), [])
  const dayId = useId()
  const fields = useMemo(() => tryFields(model), [model])
  const now = useMemo(() => answerOf(model), [model])
  // Typing stays quick while the model runs.
  const asked = useDeferredValue(change)
  const tried = useMemo(() => changed(model, asked), [model, asked])
  const then = useMemo(() => answerOf(tried), [tried])
  const day = tried.days[index]!
  const isTried = Object.values(change).some((value) => value !== null)
  const recordable = recordQuery(change)
  const back = () => {
    setChange(NO_CHANGE)
    setTurn(turn + 1)
  }
  return (
    <div className="flex flex-col gap-5">
      <fieldset disabled={!ready} className="grid gap-4 sm:grid-cols-3">
        <legend className="sr-only">What to try</legend>
        {fields.map((field) => (
          <TryNumber
            // Going back to what is installed makes the fields anew.
            key={`${field.name} ${turn}`}
            field={field}
            onChange={(value) => setChange((before) => ({ ...before, [field.name]: value }))}
          />
        ))}
      </fieldset>
      <p className="flex flex-wrap items-end gap-4">
        <label htmlFor={dayId} className="flex flex-col gap-1">
          <span className="font-bold">Day shown</span>
          <select id={dayId} className="field" value={index} onChange={(event) => setIndex(event.target.selectedIndex)}>
            {model.days.map((one, at) => (
              <option key={one.day} value={at}>
                {formatDay(one.day)}
              </option>
            ))}
          </select>
        </label>
        <button type="button" className="button" disabled={!isTried} onClick={back}>
          Back to what is installed
        </button>
        {recordable && (
          <a className="button" href={`${recordHref}?${recordable}`}>
            Take it to the hardware form
          </a>
        )}
      </p>
      <div className="overflow-x-auto" tabIndex={0} role="region" aria-label="Now and then">
        <table className="plain-table min-w-[34rem]" aria-live="polite">
          <thead>
            <tr>
              <th scope="col">{formatDay(day.day)}</th>
              <th scope="col">Now</th>
              <th scope="col">As tried</th>
            </tr>
          </thead>
          <tbody>
            {compare(model, now, then, index).map((row) => (
              <tr key={row.label}>
                <th scope="row" className="text-left font-normal text-soft">
                  {row.label}
                </th>
                <td>{row.now}</td>
                <td className={row.now === row.then ? '' : 'font-bold'}>{row.then}</td>
              </tr>
            ))}
          </tbody>
        </table>
      </div>
      <p>{outlookWords(then.outlook)}</p>
      <DayChart label={`${formatDay(day.day)} as tried`} day={{ ...day, readiness: then.days[index]!.readiness }} />
      <Cautions then={then} moreHeat={change.elementW !== null || change.supplyVoltageV !== null} />
    </div>
  )
}

function Cautions({ then, moreHeat }: { readonly then: ReturnType<typeof answerOf>; readonly moreHeat: boolean }) {
  const { scald, hygiene } = then
  return (
    <div className="flex flex-col gap-2 border-l-4 border-ink bg-sheet px-4 py-3">
      {scald.atRisk && (
        <p>
          <strong>Scalding.</strong> Water of {scald.atTapC} °C at the tap burns skin in {scald.secondsToBurn ?? '—'} s, a child’s sooner.
          Fit a mixing valve, or set it lower. <span className="text-soft">{scald.source}</span>
        </p>
      )}
      {!(hygiene.status === 'assessed' && hygiene.keepsGuidance) && (
        <p>
          <strong>Legionella.</strong> {hygiene.reason} Stored water between about 20 and 45 °C can grow it: ask whoever is responsible for
          the building’s water before heating is shortened or the set point lowered.
        </p>
      )}
      {moreHeat && (
        <p>
          <strong>Mains.</strong> Another element or voltage is another current: contacts, conductor and breaker have to carry it. The
          hardware form screens them; a licensed electrician and the adopted local code decide.
        </p>
      )}
      <p>Nothing here is saved. Tenants and flags see only what is recorded.</p>
    </div>
  )
}

interface TryNumberProps {
  readonly field: TryField
  readonly onChange: (value: number | null) => void
}

function TryNumber({ field: { label, unit, min, max, now }, onChange }: TryNumberProps) {
  const id = useId()
  const [outside, setOutside] = useState(false)
  return (
    <label htmlFor={id} className="flex flex-col gap-1">
      <span className="font-bold">
        {label}
        <span className="font-normal text-soft">
          , {unit}
          {now !== null && ` (now ${now})`}
        </span>
      </span>
      <input
        id={id}
        className="field"
        type="number"
        inputMode="decimal"
        step="any"
        min={min}
        max={max}
        defaultValue={now ?? ''}
        disabled={now === null}
        aria-invalid={outside || undefined}
        aria-describedby={outside ? `${id}-problem` : undefined}
        onChange={(event) => {
          const value = event.target.valueAsNumber
          const isOutside = value < min || value > max
          setOutside(isOutside)
          onChange(Number.isNaN(value) || value === now || isOutside ? null : value)
        }}
      />
      {outside && (
        <span id={`${id}-problem`} className="text-small font-bold text-crimson">
          Between {min} and {max} {unit}; what is installed is shown until then.
        </span>
      )}
    </label>
  )
}

/** What of a change belongs to the installation; voltage is the property's and flow the shower head's. */
function recordQuery({ runMin, elementW, setPointC, nominalVolumeL }: Change): string {
  const query = new URLSearchParams()
  for (const [name, value] of Object.entries({ runMin, elementW, setPointC, nominalVolumeL }))
    if (value !== null) query.set(name, String(value))
  return query.toString()
}
