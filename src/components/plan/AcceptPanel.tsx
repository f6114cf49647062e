/** Who has to change and by how much, and accepting it; what changed meanwhile is told line by line and the draft stays. */
import { useEffect, useRef } from 'react'
import { counted } from '#lib/figures.ts'
import type { Moved } from '#lib/plan/compare.ts'
import { byHowMuch, dayWords, startWords } from '#lib/plan/words.ts'

export interface Failure {
  readonly message: string
  readonly lines: readonly string[]
  readonly isConflict: boolean
}
interface Props {
  readonly moved: readonly Moved[]
  readonly zone: string
  /** Why it cannot be accepted; empty when it can. */
  readonly blocked: string
  readonly failure: Failure | null
  readonly isSaving: boolean
  readonly onAccept: () => void
  readonly onDiscard: () => void
}

const SHOWN = 200

export function AcceptPanel({ moved, zone, blocked, failure, isSaving, onAccept, onDiscard }: Props) {
  const told = useRef<HTMLDivElement>(null)
  useEffect(() => {
    if (failure) told.current?.focus()
  }, [failure])
  const units = new Set(moved.map(({ run }) => run.unitId)).size
  return (
    <section className="flex flex-col gap-3 border-t-3 border-ink pt-3" aria-labelledby="changes">
      <h2 id="changes" className="text-lead">
        {moved.length === 0 ? 'Nobody has to change' : `${counted(moved.length, 'start')} of ${counted(units, 'unit')} change`}
      </h2>
      {moved.length > 0 && (
        <details>
          <summary className="cursor-pointer font-bold">Who, and by how much</summary>
          <div className="overflow-x-auto" role="region" aria-label="Who has to change" tabIndex={0}>
            <table className="plain-table max-w-[44rem]">
              <thead>
                <tr>
                  <th scope="col">Unit</th>
                  <th scope="col">Day</th>
                  <th scope="col">As it stands</th>
                  <th scope="col">Then</th>
                  <th scope="col">Moves</th>
                </tr>
              </thead>
              <tbody>
                {moved.slice(0, SHOWN).map(({ run, startsAtMs }) => (
                  <tr key={run.id}>
                    <td className="font-black">{run.code}</td>
                    <td>{dayWords(run.day)}</td>
                    <td>{startWords(run.todayMs, run.day, zone)}</td>
                    <td className="font-bold">{startWords(startsAtMs, run.day, zone)}</td>
                    <td>{byHowMuch(run.todayMs, startsAtMs)}</td>
                  </tr>
                ))}
              </tbody>
            </table>
            {moved.length > SHOWN && <p>And {moved.length - SHOWN} more; every tenant is told their own.</p>}
          </div>
        </details>
      )}
      <div ref={told} tabIndex={-1}>
        {failure && (
          <div className="border-l-4 border-crimson bg-sheet px-4 py-3" role="alert">
            <p className="font-bold">{failure.message}</p>
            <ul className="list-disc pl-5">
              {failure.lines.slice(0, SHOWN).map((line) => (
                <li key={line}>{line}</li>
              ))}
            </ul>
            {failure.isConflict && (
              <p className="mt-2">
                Your starts are laid on the records as they are now: look at the figures again, then accept yours, or ask anew.
              </p>
            )}
          </div>
        )}
      </div>
      {blocked && <p className="font-bold">{blocked}</p>}
      <p className="flex flex-wrap gap-3 print:hidden">
        <button type="button" className="button button-main" disabled={isSaving || blocked !== '' || moved.length === 0} onClick={onAccept}>
          {isSaving ? 'Accepting …' : failure?.isConflict ? 'Accept mine as well' : 'Accept this plan'}
        </button>
        <button type="button" className="button" disabled={isSaving} onClick={onDiscard}>
          Discard it
        </button>
      </p>
      <p className="max-w-[60ch] text-soft">
        Accepting tells {counted(units, 'tenant')} by letter when to press, and can be undone: they are told that as well.
      </p>
    </section>
  )
}
