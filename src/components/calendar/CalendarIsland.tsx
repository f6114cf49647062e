/** The calendar island: its place in the address, its data, its controls, and the grid. */
import { useQuery, keepPreviousData } from '@tanstack/react-query'
import { useMemo, useState } from 'react'
import { apiGet } from '#lib/http/client.ts'
import type { CalendarPlace } from '#lib/calendar/schemas.ts'
import type { CalendarData, CalendarRun } from '#lib/calendar/types.ts'
import { rangeOf } from '#lib/calendar/range.ts'
import { dayEvents, isShown, peakEvents, runEvents } from '#lib/calendar/view.ts'
import { WithQueries } from '../ui/WithQueries.tsx'
import { CalendarControls } from './CalendarControls.tsx'
import { CalendarGrid } from './CalendarGrid.tsx'
import { RunDetails } from './RunDetails.tsx'
import { usePlace } from './use-place.ts'

interface Props {
  /** `/api/o/<slug>/p/<property>/calendar` */
  readonly api: string
  readonly unitsHref: string
  readonly zone: string
  readonly today: string
  readonly nowMs: number
  readonly floors: readonly number[]
  readonly start: CalendarPlace
}

export default function CalendarIsland(props: Props) {
  return (
    <WithQueries>
      <Calendar {...props} />
    </WithQueries>
  )
}

function Calendar({ api, unitsHref, zone, today, nowMs, floors, start }: Props) {
  const [place, move] = usePlace(start)
  const [chosen, choose] = useState<CalendarRun | null>(null)
  const { from, to } = rangeOf(place)
  const floor = place.floor === null ? '' : `&floor=${place.floor}`
  const { data, error, isFetching } = useQuery({
    queryKey: [api, from, to, place.floor],
    queryFn: () => apiGet<CalendarData>(`${api}?from=${from}&to=${to}${floor}`),
    placeholderData: keepPreviousData,
  })
  const events = useMemo(() => (data ? (place.view === 'month' ? dayEvents(data, place) : runEvents(data, place)) : []), [data, place])
  const peaks = useMemo(() => (data && place.view !== 'month' ? peakEvents(data) : []), [data, place.view])
  const shown = data?.runs.filter((run) => isShown(run, place)).length ?? 0

  return (
    <section aria-label="Calendar of runs">
      <CalendarControls place={place} today={today} floors={floors} zone={zone} onMove={move} />
      <p className="mt-2 text-soft" role="status">
        {error ? '' : data ? said({ data, shown, isFetching }) : 'Reading the runs …'}
      </p>
      {error && (
        <p className="mt-2 border-l-4 border-crimson bg-sheet px-4 py-3" role="alert">
          {error.message}
        </p>
      )}
      {data && (
        <>
          <CalendarGrid data={data} place={place} events={events} peaks={peaks} nowMs={nowMs} onMove={move} onChoose={choose} />
          <p className="mt-2 text-small text-soft">
            Solid: a run expected. Heavy outline: too short. Hatched: on-peak. At the right of each day stands the whole building’s load,
            upright, with its limit of {(data.limitW / 1_000).toFixed(0)} kW as a line.
          </p>
        </>
      )}
      {chosen && data && <RunDetails run={chosen} zone={data.zone} unitsHref={unitsHref} onClose={() => choose(null)} />}
    </section>
  )
}

function said({ data, shown, isFetching }: { readonly data: CalendarData; readonly shown: number; readonly isFetching: boolean }): string {
  if (isFetching) return 'Reading the runs …'
  if (!data.computed) return 'Nothing is computed for these days. The nightly job computes today and the seven days after it.'
  if (shown === 0) return 'No run is of this floor and state. Choose all of them to see the rest.'
  return `${shown === 1 ? 'One run is' : `${shown} runs are`} shown.`
}
