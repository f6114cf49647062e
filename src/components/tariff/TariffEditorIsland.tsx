/** The editor of a rate: periods painted on the week, seasons, days, charges, a preview bill, and saving as a version. */
import { useEffect, useMemo, useReducer, useRef, useState } from 'react'
import { checkVersion } from '#lib/core/tariff/check-version.ts'
import { type Draft, type Layer, letterOf } from '#lib/tariff/draft.ts'
import { periodNamesOf } from '#lib/tariff/draft-shape.ts'
import type { EditorData } from '#lib/tariff/load-editor.server.ts'
import { areaWords, paint, type Rectangle, slotCount, withSlots } from '#lib/tariff/paint.ts'
import { ChargeFields } from './ChargeFields.tsx'
import { HolidayFields } from './HolidayFields.tsx'
import { PaintForm } from './PaintForm.tsx'
import { PeriodList } from './PeriodList.tsx'
import { PreviewBill } from './PreviewBill.tsx'
import { SavePanel } from './SavePanel.tsx'
import { SeasonFields } from './SeasonFields.tsx'
import { WeekGrid } from './WeekGrid.tsx'

interface Props {
  readonly data: EditorData
  /** `/api/o/<slug>/p/<property>/tariff/versions` */
  readonly api: string
  readonly tariffHref: string
}

interface State {
  readonly draft: Draft
  readonly past: readonly Draft[]
  /** For the live region. */
  readonly said: string
}
type Step = { readonly kind: 'change'; readonly draft: Draft; readonly said: string } | { readonly kind: 'undo' }
const UNDO_STEPS = 100

function reduce(state: State, step: Step): State {
  if (step.kind === 'change') return { draft: step.draft, past: [...state.past.slice(-UNDO_STEPS + 1), state.draft], said: step.said }
  const before = state.past.at(-1)
  return before
    ? { draft: before, past: state.past.slice(0, -1), said: 'The last change is undone.' }
    : { ...state, said: 'Nothing to undo.' }
}

export default function TariffEditorIsland({ data, api, tariffHref }: Props) {
  const [{ draft, past, said }, step] = useReducer(reduce, { draft: data.draft, past: [], said: '' })
  const [stored, setStored] = useState({ revision: data.revision, versions: data.versions })
  const [brushes, setBrushes] = useState({ energy: 0, demand: 0 })
  const problems = useMemo(() => checkVersion(draft), [draft])
  const change = (next: Draft, words: string) => step({ kind: 'change', draft: next, said: words })
  const isChanged = past.length > 0
  const isLeaving = useRef(false)
  useEffect(() => {
    const warn = (event: BeforeUnloadEvent) => {
      if (!isLeaving.current) event.preventDefault()
    }
    if (isChanged) window.addEventListener('beforeunload', warn)
    return () => window.removeEventListener('beforeunload', warn)
  }, [isChanged])

  const layerEditor = (layer: Layer) => {
    const brush = Math.min(brushes[layer], periodNamesOf(draft, layer).length - 1)
    const onPaint = (area: Rectangle, period = brush) => {
      const words = `${areaWords(draft, layer, area)}: now ${letterOf(period)}, ${periodNamesOf(draft, layer)[period] ?? ''}.`
      setBrushes({ ...brushes, [layer]: period })
      change(paint(draft, layer, area, period), words)
    }
    return (
      <div className="grid gap-6 xl:grid-cols-[auto_1fr]">
        <div className="min-w-0">
          <WeekGrid draft={draft} layer={layer} onPaint={onPaint} onUndo={() => step({ kind: 'undo' })} />
          <PaintForm draft={draft} layer={layer} onPaint={onPaint} />
        </div>
        <PeriodList
          draft={draft}
          layer={layer}
          brush={brush}
          onBrush={(period) => setBrushes({ ...brushes, [layer]: period })}
          onChange={change}
        />
      </div>
    )
  }

  return (
    <div className="flex flex-col gap-10">
      <div className="flex flex-wrap items-end gap-4">
        {(['name', 'utility'] as const).map((field) => (
          <label key={field} className="flex flex-col gap-1">
            <span className="font-bold">{field === 'name' ? 'Name of the rate' : 'Supplier'}</span>
            <input
              className="field w-72 max-w-full"
              value={draft[field]}
              maxLength={120}
              onChange={(event) => change({ ...draft, [field]: event.target.value }, '')}
            />
          </label>
        ))}
        <StepChoice draft={draft} onChange={change} />
        <button type="button" className="button" disabled={past.length === 0} onClick={() => step({ kind: 'undo' })}>
          Undo
        </button>
      </div>
      <p className="sr-only" role="status" aria-live="polite">
        {said}
      </p>
      <section aria-labelledby="energy" className="flex flex-col gap-3">
        <h2 id="energy">Energy by the hour</h2>
        {layerEditor('energy')}
      </section>
      <SeasonFields draft={draft} onChange={change} />
      <HolidayFields draft={draft} onChange={change} />
      <ChargeFields draft={draft} onChange={change} />
      {draft.periodDemand && (
        <section aria-labelledby="demand" className="flex flex-col gap-3">
          <h2 id="demand">Demand by the hour</h2>
          {layerEditor('demand')}
        </section>
      )}
      <PreviewBill
        draft={draft}
        versions={stored.versions}
        zone={data.zone}
        today={data.today}
        baseLoadW={data.baseLoadW}
        week={data.week}
        isWrong={problems.length > 0}
      />
      <SavePanel
        api={api}
        tariffHref={tariffHref}
        draft={draft}
        stored={stored}
        today={data.today}
        problems={problems}
        onDay={(effectiveFrom) => change({ ...draft, effectiveFrom }, '')}
        onStored={setStored}
        onSaved={(effectiveFrom) => {
          isLeaving.current = true
          window.location.assign(`${tariffHref}?saved=${effectiveFrom}`)
        }}
      />
    </div>
  )
}

const STEPS = [
  [24, 'hours'],
  [48, 'half hours'],
  [96, 'quarter hours'],
] as const

function StepChoice({ draft, onChange }: { readonly draft: Draft; readonly onChange: (draft: Draft, said: string) => void }) {
  const [refused, setRefused] = useState(false)
  return (
    <label className="flex flex-col gap-1">
      <span className="font-bold">Cells are</span>
      <select
        className="field w-auto"
        value={slotCount(draft)}
        onChange={(event) => {
          const next = withSlots(draft, Number(event.target.value))
          setRefused(next === null)
          if (next) onChange(next, `Cells are ${STEPS.find(([steps]) => steps === slotCount(next))?.[1] ?? ''} now.`)
        }}
      >
        {STEPS.some(([steps]) => steps === slotCount(draft)) || (
          <option value={slotCount(draft)}>{1_440 / slotCount(draft)} minutes</option>
        )}
        {STEPS.map(([steps, words]) => (
          <option key={steps} value={steps}>
            {words}
          </option>
        ))}
      </select>
      {refused && <span className="text-small font-bold text-crimson">Some parts of hours differ: paint them alike first.</span>}
    </label>
  )
}
