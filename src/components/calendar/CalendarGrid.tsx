/** The grid: the library's time logic and keyboard behaviour, drawn our way; hours run downwards, peaks are hatched, load stands upright. */
import { format, getDay, parse, startOfWeek } from 'date-fns'
import { enGB } from 'date-fns/locale/en-GB'
import { type CSSProperties, useMemo, useState } from 'react'
import { Calendar, type Components, dateFnsLocalizer, type EventProps, type HeaderProps } from 'react-big-calendar'
import type { CalendarPlace } from '#lib/calendar/schemas.ts'
import type { CalendarData, CalendarRun } from '#lib/calendar/types.ts'
import type { CalendarEvent } from '#lib/calendar/view.ts'
import { dateOfDay, dayOfDate, wallDate } from '#lib/calendar/wall.ts'
import { CalendarDataContext } from './data-context.ts'
import { DayWithLoad } from './DayWithLoad.tsx'
import './calendar.css'

interface Props {
  readonly data: CalendarData
  readonly place: CalendarPlace
  readonly events: CalendarEvent[]
  readonly peaks: CalendarEvent[]
  readonly nowMs: number
  readonly onMove: (change: Partial<CalendarPlace>) => void
  readonly onChoose: (run: CalendarRun) => void
}

const localizer = dateFnsLocalizer({
  format,
  parse,
  startOfWeek: (date: Date) => startOfWeek(date, { weekStartsOn: 1 }),
  getDay,
  locales: { 'en-GB': enGB },
})
const FORMATS = {
  timeGutterFormat: 'HH:mm',
  dayFormat: 'EEE d',
  weekdayFormat: 'EEE',
  dateFormat: 'd',
  eventTimeRangeFormat: () => '',
  eventTimeRangeStartFormat: () => '',
  eventTimeRangeEndFormat: () => '',
}

function EventWords({ event }: EventProps<CalendarEvent>) {
  return event.kind === 'run' ? <RunWords event={event} /> : <span className="calendar-words">{event.title}</span>
}

/** The name first: a narrow bar shows only that, and says the rest to whoever asks. */
function RunWords({ event }: { readonly event: CalendarEvent }) {
  const [code = '', ...times] = event.title.split(', ')
  return (
    <span className="calendar-words">
      <b>{code}</b> <span className="calendar-times">{times.join(', ')}</span>
    </span>
  )
}

const DayHeader = ({ label }: HeaderProps) => <span>{label}</span>

/** Only in the month are its cells children of a row. */
const MonthHeader = ({ label }: HeaderProps) => <span role="columnheader">{label}</span>

const COMPONENTS: Components<CalendarEvent> = {
  event: EventWords,
  header: DayHeader,
  month: { header: MonthHeader },
  dayColumnWrapper: DayWithLoad,
}

const GUTTER_PX = 60
// WCAG 2.2 asks for targets of 24 px; the load curve takes a share of the width.
const BAR_PX = 34

/** As many bars as stand side by side at the busiest moment, in every column. */
function gridWidthPx(events: readonly CalendarEvent[], columns: number): number {
  const edges = events
    .flatMap((event) => [
      { at: event.start.getTime(), step: 1 },
      { at: event.end.getTime(), step: -1 },
    ])
    .sort((one, other) => one.at - other.at || one.step - other.step)
  let side = 0
  let most = 0
  for (const { step } of edges) {
    side += step
    most = Math.max(most, side)
  }
  return GUTTER_PX + columns * Math.max(90, most * BAR_PX)
}

export function CalendarGrid({ data, place, events, peaks, nowMs, onMove, onChoose }: Props) {
  const [selected, select] = useState<CalendarEvent | null>(null)
  const date = useMemo(() => dateOfDay(place.day, 720), [place.day])
  // Wide enough for a name on every bar; past the page's width the grid scrolls sideways.
  const widthPx = useMemo(() => (place.view === 'month' ? 0 : gridWidthPx(events, place.view === 'week' ? 7 : 1)), [events, place.view])
  const open = (event: CalendarEvent) => {
    if (event.kind === 'day') onMove({ view: 'day', day: dayOfDate(event.start) })
    if (event.run) {
      select(event)
      onChoose(event.run)
    }
  }
  return (
    <CalendarDataContext value={data}>
      <div className="calendar mt-3" data-view={place.view} style={{ '--calendar-width': `${widthPx}px` } as CSSProperties}>
        <Calendar<CalendarEvent>
          localizer={localizer}
          culture="en-GB"
          formats={FORMATS}
          components={COMPONENTS}
          toolbar={false}
          view={place.view}
          views={['day', 'week', 'month']}
          date={date}
          getNow={() => wallDate(nowMs, data.zone)}
          events={events}
          backgroundEvents={peaks}
          selected={selected}
          dayLayoutAlgorithm="no-overlap"
          step={30}
          timeslots={2}
          showMultiDayTimes
          tooltipAccessor={(event) => event.title}
          eventPropGetter={(event) => ({ className: `calendar-${event.kind}${event.short ? ' calendar-short' : ''}` })}
          onNavigate={(to) => onMove({ day: dayOfDate(to) })}
          onView={(view) => (view === 'day' || view === 'week' || view === 'month') && onMove({ view })}
          onDrillDown={(to) => onMove({ view: 'day', day: dayOfDate(to) })}
          onSelectEvent={open}
          onKeyPressEvent={(event, press) => {
            if ('key' in press && (press.key === 'Enter' || press.key === ' ')) open(event)
          }}
        />
      </div>
    </CalendarDataContext>
  )
}
