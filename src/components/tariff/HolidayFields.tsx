/** Holidays and other special days: which dates, and by which hours each is billed. */
import { useState } from 'react'
import { isDay } from '#lib/core/tariff/check-version.ts'
import type { Draft } from '#lib/tariff/draft.ts'
import { addDayType, removeDayType, withoutSpecialDay, withSpecialDay } from '#lib/tariff/draft-shape.ts'
import { dayTypesOf, dayTypeWords } from '#lib/tariff/paint.ts'

interface Props {
  readonly draft: Draft
  readonly onChange: (draft: Draft, said: string) => void
}

export function HolidayFields({ draft, onChange }: Props) {
  const [days, setDays] = useState('')
  const [dayType, setDayType] = useState('weekend')
  const [name, setName] = useState('')
  const types = dayTypesOf(draft, 'energy')
  const written = days.split(/[\s,;]+/).filter(Boolean)
  const wrong = written.filter((day) => !isDay(day))
  const isTaken = types.includes(name.trim())
  return (
    <fieldset className="flex flex-col gap-3">
      <legend className="font-bold">Holidays and special days</legend>
      {draft.specialDays.length === 0 ? (
        <p className="text-soft">None: every Monday to Friday is a weekday here.</p>
      ) : (
        <ul className="ledger max-h-72 overflow-y-auto" tabIndex={0} aria-label="Holidays and special days">
          {draft.specialDays.map((one) => (
            <li key={one.day} className="flex flex-wrap items-center justify-between gap-3 py-1">
              <span>
                {one.day}, by the hours of {dayTypeWords(one.dayType)}
              </span>
              <button
                type="button"
                className="min-h-6 underline"
                onClick={() => onChange(withoutSpecialDay(draft, one.day), `${one.day} is an ordinary day.`)}
              >
                Take {one.day} away
              </button>
            </li>
          ))}
        </ul>
      )}
      <div className="flex flex-wrap items-end gap-3">
        <label className="flex flex-col gap-1">
          <span className="text-small">Dates to add, year-month-day, several with spaces between</span>
          <textarea className="field min-h-16 w-80 max-w-full" value={days} onChange={(event) => setDays(event.target.value)} />
        </label>
        <label className="flex flex-col gap-1">
          <span className="text-small">billed by the hours of</span>
          <select
            className="field w-auto"
            value={types.includes(dayType) ? dayType : 'weekend'}
            onChange={(event) => setDayType(event.target.value)}
          >
            {types.map((type) => (
              <option key={type} value={type}>
                {dayTypeWords(type)}
              </option>
            ))}
          </select>
        </label>
        <button
          type="button"
          className="button"
          onClick={() => {
            const good = written.filter(isDay)
            const type = types.includes(dayType) ? dayType : 'weekend'
            onChange(
              good.reduce((next, day) => withSpecialDay(next, day, type), draft),
              `Added: ${good.join(', ') || 'no date'}.`,
            )
            setDays(wrong.join(' '))
          }}
        >
          Add the dates
        </button>
      </div>
      {wrong.length > 0 && (
        <p className="text-small font-bold text-crimson">
          Not a date that exists: {wrong.join(', ')}. Write 2027-12-25 for 25 December 2027.
        </p>
      )}
      <div className="flex flex-wrap items-end gap-3">
        <label className="flex flex-col gap-1">
          <span className="text-small">A day type of its own, such as Holiday</span>
          <input className="field w-56" value={name} maxLength={120} onChange={(event) => setName(event.target.value)} />
        </label>
        <button
          type="button"
          className="button"
          disabled={name.trim() === '' || isTaken}
          onClick={() => {
            onChange(addDayType(draft, name.trim()), `${name.trim()} has a column on the grid, with the weekend’s hours.`)
            setDayType(name.trim())
            setName('')
          }}
        >
          Add a column for it
        </button>
        {(draft.extraDayTypes ?? []).map((one) => (
          <button
            key={one.name}
            type="button"
            className="min-h-10 underline"
            onClick={() => onChange(removeDayType(draft, one.name), `${one.name} is gone; its days are billed as a weekend.`)}
          >
            Take the column {one.name} away
          </button>
        ))}
      </div>
    </fieldset>
  )
}
