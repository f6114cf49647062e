/** Beside the hardware form: what to fit or set where the timer is short or may never stop, what presses do, and what a power cut does. */
import { useDeferredValue, useMemo } from 'react'
import type { PartsAdvice } from '#lib/core/controller/advice.ts'
import { afterOutage } from '#lib/core/controller/outage.ts'
import { fallsShort, partsAdvice } from '#lib/core/controller/parts-advice.ts'
import { runDuration } from '#lib/core/controller/run-duration.ts'
import type { Controller } from '#lib/core/controller/types.ts'
import { formatDay } from '#lib/format.ts'
import { pressWords } from '#lib/hardware/press-words.ts'
import { meantRun, type NeededRun, runNeed } from '#lib/hardware/run-need.ts'

interface Props {
  readonly controller: Controller
  /** Of the unit's last evaluation; `null` = nothing is asked of it, or nobody knows. */
  readonly needed: NeededRun | null
}

/** A day without power: longer than an ordinary cut, shorter than a good reserve. */
const OUTAGE_H = 24

export function TimerAdvice({ controller, needed }: Props) {
  // Typing goes on while the search over stocked parts runs.
  const settled = useDeferredValue(controller)
  const advised = useMemo(() => adviceFor(settled, needed), [settled, needed])
  const presses = pressWords(settled)
  return (
    <>
      {advised && (
        <section className="ledger" aria-live="polite" aria-label="What would do">
          <h2>What would do, best first</h2>
          <p className="py-2 text-soft">{advised.asked}</p>
          <Advice advice={advised.advice} />
        </section>
      )}
      <section className="ledger">
        <h2>In use</h2>
        {presses && <p className="py-2">{presses}</p>}
        <p className="py-2">
          After {OUTAGE_H} h without power: {afterOutage(settled, OUTAGE_H * 60).reason}
        </p>
      </section>
    </>
  )
}

function Advice({ advice }: { readonly advice: PartsAdvice }) {
  if (advice.status === 'none')
    return (
      <div className="py-2">
        <p className="border-l-4 border-crimson pl-3">{advice.reason}</p>
      </div>
    )
  return (
    <ol>
      {advice.suggestions.map(({ what, reason }, index) => (
        <li key={what} className={index > 0 ? 'border-t border-rule py-2' : 'py-2'}>
          <p className="font-bold">
            {index + 1}. {what}
          </p>
          <p className="text-small">{reason}</p>
        </li>
      ))}
    </ol>
  )
}

/** `null` where the timer is long enough and surely stops, or where nothing can be aimed at. */
function adviceFor(controller: Controller, needed: NeededRun | null): { readonly asked: string; readonly advice: PartsAdvice } | null {
  if (needed) {
    const need = runNeed(needed)
    if (!fallsShort(controller, need)) return null
    const asked = `${Math.ceil(need.minMin)} min are needed and at most ${Math.floor(need.limitMin)} min wanted, as last computed for ${formatDay(needed.day)} with the heater on record. Each is checked by the same computation.`
    return { asked, advice: partsAdvice(controller, need) }
  }
  const { nominalMin, timesOut } = runDuration(controller, [])
  if (timesOut === 'always' || nominalMin === null) return null
  const need = meantRun(nominalMin)
  const asked = `Nobody has said what is needed here, so this aims at the ${Math.round(need.minMin)} min it was meant for. Each is checked by the same computation.`
  return { asked, advice: partsAdvice(controller, need) }
}
