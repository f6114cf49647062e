/** One run in words, with the way to its unit. */
import { useEffect, useRef } from 'react'
import type { CalendarRun } from '#lib/calendar/types.ts'
import { timeWords } from '#lib/calendar/view.ts'

interface Props {
  readonly run: CalendarRun
  readonly zone: string
  readonly unitsHref: string
  readonly onClose: () => void
}

export function RunDetails({ run, zone, unitsHref, onClose }: Props) {
  const heading = useRef<HTMLHeadingElement>(null)
  useEffect(() => heading.current?.focus(), [run])
  const at = (instantMs: number) => timeWords(instantMs, zone)
  const rows: readonly (readonly [string, string])[] = [
    ['Runs', `${at(run.startsAtMs)} to ${at(run.endsAtMs)}`],
    ['At its longest', run.longestEndsAtMs === null ? 'it may never stop' : `until ${at(run.longestEndsAtMs)}`],
    ['Window', `${at(run.windowStartsAtMs)} to ${at(run.windowEndsAtMs)}`],
    ['Ready by', at(run.readyByAtMs)],
    ['Power', `${(run.powerW / 1_000).toFixed(1)} kW`],
    ['Result', run.short ? 'too short: the water will not be warm on time' : 'warm on time'],
  ]
  return (
    <aside className="sheet mt-4 max-w-xl" aria-labelledby="run-title" onKeyDown={(event) => event.key === 'Escape' && onClose()}>
      <div className="flex items-baseline justify-between gap-4">
        <h3 id="run-title" ref={heading} tabIndex={-1} className="text-lead font-black">
          {run.code}
        </h3>
        <button type="button" className="cursor-pointer underline underline-offset-4" onClick={onClose}>
          Close
        </button>
      </div>
      <dl className="mt-2">
        {rows.map(([name, value]) => (
          <div key={name} className="grid grid-cols-[8rem_1fr] gap-x-4 border-t border-rule py-1">
            <dt className="text-soft">{name}</dt>
            <dd className={name === 'Result' && run.short ? 'font-bold text-crimson' : ''}>{value}</dd>
          </div>
        ))}
      </dl>
      <p className="mt-3">
        <a className="button" href={`${unitsHref}/${encodeURIComponent(run.code)}`}>
          Open unit {run.code}
        </a>
      </p>
    </aside>
  )
}
