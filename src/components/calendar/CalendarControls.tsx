/** The calendar's controls: which days, how many, which floor, which state. */
import { type CalendarPlace, type CalendarState, STATES, VIEWS } from '#lib/calendar/schemas.ts'
import { neighbour, rangeOf } from '#lib/calendar/range.ts'
import { addDays } from '#lib/core/time/civil.ts'
import { formatDay, zoneCity } from '#lib/format.ts'

interface Props {
  readonly place: CalendarPlace
  readonly today: string
  readonly floors: readonly number[]
  readonly zone: string
  readonly onMove: (change: Partial<CalendarPlace>) => void
}

const STATE_WORDS: Readonly<Record<CalendarState, string>> = { all: 'All runs', short: 'Too short', 'on-peak': 'On-peak' }

export function CalendarControls({ place, today, floors, zone, onMove }: Props) {
  return (
    <div className="flex flex-wrap items-end gap-x-6 gap-y-3">
      <div className="flex gap-2">
        <button
          type="button"
          className="button"
          onClick={() => onMove({ day: neighbour(place, -1) })}
          aria-label={`The ${place.view} before`}
        >
          ←
        </button>
        <button type="button" className="button" onClick={() => onMove({ day: today })}>
          Today
        </button>
        <button
          type="button"
          className="button"
          onClick={() => onMove({ day: neighbour(place, 1) })}
          aria-label={`The ${place.view} after`}
        >
          →
        </button>
      </div>
      <h2 className="min-w-56 text-lead">
        {titleOf(place)} <span className="block text-small font-normal text-soft">all times are {zoneCity(zone)} time</span>
      </h2>
      <div className="flex gap-5" role="group" aria-label="How many days">
        {VIEWS.map((view) => (
          <button
            key={view}
            type="button"
            aria-pressed={place.view === view}
            className="min-h-10 cursor-pointer border-b-2 border-transparent capitalize hover:border-rule aria-pressed:border-copper aria-pressed:font-bold"
            onClick={() => onMove({ view })}
          >
            {view}
          </button>
        ))}
      </div>
      {floors.length > 1 && (
        <label className="flex items-center gap-2">
          Floor
          <select
            className="field w-auto"
            value={place.floor ?? 'all'}
            onChange={(event) => onMove({ floor: event.target.value === 'all' ? null : Number(event.target.value) })}
          >
            <option value="all">all</option>
            {floors.map((floor) => (
              <option key={floor} value={floor}>
                {floor === 0 ? 'ground' : floor}
              </option>
            ))}
          </select>
        </label>
      )}
      <label className="flex items-center gap-2">
        Show
        <select
          className="field w-auto"
          value={place.state}
          onChange={(event) => onMove({ state: STATES.find((state) => state === event.target.value) ?? 'all' })}
        >
          {STATES.map((state) => (
            <option key={state} value={state}>
              {STATE_WORDS[state]}
            </option>
          ))}
        </select>
      </label>
    </div>
  )
}

function titleOf(place: CalendarPlace): string {
  if (place.view === 'day') return formatDay(place.day, 'EEEE d MMMM yyyy')
  if (place.view === 'month') return formatDay(place.day, 'MMMM yyyy')
  const { from, to } = rangeOf(place)
  return `${formatDay(from, 'd MMM')} to ${formatDay(addDays(to, -1), 'd MMM yyyy')}`
}
