/** Which days are planned, and how far the planner is. */
import { useState } from 'react'

export interface DayChoice {
  readonly day: string
  readonly words: string
}
export interface Days {
  readonly from: string
  readonly to: string
}
export const STAGES = ['Reading the records', 'Finding a first plan', 'Looking for a better one'] as const

interface Props {
  readonly days: readonly DayChoice[]
  readonly weekEnd: string
  /** Which of the stages goes on; `null` when nothing is being planned. */
  readonly stage: number | null
  readonly onAsk: (days: Days) => void
  readonly onStop: () => void
}

const WEEK = 'week'

export function AskForm({ days, weekEnd, stage, onAsk, onStop }: Props) {
  const [chosen, choose] = useState(days[0]?.day ?? '')
  const first = days[0]?.day ?? ''
  const after = (day: string) => days[days.findIndex((one) => one.day === day) + 1]?.day ?? weekEnd
  return (
    <form
      className="flex flex-col gap-3 print:hidden"
      onSubmit={(event) => {
        event.preventDefault()
        onAsk(chosen === WEEK ? { from: first, to: weekEnd } : { from: chosen, to: after(chosen) })
      }}
    >
      <div className="flex flex-wrap items-end gap-3">
        <label className="flex flex-col gap-1 font-bold">
          Plan the starts of
          <select className="field w-auto font-normal" value={chosen} onChange={(event) => choose(event.target.value)}>
            {days.map(({ day, words }) => (
              <option key={day} value={day}>
                {words}
              </option>
            ))}
            <option value={WEEK}>the week from {days[0]?.words}</option>
          </select>
        </label>
        <button className="button button-main" disabled={stage !== null}>
          Ask for a plan
        </button>
        {stage !== null && (
          <button type="button" className="button" onClick={onStop}>
            Stop
          </button>
        )}
      </div>
      {stage !== null && (
        <div>
          <progress className="w-full max-w-md accent-copper" max={STAGES.length} value={stage} aria-label="Planning" />
          <p className="text-soft">
            {STAGES[stage]} … {stage === 2 && 'The first one is below; it is replaced when a better one is found.'}
          </p>
        </div>
      )}
    </form>
  )
}
