/** When the version begins, why if it corrects something, what is wrong with it, and saving it beside what others saved meanwhile. */
import { useId, useRef, useState } from 'react'
import type { VersionProblem } from '#lib/core/tariff/check-version.ts'
import type { TariffVersion } from '#lib/core/tariff/types.ts'
import { ApiProblem, apiGet, apiSend } from '#lib/http/client.ts'
import { needsReason } from '#lib/tariff/correction.ts'
import type { Draft } from '#lib/tariff/draft.ts'

interface Stored {
  readonly revision: number
  readonly versions: readonly TariffVersion[]
}
interface Props {
  readonly api: string
  readonly tariffHref: string
  readonly draft: Draft
  readonly stored: Stored
  readonly today: string
  readonly problems: readonly VersionProblem[]
  readonly onDay: (effectiveFrom: string) => void
  readonly onStored: (stored: Stored) => void
  readonly onSaved: (effectiveFrom: string) => void
}
interface Failure {
  readonly message: string
  readonly lines: readonly string[]
  readonly isConflict: boolean
}

export function SavePanel({ api, tariffHref, draft, stored, today, problems, onDay, onStored, onSaved }: Props) {
  const id = useId()
  const [reason, setReason] = useState('')
  const [failure, setFailure] = useState<Failure | null>(null)
  const [isSaving, setIsSaving] = useState(false)
  const told = useRef<HTMLDivElement>(null)
  const days = stored.versions.map((one) => one.effectiveFrom)
  const asksReason = needsReason(draft.effectiveFrom, { days, today })

  async function save() {
    if (problems.length > 0) return told.current?.focus()
    setIsSaving(true)
    try {
      const body = { revision: stored.revision, reason, version: draft }
      onSaved((await apiSend<{ effectiveFrom: string }>('POST', api, body)).effectiveFrom)
    } catch (error) {
      const isConflict = error instanceof ApiProblem && error.status === 409
      const lines = error instanceof ApiProblem ? error.fields.map((one) => one.message) : []
      setFailure({ message: error instanceof Error ? error.message : 'It was not saved.', lines, isConflict })
      // From now on what they saved is known: saving again is a decision and no accident.
      if (isConflict) onStored(await apiGet<Stored>(api).catch(() => stored))
      told.current?.focus()
    } finally {
      setIsSaving(false)
    }
  }

  return (
    <section aria-labelledby="save" className="flex max-w-[44rem] flex-col gap-3">
      <h2 id="save">Save as a version</h2>
      <label className="flex flex-col gap-1">
        <span className="font-bold">In force from</span>
        <input
          type="date"
          className="field w-auto self-start"
          value={draft.effectiveFrom}
          aria-describedby={`${id}-day`}
          onChange={(event) => onDay(event.target.value)}
        />
      </label>
      <p id={`${id}-day`} className="text-small text-soft">
        {dayWords(draft.effectiveFrom, { days, today })}
      </p>
      {asksReason && (
        <label className="flex flex-col gap-1">
          <span className="font-bold">Why it is corrected</span>
          <textarea className="field min-h-16" value={reason} maxLength={500} onChange={(event) => setReason(event.target.value)} />
        </label>
      )}
      <div ref={told} tabIndex={-1} className="flex flex-col gap-2">
        {problems.length > 0 && (
          <div className="border-l-4 border-ink bg-sheet px-4 py-3">
            <p className="font-bold">Not complete yet</p>
            <ul className="list-disc pl-5">
              {[...new Set(problems.map((one) => one.message))].map((message) => (
                <li key={message}>{message}</li>
              ))}
            </ul>
          </div>
        )}
        {failure && (
          <div className="border-l-4 border-crimson bg-sheet px-4 py-3" role="alert">
            <p className="font-bold">{failure.message}</p>
            <ul className="list-disc pl-5">
              {failure.lines.map((line) => (
                <li key={line}>{line}</li>
              ))}
            </ul>
            {failure.isConflict && (
              <p className="mt-2">
                <a href={tariffHref} target="_blank" rel="noopener">
                  Look at theirs in a new tab
                </a>
                . To keep yours as well, choose its day and save again; from the same day it corrects theirs.
              </p>
            )}
          </div>
        )}
      </div>
      <p>
        <button type="button" className="button button-main" disabled={isSaving} onClick={() => void save()}>
          {isSaving ? 'Saving …' : failure?.isConflict ? 'Save mine as well' : 'Save this version'}
        </button>
      </p>
    </section>
  )
}

function dayWords(day: string, { days, today }: { readonly days: readonly string[]; readonly today: string }): string {
  if (days.includes(day)) return 'There is a version from this day. Yours becomes its correction; the one before stays in the history.'
  if (day < today && days.length > 0)
    return 'This day has passed. Costs already computed for past days keep their prices; the correction is stated.'
  return 'From this local day on, until the next version. What is recorded before it stays as it is.'
}
