/** Seasons: their names and the day of every year on which each begins. */
import { useState } from 'react'
import type { Season } from '#lib/core/tariff/types.ts'
import type { Draft } from '#lib/tariff/draft.ts'
import { addSeason, changeSeason, removeSeason } from '#lib/tariff/draft-shape.ts'

const MONTHS = ['January', 'February', 'March', 'April', 'May', 'June', 'July', 'August', 'September', 'October', 'November', 'December']
const MOST = 12
const two = (value: number): string => String(value).padStart(2, '0')

interface Props {
  readonly draft: Draft
  readonly onChange: (draft: Draft, said: string) => void
}

export function SeasonFields({ draft, onChange }: Props) {
  const [added, setAdded] = useState<Season>({ name: '', startsOn: '06-01' })
  return (
    <fieldset>
      <legend className="font-bold">Seasons</legend>
      <ul className="ledger mt-2">
        {draft.seasons.map((season, index) => (
          <li key={index} className="flex flex-wrap items-end gap-3 py-2">
            <SeasonInputs
              of={`season ${index + 1}`}
              season={season}
              onChange={(change) => onChange(changeSeason(draft, index, change), '')}
            />
            {draft.seasons.length > 1 && (
              <button
                type="button"
                className="min-h-10 underline"
                onClick={() => onChange(removeSeason(draft, index), `${season.name} is gone; the season before it runs on.`)}
              >
                Take {season.name || `season ${index + 1}`} away
              </button>
            )}
          </li>
        ))}
      </ul>
      {draft.seasons.length < MOST && (
        <div className="mt-2 flex flex-wrap items-end gap-3">
          <SeasonInputs of="the new season" season={added} onChange={(change) => setAdded({ ...added, ...change })} />
          <button
            type="button"
            className="button"
            onClick={() => {
              const name = added.name.trim() || `Season ${draft.seasons.length + 1}`
              onChange(addSeason(draft, { ...added, name }), `${name} begins on ${added.startsOn} with the hours of the season around it.`)
              setAdded({ name: '', startsOn: '10-01' })
            }}
          >
            Add a season
          </button>
        </div>
      )}
    </fieldset>
  )
}

interface InputProps {
  readonly of: string
  readonly season: Season
  readonly onChange: (change: Partial<Season>) => void
}

function SeasonInputs({ of, season, onChange }: InputProps) {
  const [month, date] = [Number(season.startsOn.slice(0, 2)), Number(season.startsOn.slice(3))]
  // 2028 has a 29 February.
  const dates = new Date(Date.UTC(2028, month, 0)).getUTCDate()
  return (
    <>
      <label className="flex flex-col gap-1">
        <span className="text-small">Name of {of}</span>
        <input className="field w-44" value={season.name} maxLength={120} onChange={(event) => onChange({ name: event.target.value })} />
      </label>
      <label className="flex flex-col gap-1">
        <span className="text-small">
          begins on<span className="sr-only"> day of the month, {of}</span>
        </span>
        <select
          className="field w-auto"
          value={date}
          onChange={(event) => onChange({ startsOn: `${two(month)}-${two(Number(event.target.value))}` })}
        >
          {Array.from({ length: dates }, (_, index) => (
            <option key={index}>{index + 1}</option>
          ))}
        </select>
      </label>
      <label className="flex flex-col gap-1">
        <span className="sr-only">month, {of}</span>
        <select
          className="field w-auto"
          value={month}
          onChange={(event) => onChange({ startsOn: `${two(Number(event.target.value))}-${two(Math.min(date, 28))}` })}
        >
          {MONTHS.map((name, index) => (
            <option key={name} value={index + 1}>
              {name}
            </option>
          ))}
        </select>
      </label>
    </>
  )
}
