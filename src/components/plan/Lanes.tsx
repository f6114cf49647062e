/** The day's runs as lanes under the load: which are shown, and at most so many at once, so that a thousand units stay quick. */
import { type ReactNode, useMemo, useState } from 'react'
import { counted } from '#lib/figures.ts'
import { type Desk, startsAt } from '#lib/plan/desk.ts'
import type { PlanDay } from '#lib/plan/draft-plan.server.ts'
import type { Figures } from '#lib/plan/compare.ts'
import { type MovableRun, slotAt } from '#lib/plan/types.ts'
import { dayWords } from '#lib/plan/words.ts'
import { axisOf } from './axis.ts'
import { Lane, type LaneActs } from './Lane.tsx'
import { LoadPicture } from './LoadPicture.tsx'
import './plan.css'

const SHOWS = { changed: 'Who has to change', all: 'Everybody', pinned: 'Pinned', trouble: 'In trouble' } as const
type Shows = keyof typeof SHOWS
const AT_ONCE = 40

interface Props extends LaneActs {
  readonly desk: Desk
  readonly yours: Figures
  readonly chosenId: string | null
  /** Of the chosen run. */
  readonly panel: ReactNode
}

export function Lanes({ desk, yours, chosenId, panel, ...acts }: Props) {
  const { draft, found } = desk
  const [dayAt, setDayAt] = useState(0)
  const [shows, setShows] = useState<Shows>(draft.runs.length <= AT_ONCE ? 'all' : 'changed')
  const [code, setCode] = useState('')
  const [most, setMost] = useState(AT_ONCE)
  const day: PlanDay | undefined = draft.days[dayAt] ?? draft.days[0]
  const runs = useMemo(() => draft.runs.filter((run) => run.day === day?.day), [draft, day])
  const troubles = useMemo(() => troublesOf(desk, yours), [desk, yours])
  // As they start now: a lane that is moved stays where it is.
  const ordered = useMemo(() => [...runs].sort((one, other) => one.todayMs - other.todayMs), [runs])
  if (!day) return null
  const axis = axisOf(draft, day, runs)
  const wanted = ordered.filter(
    (run) =>
      run.id === chosenId ||
      (isShown(shows, { run, desk, trouble: troubles.get(run.id) }) && run.code.toLowerCase().includes(code.trim().toLowerCase())),
  )
  return (
    <section aria-labelledby="lanes" className="flex flex-col gap-3">
      <div className="flex flex-wrap items-end gap-x-6 gap-y-3">
        <h2 id="lanes" className="text-lead">
          {dayWords(day.day)}
        </h2>
        {draft.days.length > 1 && (
          <label className="flex items-center gap-2">
            Day
            <select className="field w-auto" value={dayAt} onChange={(event) => setDayAt(Number(event.target.value))}>
              {draft.days.map((one, index) => (
                <option key={one.day} value={index}>
                  {dayWords(one.day)}
                </option>
              ))}
            </select>
          </label>
        )}
        <label className="flex items-center gap-2">
          Show
          <select className="field w-auto" value={shows} onChange={(event) => setShows(event.target.value as Shows)}>
            {Object.entries(SHOWS).map(([value, label]) => (
              <option key={value} value={value}>
                {label}
              </option>
            ))}
          </select>
        </label>
        <label className="flex items-center gap-2">
          Unit
          <input className="field w-28" value={code} onChange={(event) => setCode(event.target.value)} />
        </label>
      </div>
      <p className="text-small text-soft">
        Drag a bar, or move it with the arrow keys by {draft.grid.slotMin} min (Page up and Page down by {draft.grid.slotMin * 6}); Enter
        opens it to type a time. The thin line is what its tank allows, the dashed box where it stands, the notch when it must be ready.
      </p>
      <div className="plan-axis grid gap-x-3">
        <div className="plan-hours">
          <LoadPicture draft={draft} day={day} axis={axis} today={found.today} shown={yours} />
        </div>
      </div>
      {wanted.length === 0 ? (
        <p>{runs.length === 0 ? 'No run of this day may be moved.' : 'No run is so. Choose everybody to see the rest.'}</p>
      ) : (
        <ul aria-label={`Runs of ${dayWords(day.day)}`}>
          {wanted.slice(0, most).map((run) => (
            <Lane
              key={run.id}
              draft={draft}
              run={run}
              slot={desk.starts.get(run.id) ?? slotAt(draft.grid, run.todayMs)}
              axis={axis}
              isPinned={desk.pinned.has(run.id)}
              panel={run.id === chosenId ? panel : null}
              trouble={troubles.get(run.id) ?? ''}
              {...acts}
            />
          ))}
        </ul>
      )}
      {wanted.length > most && (
        <p>
          <button type="button" className="button" onClick={() => setMost(most + AT_ONCE)}>
            Show {Math.min(AT_ONCE, wanted.length - most)} more of {counted(wanted.length, 'run')}
          </button>
        </p>
      )}
    </section>
  )
}

interface Shown {
  readonly run: MovableRun
  readonly desk: Desk
  readonly trouble: string | undefined
}

function isShown(shows: Shows, { run, desk, trouble }: Shown): boolean {
  switch (shows) {
    case 'all':
      return true
    case 'changed':
      return startsAt(desk, run) !== run.todayMs
    case 'pinned':
      return desk.pinned.has(run.id)
    case 'trouble':
      return trouble !== undefined
  }
}

/** Runs that break their own hours, or are on while the limit is passed. */
function troublesOf({ draft, starts }: Desk, yours: Figures): ReadonlyMap<string, string> {
  const found = new Map<string, string>()
  if (yours.overSlots.length > 0) {
    const worst = new Map(draft.problem.needs.flatMap((need) => need.runs.map((run) => [run.id, run.worstSlots])))
    for (const [runId, slot] of starts)
      if (yours.overSlots.some((over) => over >= slot && over < slot + (worst.get(runId) ?? 0)))
        found.set(runId, 'on while the limit is passed')
  }
  const today = new Map(draft.runs.map((run) => [run.id, slotAt(draft.grid, run.todayMs)]))
  for (const runId of yours.notAllowed) if (today.get(runId) !== starts.get(runId)) found.set(runId, 'not possible')
  return found
}
