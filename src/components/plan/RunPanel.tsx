/** The chosen run: a typed time, the pin, and what the tank says of a start that its own hours do not allow. */
import { useEffect, useState } from 'react'
import type { PlanDraft } from '#lib/plan/draft-plan.server.ts'
import type { MovableRun } from '#lib/plan/types.ts'
import { startText } from '#lib/plan/view.ts'
import { clockAt, dayWords, startWords } from '#lib/plan/words.ts'

interface Props {
  readonly draft: PlanDraft
  readonly run: MovableRun
  readonly startsAtMs: number
  readonly isPinned: boolean
  readonly unitsHref: string
  /** What the last move did, and what the tank says of it. */
  readonly effect: string
  readonly water: string
  readonly onType: (minuteOfDay: number) => void
  readonly onPin: () => void
}

export function RunPanel({ draft, run, startsAtMs, isPinned, unitsHref, effect, water, onType, onPin }: Props) {
  const [typed, setTyped] = useState('')
  const clock = clockAt(startsAtMs, draft.zone)
  useEffect(() => setTyped(clock), [clock, run.id])
  const move = () => {
    const [hour, minute] = typed.split(':').map(Number)
    if (hour !== undefined && minute !== undefined && Number.isFinite(hour + minute)) onType(hour * 60 + minute)
  }
  return (
    <section className="sheet flex flex-col gap-2" aria-labelledby="chosen-run">
      <h3 id="chosen-run" className="text-lead">
        <b className="font-black">{run.code}</b>, {dayWords(run.day)}
      </h3>
      <p>
        Starts at {startText(run, startsAtMs, draft.zone)}. Its tank allows {startWords(run.earliestMs, run.day, draft.zone)} to{' '}
        {startWords(run.latestMs, run.day, draft.zone)}; {(run.powerW / 1_000).toFixed(1)} kW for {Math.round(run.expectedMin)} min,{' '}
        {Math.round(run.longestMin)} at its longest.
      </p>
      <form
        className="flex flex-wrap items-end gap-3"
        onSubmit={(event) => {
          event.preventDefault()
          move()
        }}
      >
        <label className="flex flex-col gap-1 font-bold">
          Start at
          <input type="time" className="field w-36 font-normal" required value={typed} onChange={(event) => setTyped(event.target.value)} />
        </label>
        <button className="button">Move</button>
        <button type="button" className="button" aria-pressed={isPinned} onClick={onPin}>
          {isPinned ? 'Take the pin out' : 'Pin it here'}
        </button>
        <a href={`${unitsHref}/${encodeURIComponent(run.code)}`}>Open unit {run.code}</a>
      </form>
      {effect && <p className={/Not possible|Passes/.test(effect) ? 'border-l-4 border-crimson pl-3 font-bold' : ''}>{effect}</p>}
      {water && <p className="border-l-4 border-crimson pl-3 font-bold">{water}</p>}
    </section>
  )
}
