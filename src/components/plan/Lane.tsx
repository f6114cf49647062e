/** One run on its hours: the bar is dragged, moved with the arrow keys, pinned, or opened to type a time. */
import { type KeyboardEvent, memo, type PointerEvent, type ReactNode, useRef, useState } from 'react'
import type { PlanDraft } from '#lib/plan/draft-plan.server.ts'
import { type MovableRun, slotAt, startMsOf } from '#lib/plan/types.ts'
import { fromToday, startText } from '#lib/plan/view.ts'
import { startWords } from '#lib/plan/words.ts'
import type { Axis } from './axis.ts'

export interface LaneActs {
  readonly onTry: (run: MovableRun, slot: number) => void
  readonly onMove: (run: MovableRun, slot: number) => void
  readonly onPin: (run: MovableRun) => void
  readonly onChoose: (run: MovableRun) => void
}
interface Props extends LaneActs {
  readonly draft: PlanDraft
  readonly run: MovableRun
  readonly slot: number
  readonly axis: Axis
  readonly isPinned: boolean
  /** What stands under the lane when it is open; `null` when it is not. */
  readonly panel: ReactNode
  /** Breaks its own hours, or has no room under the limit. */
  readonly trouble: string
}

/** Slots that Page up and Page down move by: half an hour and more. */
const PAGE_SLOTS = 6

export const Lane = memo(function Lane(props: Props) {
  const { draft, run, slot, axis, isPinned, panel, trouble, onTry, onMove, onPin, onChoose } = props
  const { grid, zone } = draft
  const lane = useRef<HTMLDivElement>(null)
  const grip = useRef(0)
  const [dragged, setDragged] = useState<number | null>(null)
  const shownMs = startMsOf(grid, run, dragged ?? slot)
  const endMs = shownMs + run.expectedMin * 60_000
  const span = (fromMs: number, toMs: number) => ({
    left: `${axis.percent(fromMs)}%`,
    width: `${axis.percent(toMs) - axis.percent(fromMs)}%`,
  })
  const inGrid = (wanted: number) => Math.min(Math.max(0, wanted), grid.slots - Math.ceil(run.longestMin / grid.slotMin) - 2)

  const press = (event: KeyboardEvent) => {
    const [first, last] = [Math.min(slotAt(grid, run.earliestMs) + 1, slotAt(grid, run.todayMs)), slotAt(grid, run.latestMs)]
    const to = {
      ArrowLeft: slot - 1,
      ArrowDown: slot - 1,
      ArrowRight: slot + 1,
      ArrowUp: slot + 1,
      PageDown: slot - PAGE_SLOTS,
      PageUp: slot + PAGE_SLOTS,
      Home: first,
      End: last,
    }[event.key]
    if (event.key === 'Escape') setDragged(null)
    if (event.key === 'Enter' || event.key === ' ') {
      event.preventDefault()
      onChoose(run)
    }
    if (to === undefined) return
    event.preventDefault()
    onMove(run, inGrid(to))
  }
  const slotUnder = (event: PointerEvent): number => {
    const rect = lane.current?.getBoundingClientRect()
    if (!rect) return slot
    const atMs = axis.fromMs + ((event.clientX - rect.left) / rect.width) * (axis.toMs - axis.fromMs) - grip.current
    return inGrid(Math.round((atMs - grid.originMs) / (grid.slotMin * 60_000)))
  }
  const follow = (event: PointerEvent) => {
    if (!event.currentTarget.hasPointerCapture(event.pointerId)) return
    const to = slotUnder(event)
    if (to !== (dragged ?? slot)) onTry(run, to)
    setDragged(to)
  }
  const drop = (event: PointerEvent) => {
    if (!event.currentTarget.hasPointerCapture(event.pointerId)) return
    if (event.type === 'pointerup' && dragged !== null && dragged !== slot) onMove(run, dragged)
    // Opened when it is let go: under a moving bar nothing may shift.
    else if (event.type === 'pointerup') onChoose(run)
    setDragged(null)
  }
  const grab = (event: PointerEvent<HTMLDivElement>) => {
    if (event.button !== 0) return
    const rect = lane.current?.getBoundingClientRect()
    if (!rect) return
    event.currentTarget.setPointerCapture(event.pointerId)
    grip.current = axis.fromMs + ((event.clientX - rect.left) / rect.width) * (axis.toMs - axis.fromMs) - shownMs
  }

  const colour = trouble ? 'border-2 border-crimson bg-sheet' : 'border border-sheet bg-copper'
  return (
    <li className="plan-lane grid items-center gap-x-3 border-t border-rule py-1">
      <span className="font-black">{run.code}</span>
      <div ref={lane} className="plan-track relative h-8">
        <span aria-hidden="true" className="absolute top-1/2 h-px bg-soft" style={span(run.earliestMs, run.latestMs)} />
        {shownMs !== run.todayMs && (
          <span
            aria-hidden="true"
            className="absolute inset-y-1.5 border border-dashed border-ink"
            style={span(run.todayMs, run.todayMs + run.expectedMin * 60_000)}
          />
        )}
        <span aria-hidden="true" className="absolute inset-y-1 bg-copper-wash" style={span(endMs, shownMs + run.longestMin * 60_000)} />
        <div
          role="slider"
          tabIndex={0}
          aria-label={`Start of ${run.code}`}
          aria-valuemin={0}
          aria-valuemax={grid.slots}
          aria-valuenow={dragged ?? slot}
          aria-valuetext={`${startText(run, shownMs, zone)}${isPinned ? '; pinned' : ''}${trouble ? `; ${trouble}` : ''}`}
          className={`absolute inset-y-1 min-w-6 cursor-ew-resize touch-none ${colour} ${panel ? 'outline-3 outline-offset-1 outline-well' : ''}`}
          style={span(shownMs, endMs)}
          onKeyDown={press}
          onPointerDown={grab}
          onPointerMove={follow}
          onPointerUp={drop}
          onPointerCancel={drop}
        />
        <span
          aria-hidden="true"
          className="absolute top-0 -translate-x-1/2 border-x-4 border-t-8 border-x-transparent border-t-verdigris"
          style={{ left: `${axis.percent(run.readyByAtMs)}%` }}
        />
      </div>
      <span className="plan-times text-small">
        <b>{startWords(shownMs, run.day, zone)}</b> <span className="text-soft">{fromToday(run, shownMs)}</span>
        {trouble && <span className="block font-bold text-crimson">{trouble}</span>}
      </span>
      <button
        type="button"
        className="plan-pin min-h-8 cursor-pointer text-small underline underline-offset-4"
        aria-pressed={isPinned}
        onClick={() => onPin(run)}
      >
        {isPinned ? 'Pinned' : 'Pin'}
        <span className="sr-only"> {run.code}</span>
      </button>
      {panel && <div className="plan-panel">{panel}</div>}
    </li>
  )
})
